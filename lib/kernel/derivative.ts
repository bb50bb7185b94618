/**
 * Exact derivatives of a solved state by the implicit function theorem (Dieudonné 1960, Foundations of Modern Analysis, 10.2):
 * F(u, p) = 0 at the state, so  F_u·du = −F_p·dp.  One linear system a state, one right side an input.
 *
 * Unknowns u, in this order: x_j of the components present; I and M = Σc (absent from the ideal model); λ_k of the active sources.
 * Equations, each divided by its own size:
 *     Σ_i W_ij c_i + Σ_k s_kj λ_k = T_j          components whose total is claimed (W = ν, or minus the equivalents of alkalinity)
 *     ν_m·x + w_m ln a_w = ρ_m                   held facts and solids
 *     ½ Σ z² c_i = I,   Σ c_i = M
 * with  d ln c_i = d ln K_i + ν_i·dx + w_i d ln a_w − d ln γ_i  (γ by I, A and B; the pH-dependent anion by its own fit).
 * Written from the state alone, like the certificate: it does not matter which path solved the row.
 *
 * A component of zero total has no ln a. Its species are linear in its total there: c_i = (g_i/Σ ν_ij g_i)·T_j with g_i = c_i/a_j, which
 * gives the one-sided derivative (`traceComponent`). Species with two of it, or with another absent component, vanish faster.
 * Inactive bounded solids stay inactive: at the very point where one appears the derivative is one-sided too.
 * Held phases whose compositions depend on each other (calcite + celestite = gypsum + strontianite) coexist at one point of their constants
 * only. One of them is left out; an input that moves it off the others has no derivative, and how much of each there is, is a choice.
 */
import { LEAST_WATER_ACTIVITY, WATER_LOWERING } from "./evaluate";
import { factorise, type Factors, makeFactors, solveFactored } from "./factor";
import { eliminate } from "./linear";
import type { Constants, Phase, Tableau } from "./tableau";

const LN10 = Math.LN10;

/** A solved state as it stands: copied out of the workspace, so that later stages may overwrite that. */
export interface StatePoint {
  c: Float64Array;
  x: Float64Array;
  present: Uint8Array;
  totals: Float64Array;
  usesAlkalinity: boolean;
  /** 1 where no total is claimed. */
  isFree: Uint8Array;
  constants: Constants;
  /** Active ties; `isSource` where the phase's own amount is free as well (gas and solids of a reaction). */
  ties: { phase: Phase; isSource: boolean }[];
}

/** What moves, per unit of an input. Zeroed by the caller before each use. */
export interface Seed {
  /** dT by component (hydrogen: minus the alkalinity where that is claimed). */
  totals: Float64Array;
  /** dρ by tie. */
  targets: Float64Array;
  /** d ln K, d ln K of solids, d ln K of the gas, dA, dB. */
  constants: Constants;
}

/** The answer to a seed. */
export interface Tangent {
  x: Float64Array;
  /** dc by species, also of an absent component's. */
  c: Float64Array;
  lnWater: number;
  strength: number;
  /** dλ by tie, 0 where it is no source; NaN where compositions depend on each other, so that amounts are a choice. */
  amounts: Float64Array;
}

export interface Linearisation {
  tableau: Tableau;
  state: StatePoint;
  factors: Factors;
  /** False where the equations have no unique solution near the state. */
  isRegular: boolean;
  /** Unknown of each component, or −1; of I (M follows), or −1; of each tie's amount, or −1. */
  column: Int32Array;
  strengthColumn: number;
  amountColumn: Int32Array;
  /** Ties that follow from others: tie = Σ coefficient·other. */
  dependents: { tie: number; of: number[]; coefficients: Float64Array }[];
  isDependent: Uint8Array;
  scale: Float64Array;
  lnGamma: Float64Array;
  byStrength: Float64Array; byA: Float64Array; byB: Float64Array;
  lnWater: number; waterSlope: number;
  right: Float64Array;
  solution: Float64Array;
  moved: Float64Array;
}

