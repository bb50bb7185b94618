/**
 * Values and derivatives of a system at one point: concentrations, the two sides of each balance, and the Jacobian.
 *
 * Each balance a is kept as its two sides, both positive:  P_a = Σ_{W>0} W c + max(0, −T_a),  Q_a = Σ_{W<0} |W| c + max(0, T_a),
 * and is solved when P_a = Q_a. Two forms of the residual use the same tables:
 *   logarithmic  G_a = ln(P_a/Q_a), near-linear in y over many decades, dimensionless, so traces weigh as much as major ions;
 *   linear       F_a = (P_a − Q_a)/(P_a + Q_a), the scaled gradient of the convex function.
 */
import { generateCode, SOLVES_BEFORE_CODE } from "./generated";
import type { System } from "./system";
import type { Tableau } from "./tableau";
import type { Workspace } from "./workspace";

const LN10 = Math.LN10;
/** Garrels & Christ 1965: a_w = 1 − 0.017·Σc. */
export const WATER_LOWERING = 0.017;
/** The linear law ends in nonsense near 59 mol/kg; below this activity it is held constant so that logarithms stay finite. */
export const LEAST_WATER_ACTIVITY = 0.02;

/** Fills the coefficients of log10 γ for the temperature in `ws.constants`. Call when the constants change. */
export function bindGamma(tableau: Tableau, ws: Workspace): void {
  const g = tableau.gamma;
  const { debyeA, debyeB } = ws.constants;
  for (let k = 0; k < g.count; k++) {
    const az = debyeA * g.squaredCharge[k];
    ws.debyeAz[k] = az;
    ws.debyeD[k] = g.ionSize[k] > 0 ? debyeB * g.ionSize[k] : 1;
    ws.debyeBeta[k] = g.slope[k] + g.relativeSlope * az;
  }
}

/** ln γ of each class at `ws.ionicStrength`, with d ln γ / d ln I, and ln a_w at `ws.soluteSum`, with d ln a_w / d ln M. */
export function evaluateActivity(tableau: Tableau, ws: Workspace): void {
  const g = tableau.gamma;
  if (g.isIdeal) return; // lnGamma, slopes and lnWater are zero from the start
  const ionicStrength = ws.ionicStrength;
  const root = Math.sqrt(ionicStrength);
  for (let k = 0; k < g.count; k++) {
    if (g.hydrogenMultiple[k] !== 0) continue;
    const q = 1 / (1 + ws.debyeD[k] * root);
    ws.lnGamma[k] = LN10 * (-ws.debyeAz[k] * root * q + ws.debyeBeta[k] * ionicStrength);
    ws.gammaSlope[k] = LN10 * (-0.5 * ws.debyeAz[k] * root * q * q + ws.debyeBeta[k] * ionicStrength);
  }
  for (let k = 0; k < g.count; k++) {
    if (g.hydrogenMultiple[k] === 0) continue;
    ws.lnGamma[k] = g.hydrogenMultiple[k] * ws.lnGamma[g.hydrogenClass];
    ws.gammaSlope[k] = g.hydrogenMultiple[k] * ws.gammaSlope[g.hydrogenClass];
  }
  const activity = 1 - WATER_LOWERING * ws.soluteSum;
  if (activity > LEAST_WATER_ACTIVITY) {
    ws.lnWater = Math.log(activity);
    ws.waterSlope = -WATER_LOWERING * ws.soluteSum / activity;
  } else {
    ws.lnWater = Math.log(LEAST_WATER_ACTIVITY);
    ws.waterSlope = 0;
  }
}

/** Start of a solve: constants and totals in the system's terms, y from `ws.x`. */
export function loadSystem(system: System, ws: Workspace, n: number): void {
  if (++system.solves === SOLVES_BEFORE_CODE) system.code = generateCode(system);
  const { lnK } = ws.constants;
  const phaseCount = system.phases.length;
  for (let s = 0; s < system.species.length; s++) {
    let v = lnK[system.species[s]];
    for (let k = 0; k < phaseCount; k++) v += system.shift[s * phaseCount + k] * ws.targets[k];
    ws.base[s] = v;
  }
  for (let a = 0; a < system.size; a++) {
    let v = 0;
    for (let j = 0; j < n; j++) v += system.r[a * n + j] * ws.totals[j];
    ws.balanceTotal[a] = v;
  }
  for (let b = 0; b < system.size; b++) ws.y[b] = ws.x[system.free[b]];
}

/** Concentrations at (y, I, M), the sides P and Q of each balance, and the I and M that these concentrations have. */
export function evaluateSystem(system: System, ws: Workspace): void {
  if (system.code) { system.code.evaluate(ws); return; }
  const { nStart, nColumn, nValue, wStart, wRow, wValue, gammaClass, water, charge } = system;
  const { y, base, cs, lnGamma, plus, minus, balanceTotal, lnWater } = ws;
  for (let a = 0; a < system.size; a++) {
    const total = balanceTotal[a];
    plus[a] = total < 0 ? -total : 0;
    minus[a] = total > 0 ? total : 0;
  }
  let sumI = 0;
  let sumM = 0;
  let lnAcid = 0;
  const count = gammaClass.length;
  for (let s = 0; s < count; s++) {
    let e = base[s] + water[s] * lnWater - lnGamma[gammaClass[s]];
    if (s === system.varying) e = varyingExponent(system, ws, lnAcid);
    else for (let q = nStart[s], end = nStart[s + 1]; q < end; q++) e += nValue[q] * y[nColumn[q]];
    if (s === system.varyingAcid) lnAcid = e;
    const c = Math.exp(e);
    cs[s] = c;
    for (let q = wStart[s], end = wStart[s + 1]; q < end; q++) {
      const part = wValue[q] * c;
      if (part > 0) plus[wRow[q]] += part; else minus[wRow[q]] -= part;
    }
    const z = charge[s];
    sumI += z * z * c;
    sumM += c;
  }
  ws.sumI = 0.5 * sumI;
  ws.sumM = sumM;
}

