/**
 * Small dense linear algebra on row-major arrays with a fixed leading dimension, in place, no allocation.
 */

/**
 * Solves A·x = b by Gaussian elimination with partial pivoting (Golub & Van Loan, Matrix Computations, alg. 3.4.1).
 * @param a n × n block of a row-major array with leading dimension `ld`; destroyed.
 * @param b right side of length ≥ n; holds x on return.
 * @returns false where a pivot is zero or not a number; `a` and `b` are then meaningless.
 */
export function solveDense(a: Float64Array, b: Float64Array, n: number, ld: number): boolean {
  for (let k = 0; k < n; k++) {
    let best = Math.abs(a[k * ld + k]);
    let pivotRow = k;
    for (let i = k + 1; i < n; i++) {
      const size = Math.abs(a[i * ld + k]);
      if (size > best) { best = size; pivotRow = i; }
    }
    if (!(best > 1e-300) || best === Infinity) return false;
    if (pivotRow !== k) {
      for (let j = k; j < n; j++) {
        const t = a[k * ld + j]; a[k * ld + j] = a[pivotRow * ld + j]; a[pivotRow * ld + j] = t;
      }
      const t = b[k]; b[k] = b[pivotRow]; b[pivotRow] = t;
    }
    const inverse = 1 / a[k * ld + k];
    for (let i = k + 1; i < n; i++) {
      const factor = a[i * ld + k] * inverse;
      if (factor === 0) continue; // the rows are sparse: half of all factors are
      for (let j = k + 1; j < n; j++) a[i * ld + j] -= factor * a[k * ld + j];
      b[i] -= factor * b[k];
    }
  }
  for (let k = n - 1; k >= 0; k--) {
    let sum = b[k];
    for (let j = k + 1; j < n; j++) sum -= a[k * ld + j] * b[j];
    b[k] = sum / a[k * ld + k];
    if (!Number.isFinite(b[k])) return false;
  }
  return true;
}

export interface Elimination {
  /** Pivot column of each row. */
  pivots: number[];
  /** Columns without a pivot, in ascending order. */
  free: number[];
  /** Rows reduced: identity in the pivot columns; row-major m × n. */
  reduced: Float64Array;
  /** E with E·rows = reduced, m × m. */
  transform: Float64Array;
}

/**
 * Gauss–Jordan elimination of a few row vectors, taking pivots in the given order of columns.
 * @param rows m vectors of length n.
 * @param preference all n columns, the most wanted pivot first.
 * @param wanted pivot to try first for each row, before the others.
 * @returns the elimination, or the index of the first row that depends on the rows before it, with its coefficients over them.
 */
export function eliminate(rows: readonly Float64Array[], n: number, preference: readonly number[], wanted: readonly number[] = []):
  Elimination | { dependentRow: number; coefficients: Float64Array } {
  const m = rows.length;
  const a = new Float64Array(m * n);
  const e = new Float64Array(m * m);
  rows.forEach((row, i) => { for (let j = 0; j < n; j++) a[i * n + j] = row[j]; e[i * m + i] = 1; });
  const pivots: number[] = [];
  for (let i = 0; i < m; i++) {
    for (let k = 0; k < i; k++) addRow(a, e, n, m, i, k, -a[i * n + pivots[k]]);
    const isUsable = (j: number) => Math.abs(a[i * n + j]) > 1e-9;
    const pivot = i < wanted.length && isUsable(wanted[i]) ? wanted[i] : preference.find(isUsable);
    if (pivot === undefined) {
      // 0 = Σ_k e_ik·row_k with e_ii = 1, so row_i = −Σ_{k<i} e_ik·row_k.
      return { dependentRow: i, coefficients: Float64Array.from({ length: i }, (_, k) => -e[i * m + k]) };
    }
    const scale = 1 / a[i * n + pivot];
    for (let j = 0; j < n; j++) a[i * n + j] *= scale;
    for (let j = 0; j < m; j++) e[i * m + j] *= scale;
    a[i * n + pivot] = 1;
    pivots.push(pivot);
    for (let k = 0; k < i; k++) addRow(a, e, n, m, k, i, -a[k * n + pivot]);
  }
  const free: number[] = [];
  for (let j = 0; j < n; j++) if (!pivots.includes(j)) free.push(j);
  return { pivots, free, reduced: a, transform: e };
}

function addRow(a: Float64Array, e: Float64Array, n: number, m: number, to: number, from: number, factor: number): void {
  if (factor === 0) return;
  for (let j = 0; j < n; j++) a[to * n + j] += factor * a[from * n + j];
  for (let j = 0; j < m; j++) e[to * m + j] += factor * e[from * m + j];
}

/** Σ a_i·b_i with Neumaier's compensation (1974, Z. Angew. Math. Mech. 54:39), so that equal and opposite totals cancel to the last digit. */
export function compensatedDot(a: Float64Array, b: Float64Array, n: number): number {
  let sum = 0;
  let lost = 0;
  for (let i = 0; i < n; i++) {
    const term = a[i] * b[i];
    const next = sum + term;
    lost += Math.abs(sum) >= Math.abs(term) ? sum - next + term : term - next + sum;
    sum = next;
  }
  return sum + lost;
}