export function makeLinearisation(tableau: Tableau, mostTies: number): Linearisation {
  const n = tableau.componentCount;
  const k = tableau.gamma.count;
  const size = n + 2 + mostTies;
  const f = (length: number) => new Float64Array(length);
  return {
    tableau, state: { c: f(0), x: f(0), present: new Uint8Array(0), totals: f(0), usesAlkalinity: false, isFree: new Uint8Array(0), constants: { lnK: f(0), solidLnK: f(0), gasLnK: 0, debyeA: 0, debyeB: 0 }, ties: [] },
    factors: makeFactors(size), isRegular: false, column: new Int32Array(n), strengthColumn: -1, amountColumn: new Int32Array(mostTies), dependents: [], isDependent: new Uint8Array(mostTies),
    scale: f(size), lnGamma: f(k), byStrength: f(k), byA: f(k), byB: f(k), lnWater: 0, waterSlope: 0,
    right: f(size), solution: f(size), moved: f(tableau.speciesCount),
  };
}

export function makeTangent(tableau: Tableau, mostTies: number): Tangent {
  return { x: new Float64Array(tableau.componentCount), c: new Float64Array(tableau.speciesCount), lnWater: 0, strength: 0, amounts: new Float64Array(mostTies) };
}

/** Builds and factors F_u at a state. */
export function linearise(lin: Linearisation, state: StatePoint): void {
  const { tableau, factors } = lin;
  lin.state = state;
  bindActivity(lin);
  findDependents(lin);
  let order = 0;
  for (let j = 0; j < tableau.componentCount; j++) lin.column[j] = state.present[j] ? order++ : -1;
  lin.strengthColumn = tableau.gamma.isIdeal ? -1 : order;
  if (!tableau.gamma.isIdeal) order += 2;
  state.ties.forEach((tie, k) => { lin.amountColumn[k] = tie.isSource && !lin.isDependent[k] ? order++ : -1; });
  factors.order = order;
  factors.matrix.fill(0, 0, order * order);
  fillRows(lin);
  lin.isRegular = factorise(factors) < 0;
}

function findDependents(lin: Linearisation): void {
  const { state, tableau, isDependent } = lin;
  const columns = Array.from({ length: tableau.componentCount }, (_, j) => j);
  const kept: number[] = [];
  lin.dependents.length = 0;
  state.ties.forEach((tie, k) => {
    isDependent[k] = 0;
    const found = kept.length === 0 ? null : eliminate([...kept, k].map((m) => state.ties[m].phase.nu), tableau.componentCount, columns);
    if (!found || !("dependentRow" in found)) { kept.push(k); return; }
    isDependent[k] = 1;
    lin.dependents.push({ tie: k, of: [...kept], coefficients: found.coefficients });
  });
}

function bindActivity(lin: Linearisation): void {
  const { tableau, state, lnGamma, byStrength, byA, byB } = lin;
  const { gamma: g } = tableau;
  lin.lnWater = 0;
  lin.waterSlope = 0;
  if (g.isIdeal) return;
  let strength = 0;
  let solutes = 0;
  for (let i = 0; i < tableau.speciesCount; i++) { strength += 0.5 * tableau.charge[i] ** 2 * state.c[i]; solutes += state.c[i]; }
  const { debyeA, debyeB } = state.constants;
  const root = Math.sqrt(strength);
  for (let k = 0; k < g.count; k++) {
    const size = g.ionSize[k] > 0 ? debyeB * g.ionSize[k] : 1;
    const q = 1 / (1 + size * root);
    const z2 = g.squaredCharge[k];
    const long = root * q - g.relativeSlope * strength;
    lnGamma[k] = LN10 * (-debyeA * z2 * long + g.slope[k] * strength);
    byStrength[k] = LN10 * (-debyeA * z2 * (0.5 * q * q / root - g.relativeSlope) + g.slope[k]);
    byA[k] = -LN10 * z2 * long;
    byB[k] = LN10 * debyeA * z2 * g.ionSize[k] * strength * q * q;
  }
  for (let k = 0; k < g.count; k++) {
    const m = g.hydrogenMultiple[k];
    if (m === 0) continue;
    for (const values of [lnGamma, byStrength, byA, byB]) values[k] = m * values[g.hydrogenClass];
  }
  const activity = 1 - WATER_LOWERING * solutes;
  lin.lnWater = Math.log(Math.max(activity, LEAST_WATER_ACTIVITY));
  lin.waterSlope = activity > LEAST_WATER_ACTIVITY ? -WATER_LOWERING / activity : 0;
}