/** ln c of the pH-dependent anion; also refreshes its exponents, which are the slopes of that line at this pH. */
function varyingExponent(system: System, ws: Workspace, lnAcid: number): number {
  const [k0, k1, k2] = ws.varyingFit;
  // Species 0 is the hydrogen ion, always present and first: x_H = ln c_H + ln γ_H.
  const x = Math.log(ws.cs[0]) + ws.lnGamma[system.gammaClass[0]];
  const p = -x / LN10;
  const slope = k1 + 2 * k2 * p - 1;
  const start = system.nStart[system.varying];
  for (let q = 0; q < system.varyingAcidValue.length; q++) {
    system.nValue[start + q] = system.varyingAcidValue[q] + slope * system.varyingHydrogenValue[q];
  }
  return lnAcid - LN10 * (k0 + k1 * p + k2 * p * p) - x - ws.lnGamma[system.gammaClass[system.varying]];
}

/**
 * Jacobian of the balances by y into `ws.matrix`.
 * @param form "log": rows of ln(P/Q); "bordered": those and, as rows and columns size and size+1, ln(I(c)/I) and ln(M(c)/M) by ln I and
 *   ln M; "linear": rows of (P − Q)/(P + Q), P and Q in the divisor held.
 * @returns the order of the matrix, which is its leading dimension too.
 */
export function assembleJacobian(system: System, ws: Workspace, form: "log" | "bordered" | "linear"): number {
  const { nStart, nColumn, nValue, wStart, wRow, wValue, gammaClass, water, charge, size } = system;
  const { cs, matrix, plus, minus, gammaSlope, waterSlope } = ws;
  const bordered = form === "bordered";
  if (system.code && form !== "linear") {
    if (bordered) system.code.assembleBordered(ws); else system.code.assembleLog(ws);
    return bordered ? size + 2 : size;
  }
  const isLog = form !== "linear";
  const ld = bordered ? size + 2 : size;
  matrix.fill(0, 0, ld * ld);
  const perI = bordered ? 0.5 / ws.sumI : 0;
  const perM = bordered ? 1 / ws.sumM : 0;
  const rowI = size * ld;
  const rowM = rowI + ld;
  for (let s = 0, count = gammaClass.length; s < count; s++) {
    const c = cs[s];
    const from = nStart[s];
    const to = nStart[s + 1];
    const slopeI = -gammaSlope[gammaClass[s]];
    const slopeM = water[s] * waterSlope;
    for (let p = wStart[s], end = wStart[s + 1]; p < end; p++) {
      const a = wRow[p];
      const w = wValue[p];
      const f = w * c * (isLog ? 1 / (w > 0 ? plus[a] : minus[a]) : 1 / (plus[a] + minus[a]));
      const row = a * ld;
      for (let q = from; q < to; q++) matrix[row + nColumn[q]] += f * nValue[q];
      if (bordered) { matrix[row + size] += f * slopeI; matrix[row + size + 1] += f * slopeM; }
    }
    if (!bordered) continue;
    const z = charge[s];
    const fI = z * z * c * perI;
    const fM = c * perM;
    for (let q = from; q < to; q++) {
      const v = nValue[q];
      matrix[rowI + nColumn[q]] += fI * v;
      matrix[rowM + nColumn[q]] += fM * v;
    }
    matrix[rowI + size] += fI * slopeI;
    matrix[rowI + size + 1] += fI * slopeM;
    matrix[rowM + size] += fM * slopeI;
    matrix[rowM + size + 1] += fM * slopeM;
  }
  if (bordered) { matrix[rowI + size] -= 1; matrix[rowM + size + 1] -= 1; }
  return ld;
}

/** End of a solve: c, x by component and the amounts λ of the sources, from the system's terms back to the tableau's. */
export function unloadSystem(system: System, tableau: Tableau, ws: Workspace): void {
  const n = tableau.componentCount;
  const phaseCount = system.phases.length;
  ws.c.fill(0);
  for (let s = 0; s < system.species.length; s++) ws.c[system.species[s]] = ws.cs[s];
  for (let j = 0; j < n; j++) {
    if (!system.present[j]) { ws.x[j] = NaN; continue; }
    let v = 0;
    for (let b = 0; b < system.size; b++) v += system.z[j * system.size + b] * ws.y[b];
    for (let k = 0; k < phaseCount; k++) {
      v += system.x[j * phaseCount + k] * (ws.targets[k] - system.phases[k].water * ws.lnWater);
    }
    ws.x[j] = v;
  }
  const sourceCount = system.sources.length;
  for (let k = 0; k < sourceCount; k++) {
    let amount = 0;
    for (let m = 0; m < sourceCount; m++) {
      const inverse = system.sourceInverse[m * sourceCount + k];
      if (inverse !== 0) amount += inverse * (ws.totals[system.sourcePivots[m]] - componentSum(tableau, ws.c, system.sourcePivots[m]));
    }
    ws.amounts[k] = amount;
  }
}

/** S_j = Σ_i ν_ij·c_i, mol/kg. */
export function componentSum(tableau: Tableau, c: Float64Array, component: number): number {
  const n = tableau.componentCount;
  let sum = 0;
  for (let i = 0; i < tableau.speciesCount; i++) sum += tableau.nu[i * n + component] * c[i];
  return sum;
}
