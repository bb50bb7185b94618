/**
 * A second way to the state at given activity coefficients: a primal-dual interior point over all components, no elimination, no active set.
 *
 *   minimise  Σ c_i(x) − T·x   subject to  E·x = e,  G·x + s = h, s ≥ 0,     ln c_i = b_i + ν_i·x
 *
 * Newton on the optimality conditions with s·z = μ, μ falling (Boyd & Vandenberghe 2004, ch. 11). Steps are cut so that no exponent
 * changes by more than 3. Good for signs and six digits, which is what a check of "no state" needs.
 */
export interface Programme {
  n: number;
  /** Rows ν_i, and b_i. */
  rows: readonly Float64Array[];
  base: Float64Array;
  totals: Float64Array;
  equal: readonly { nu: Float64Array; value: number }[];
  below: readonly { nu: Float64Array; value: number }[];
}

export interface Point { x: Float64Array; s: Float64Array; z: Float64Array; y: Float64Array; c: Float64Array }

export function makePoint(p: Programme, x: Float64Array): Point {
  return { x: x.slice(), s: new Float64Array(p.below.length).fill(1), z: new Float64Array(p.below.length).fill(1e-3), y: new Float64Array(p.equal.length), c: new Float64Array(p.rows.length) };
}

const dot = (a: Float64Array, b: Float64Array): number => { let v = 0; for (let j = 0; j < a.length; j++) v += a[j] * b[j]; return v; };

/** Solves in place from the point at hand; @returns whether it got there. */
export function solveProgramme(p: Programme, at: Point): boolean {
  const { n } = p;
  const m = p.equal.length;
  const order = n + m;
  let scale = 1e-12;
  for (let j = 0; j < n; j++) scale = Math.max(scale, Math.abs(p.totals[j]));
  let mu = 1e-2 * scale;
  for (let step = 0; step < 300; step++) {
    const a = Array.from({ length: order }, () => new Float64Array(order + 1));
    const grad = p.totals.map((t) => -t);
    const size = p.totals.map((t) => Math.abs(t));
    p.rows.forEach((nu, i) => {
      const c = Math.exp(Math.min(p.base[i] + dot(nu, at.x), 300));
      at.c[i] = c;
      for (let j = 0; j < n; j++) {
        if (nu[j] === 0) continue;
        grad[j] += nu[j] * c;
        size[j] += Math.abs(nu[j]) * c;
        for (let k = 0; k < n; k++) a[j][k] += nu[j] * nu[k] * c;
      }
    });
    let worst = 0;
    const dual = grad.slice();
    p.equal.forEach((e, q) => { for (let j = 0; j < n; j++) { dual[j] += e.nu[j] * at.y[q]; size[j] += Math.abs(e.nu[j] * at.y[q]); } });
    p.below.forEach((g, q) => { for (let j = 0; j < n; j++) { dual[j] += g.nu[j] * at.z[q]; size[j] += Math.abs(g.nu[j] * at.z[q]); } });
    for (let j = 0; j < n; j++) worst = Math.max(worst, Math.abs(dual[j]) / Math.max(size[j], 1e-300));
    for (let j = 0; j < n; j++) a[j][order] = -dual[j];
    p.equal.forEach((e, q) => {
      const r = dot(e.nu, at.x) - e.value;
      worst = Math.max(worst, Math.abs(r));
      for (let j = 0; j < n; j++) { a[j][n + q] = e.nu[j]; a[n + q][j] = e.nu[j]; }
      a[n + q][order] = -r;
    });
    let gap = 0;
    p.below.forEach((g, q) => {
      const r = dot(g.nu, at.x) + at.s[q] - g.value;
      worst = Math.max(worst, Math.abs(r));
      gap = Math.max(gap, at.s[q] * at.z[q]);
      const w = at.z[q] / at.s[q];
      const t = (at.z[q] * r + mu) / at.s[q] - at.z[q];
      for (let j = 0; j < n; j++) {
        if (g.nu[j] === 0) continue;
        a[j][order] -= g.nu[j] * t;
        for (let k = 0; k < n; k++) a[j][k] += g.nu[j] * g.nu[k] * w;
      }
    });
    if (worst < 1e-9 && gap < 1e-13 * scale + 1e-24) return true;
    for (let j = 0; j < n; j++) a[j][j] += 1e-13 * a[j][j] + 1e-280;
    const d = eliminateRows(a, order);
    if (!d) return false;
    let longest = 0;
    p.rows.forEach((nu) => { let v = 0; for (let j = 0; j < n; j++) v += nu[j] * d[j]; longest = Math.max(longest, Math.abs(v)); });
    let t = longest > 3 ? 3 / longest : 1;
    const ds = new Float64Array(p.below.length);
    const dz = new Float64Array(p.below.length);
    p.below.forEach((g, q) => {
      let v = 0;
      for (let j = 0; j < n; j++) v += g.nu[j] * d[j];
      const r = dot(g.nu, at.x) + at.s[q] - g.value;
      ds[q] = -r - v;
      dz[q] = (mu - at.z[q] * ds[q]) / at.s[q] - at.z[q];
      if (ds[q] < 0) t = Math.min(t, 0.99 * at.s[q] / -ds[q]);
      if (dz[q] < 0) t = Math.min(t, 0.99 * at.z[q] / -dz[q]);
    });
    for (let j = 0; j < n; j++) at.x[j] += t * d[j];
    for (let q = 0; q < m; q++) at.y[q] += t * d[n + q];
    for (let q = 0; q < p.below.length; q++) { at.s[q] += t * ds[q]; at.z[q] += t * dz[q]; }
    if (t > 0.5) mu = Math.max(mu * 0.15, 1e-15 * scale);
  }
  return false;
}

/** Gaussian elimination with scaled partial pivoting on an augmented matrix. */
function eliminateRows(a: Float64Array[], order: number): Float64Array | null {
  for (const row of a) {
    let most = 0;
    for (let k = 0; k < order; k++) most = Math.max(most, Math.abs(row[k]));
    if (!(most > 0) || !Number.isFinite(most)) return null;
    for (let k = 0; k <= order; k++) row[k] /= most;
  }
  for (let k = 0; k < order; k++) {
    let best = k;
    for (let i = k + 1; i < order; i++) if (Math.abs(a[i][k]) > Math.abs(a[best][k])) best = i;
    if (!(Math.abs(a[best][k]) > 1e-300)) return null;
    [a[k], a[best]] = [a[best], a[k]];
    for (let i = k + 1; i < order; i++) {
      const f = a[i][k] / a[k][k];
      if (f !== 0) for (let j = k; j <= order; j++) a[i][j] -= f * a[k][j];
    }
  }
  const x = new Float64Array(order);
  for (let k = order - 1; k >= 0; k--) {
    let v = a[k][order];
    for (let j = k + 1; j < order; j++) v -= a[k][j] * x[j];
    x[k] = v / a[k][k];
  }
  return x.every(Number.isFinite) ? x : null;
}