/** ∂ ln c_i/∂x_j. */
function exponent(tableau: Tableau, state: StatePoint, i: number, j: number): number {
  if (i !== tableau.varying) return tableau.nu[i * tableau.componentCount + j];
  if (j === tableau.varyingAcid) return 1;
  const [, k1, k2] = tableau.varyingFit;
  return j === 0 ? k1 + 2 * k2 * (-state.x[0] / LN10) - 1 : 0;
}

function weight(tableau: Tableau, state: StatePoint, i: number, j: number): number {
  return j === 0 && state.usesAlkalinity ? -tableau.alkalinity[i] : tableau.nu[i * tableau.componentCount + j];
}

function fillRows(lin: Linearisation): void {
  const { tableau, state, factors, column, strengthColumn, amountColumn, scale } = lin;
  const { order, matrix } = factors;
  const n = tableau.componentCount;
  let row = 0;
  const addSpecies = (i: number, w: number) => {
    const part = w * state.c[i] / scale[row];
    for (let j = 0; j < n; j++) if (column[j] >= 0) matrix[row * order + column[j]] += part * exponent(tableau, state, i, j);
    if (strengthColumn < 0) return;
    matrix[row * order + strengthColumn] -= part * lin.byStrength[tableau.gammaClass[i]];
    matrix[row * order + strengthColumn + 1] += part * tableau.water[i] * lin.waterSlope;
  };
  for (let j = 0; j < n; j++) {
    if (column[j] < 0 || state.isFree[j]) continue;
    let size = Math.abs(state.totals[j]);
    for (let i = 0; i < tableau.speciesCount; i++) size += Math.abs(weight(tableau, state, i, j)) * state.c[i];
    scale[row] = size;
    for (let i = 0; i < tableau.speciesCount; i++) { const w = weight(tableau, state, i, j); if (w !== 0) addSpecies(i, w); }
    state.ties.forEach(({ phase }, k) => { if (amountColumn[k] >= 0) matrix[row * order + amountColumn[k]] += phase.nu[j] / size; });
    row++;
  }
  for (const [k, { phase }] of state.ties.entries()) {
    if (lin.isDependent[k]) continue;
    scale[row] = 1;
    for (let j = 0; j < n; j++) if (phase.nu[j] !== 0 && column[j] >= 0) matrix[row * order + column[j]] += phase.nu[j];
    if (strengthColumn >= 0) matrix[row * order + strengthColumn + 1] += phase.water * lin.waterSlope;
    row++;
  }
  if (strengthColumn < 0) return;
  for (const isStrength of [true, false]) {
    const of = (i: number) => (isStrength ? 0.5 * tableau.charge[i] ** 2 : 1);
    scale[row] = 0;
    for (let i = 0; i < tableau.speciesCount; i++) scale[row] += of(i) * state.c[i];
    for (let i = 0; i < tableau.speciesCount; i++) if (state.c[i] > 0) addSpecies(i, of(i));
    matrix[row * order + strengthColumn + (isStrength ? 0 : 1)] -= 1 / scale[row];
    row++;
  }
}

