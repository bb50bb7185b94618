/**
 * LU factors of a small dense matrix, kept for several right sides (Golub & Van Loan, Matrix Computations, alg. 3.4.1), and one step of
 * iterative refinement against the matrix itself, so that badly scaled rows cost no digits.
 */
export interface Factors {
  order: number;
  /** The matrix as given, row-major, leading dimension `order`. */
  matrix: Float64Array;
  /** L below the diagonal, U on and above it. */
  lu: Float64Array;
  /** Row of the matrix that stands in row k of the factors. */
  rows: Int32Array;
  residual: Float64Array;
  correction: Float64Array;
}

export function makeFactors(capacity: number): Factors {
  return {
    order: 0, matrix: new Float64Array(capacity * capacity), lu: new Float64Array(capacity * capacity), rows: new Int32Array(capacity),
    residual: new Float64Array(capacity), correction: new Float64Array(capacity),
  };
}

/** Relative size of a pivot, in rows and columns of size 1, below which the matrix has no inverse. */
const LEAST_PIVOT = 1e-13;

/**
 * Factors `f.matrix` of order `f.order`; rows should be of like size. @returns −1, or the column whose pivot vanished: that unknown
 * then depends on those before it, and the factors are meaningless.
 */
export function factorise(f: Factors): number {
  const { order: n, lu, rows } = f;
  lu.set(f.matrix.subarray(0, n * n));
  for (let k = 0; k < n; k++) rows[k] = k;
  for (let k = 0; k < n; k++) {
    let best = k;
    let column = 0;
    for (let i = 0; i < n; i++) column = Math.max(column, Math.abs(f.matrix[i * n + k]));
    for (let i = k + 1; i < n; i++) if (Math.abs(lu[i * n + k]) > Math.abs(lu[best * n + k])) best = i;
    const pivot = lu[best * n + k];
    if (!(Math.abs(pivot) > LEAST_PIVOT * column) || !Number.isFinite(pivot)) return k;
    if (best !== k) {
      for (let j = 0; j < n; j++) { const t = lu[k * n + j]; lu[k * n + j] = lu[best * n + j]; lu[best * n + j] = t; }
      const t = rows[k]; rows[k] = rows[best]; rows[best] = t;
    }
    for (let i = k + 1; i < n; i++) {
      const factor = lu[i * n + k] / lu[k * n + k];
      lu[i * n + k] = factor;
      if (factor === 0) continue;
      for (let j = k + 1; j < n; j++) lu[i * n + j] -= factor * lu[k * n + j];
    }
  }
  return -1;
}

function substitute(f: Factors, right: Float64Array, out: Float64Array): void {
  const { order: n, lu, rows } = f;
  for (let k = 0; k < n; k++) {
    let sum = right[rows[k]];
    for (let j = 0; j < k; j++) sum -= lu[k * n + j] * out[j];
    out[k] = sum;
  }
  for (let k = n - 1; k >= 0; k--) {
    let sum = out[k];
    for (let j = k + 1; j < n; j++) sum -= lu[k * n + j] * out[j];
    out[k] = sum / lu[k * n + k];
  }
}

/** Solves for one right side. @param out solution, length ≥ order, not the array of `right`. */
export function solveFactored(f: Factors, right: Float64Array, out: Float64Array): void {
  const { order: n, matrix, residual, correction } = f;
  substitute(f, right, out);
  for (let i = 0; i < n; i++) {
    let sum = right[i];
    for (let j = 0; j < n; j++) sum -= matrix[i * n + j] * out[j];
    residual[i] = sum;
  }
  substitute(f, residual, correction);
  for (let i = 0; i < n; i++) out[i] += correction[i];
}