/** Solves for one seed. @returns false where the state is singular; `out` is then NaN. */
export function solveTangent(lin: Linearisation, seed: Seed, out: Tangent): boolean {
  const { tableau, state, factors, column, strengthColumn, amountColumn, right, solution, moved, scale } = lin;
  if (!lin.isRegular || !keepsDependents(lin, seed)) { out.x.fill(NaN); out.c.fill(NaN); out.amounts.fill(NaN); out.lnWater = NaN; out.strength = NaN; return false; }
  const n = tableau.componentCount;
  // Change of each concentration with the unknowns held: by constants, and by traces of components that were not there.
  for (let i = 0; i < tableau.speciesCount; i++) {
    const k = tableau.gammaClass[i];
    const byConstants = i === tableau.varying ? 0 : seed.constants.lnK[i];
    moved[i] = state.c[i] === 0 ? 0 : state.c[i] * (byConstants - lin.byA[k] * seed.constants.debyeA - lin.byB[k] * seed.constants.debyeB);
  }
  for (let j = 0; j < n; j++) if (column[j] < 0 && seed.totals[j] !== 0) traceComponent(lin, j, seed.totals[j]);
  let row = 0;
  for (let j = 0; j < n; j++) {
    if (column[j] < 0 || state.isFree[j]) continue;
    let v = seed.totals[j];
    for (let i = 0; i < tableau.speciesCount; i++) v -= weight(tableau, state, i, j) * moved[i];
    right[row] = v / scale[row];
    row++;
  }
  for (let k = 0; k < state.ties.length; k++) if (!lin.isDependent[k]) right[row++] = seed.targets[k];
  if (strengthColumn >= 0) {
    let I = 0;
    let M = 0;
    for (let i = 0; i < tableau.speciesCount; i++) { I -= 0.5 * tableau.charge[i] ** 2 * moved[i]; M -= moved[i]; }
    right[row] = I / scale[row];
    right[row + 1] = M / scale[row + 1];
  }
  solveFactored(factors, right, solution);
  for (let j = 0; j < n; j++) out.x[j] = column[j] >= 0 ? solution[column[j]] : NaN;
  out.strength = strengthColumn >= 0 ? solution[strengthColumn] : 0;
  out.lnWater = strengthColumn >= 0 ? lin.waterSlope * solution[strengthColumn + 1] : 0;
  for (let k = 0; k < state.ties.length; k++) out.amounts[k] = amountColumn[k] >= 0 ? solution[amountColumn[k]] : 0;
  for (const { tie, of, coefficients } of lin.dependents) {
    out.amounts[tie] = NaN;
    of.forEach((other, m) => { if (coefficients[m] !== 0) out.amounts[other] = NaN; });
  }
  readConcentrations(lin, out);
  return true;
}

/** Whether phases that depend on each other stay at one point together. */
function keepsDependents({ dependents }: Linearisation, seed: Seed): boolean {
  return dependents.every(({ tie, of, coefficients }) => {
    let off = seed.targets[tie];
    let size = Math.abs(off);
    of.forEach((other, m) => { off -= coefficients[m] * seed.targets[other]; size += Math.abs(coefficients[m] * seed.targets[other]); });
    return Math.abs(off) <= 1e-9 * size;
  });
}

/** Adds to `moved` what a trace of an absent component puts into its species. */
function traceComponent(lin: Linearisation, component: number, amount: number): void {
  const { tableau, state, lnGamma, moved } = lin;
  const n = tableau.componentCount;
  const share = new Float64Array(tableau.speciesCount);
  let all = 0;
  for (let i = 0; i < tableau.speciesCount; i++) {
    if (tableau.nu[i * n + component] !== 1) continue;
    let e = state.constants.lnK[i] + tableau.water[i] * lin.lnWater - lnGamma[tableau.gammaClass[i]];
    for (let j = 0; j < n; j++) {
      if (j === component || tableau.nu[i * n + j] === 0) continue;
      if (!state.present[j]) { e = -Infinity; break; }
      e += tableau.nu[i * n + j] * state.x[j];
    }
    if (i === tableau.varying) {
      const [k0, k1, k2] = tableau.varyingFit;
      const p = -state.x[0] / LN10;
      e = LN10 * (p - k0 - k1 * p - k2 * p * p) - lnGamma[tableau.gammaClass[i]];
    }
    share[i] = Math.exp(e);
    all += share[i];
  }
  for (let i = 0; i < share.length; i++) if (share[i] > 0) moved[i] += amount * share[i] / all;
}

function readConcentrations(lin: Linearisation, out: Tangent): void {
  const { tableau, state, column, moved } = lin;
  const n = tableau.componentCount;
  for (let i = 0; i < tableau.speciesCount; i++) {
    let v = tableau.water[i] * out.lnWater - lin.byStrength[tableau.gammaClass[i]] * out.strength;
    for (let j = 0; j < n; j++) if (column[j] >= 0) v += exponent(tableau, state, i, j) * out.x[j];
    out.c[i] = state.c[i] === 0 ? moved[i] : state.c[i] * v + moved[i];
  }
}
