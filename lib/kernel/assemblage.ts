/**
 * The assemblage of solids of a reacting water: which solids are held at equilibrium, and how much of each comes or goes.
 *
 * With ρ_m = ln K_m + SI_m·ln 10 and amounts λ_m, the state is the one point where
 *     ν_m·x + w_m·ln a_w ≤ ρ_m,   λ_m ≥ 0,   λ_m·(ρ_m − ν_m·x − w_m·ln a_w) = 0     for solids that may form or have a supply,
 *     ν_m·x + w_m·ln a_w = ρ_m,   λ_m free                                           for solids in excess,
 *     Σ_i ν_i c_i + Σ_m ν_m λ_m = T,
 * where a supply A has been added to T as A·ν_m and λ_m is what is left of it (A − λ_m has dissolved).
 *
 * Active set: hold the solids in excess; solve; drop the held solid of most negative amount, else hold the most exceeded one, until
 * neither exists. If the newcomer depends on the held ones (n = Σ a_m n_m), the held solid that a growing amount of the newcomer uses up
 * first, min λ_m/a_m over a_m > 0, makes room for it (dual step of Goldfarb & Idnani 1983, Math. Program. 27:1).
 * Solids of equal ν: only the one of lowest ρ may be held; the caller sees to it (`mayHold`).
 * Stop: amounts ≥ −1e-14·scale, exceedance ≤ 1e-11. Bound: 20 + 6·solids changes. At fixed γ the point is unique (a convex programme with
 * linear constraints; Boyd & Vandenberghe 2004, ch. 5 and 10).
 */
import { CLOSURE, type Kernel, systemFor } from "./kernel";
import { solveSystem, type SolveResult } from "./solve-system";
import { coldStart, SUPPLIED } from "./start";
import type { DependentPhases, System } from "./system";

export interface Assemblage {
  closure: typeof CLOSURE.balanceTotal;
  /** 1 where a component is present. */
  present: Uint8Array;
  /** Hydrogen is never held; ln a(CO2) where the gas is open, else NaN. */
  xH: number;
  xC: number;
  /** Bound on the steps of any one Newton run. */
  maxIterations: number;
  /** Solids that take part, as indices into kernel.solids. */
  count: number;
  solids: Int32Array;
  isExcess: Uint8Array;
  /** False for a solid that another of the same composition keeps from equilibrium. */
  mayHold: Uint8Array;
  /** ρ. */
  targets: Float64Array;
  /** Held at the end, and λ (0 where not held), in the order of `solids`. */
  isHeld: Uint8Array;
  amounts: Float64Array;
  /** λ of the gas where it is open: negative where taken up. */
  gasAmount: number;
}

export function makeAssemblage(size: number): Assemblage {
  return {
    closure: CLOSURE.balanceTotal, present: new Uint8Array(0), xH: NaN, xC: NaN, maxIterations: 100,
    count: 0, solids: new Int32Array(size), isExcess: new Uint8Array(size), mayHold: new Uint8Array(size),
    targets: new Float64Array(size), isHeld: new Uint8Array(size), amounts: new Float64Array(size), gasAmount: 0,
  };
}

/** "dependent": the held solids do not have independent compositions; isHeld names the set. */
export type AssemblageResult = "solved" | "dependent" | "no-finite-solution" | "failed";

const EXCEEDANCE = 1e-11;
const NEGATIVE = 1e-14;

/**
 * @param kernel its workspace holds constants, totals (supplies included) and the start (`x`, I, M; NaN in x where a component is new).
 * @param a filled by the caller but for isHeld, amounts and gasAmount, which are the answer beside the state in the workspace.
 */
export function solveAssemblage(kernel: Kernel, a: Assemblage): AssemblageResult {
  for (let k = 0; k < a.count; k++) { a.isHeld[k] = a.isExcess[k]; a.amounts[k] = 0; }
  const bound = 20 + 6 * a.count;
  estimateAbundance(kernel, a);
  for (let change = 0; change < bound; change++) {
    const system = heldSystem(kernel, a);
    if ("dependent" in system) return "dependent";
    const solved = solveHeld(kernel, a, system);
    if (solved !== "solved") return solved;
    readAmounts(kernel, a);
    const worst = mostNegative(kernel, a);
    if (worst >= 0) { a.isHeld[worst] = 0; continue; }
    const next = mostExceeded(kernel, a);
    if (next < 0) return "solved";
    if (!join(kernel, a, next)) return "dependent";
  }
  return "failed";
}

/** What an excess solid may bring of each component, mol/kg: more than any trace, less than what makes up a mineral water. */
const BROUGHT = 1e-3;

function estimateAbundance(kernel: Kernel, a: Assemblage): void {
  const { abundance } = kernel.pattern;
  for (let j = 0; j < abundance.length; j++) abundance[j] = a.present[j] ? kernel.ws.totals[j] : 0;
  for (let k = 0; k < a.count; k++) {
    if (!a.isExcess[k]) continue;
    const { nu } = kernel.solids[a.solids[k]];
    for (let j = 0; j < nu.length; j++) if (nu[j] > 0) abundance[j] += BROUGHT;
  }
}

function heldSystem(kernel: Kernel, a: Assemblage): System | DependentPhases {
  const { pattern } = kernel;
  pattern.closure = Number.isNaN(a.xC) ? CLOSURE.react : CLOSURE.reactGas;
  pattern.present = a.present;
  pattern.usesAlkalinity = false;
  pattern.heldCount = 0;
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) pattern.held[pattern.heldCount++] = a.solids[k];
  return systemFor(kernel);
}

function setTargets(kernel: Kernel, a: Assemblage): void {
  const { targets } = kernel.ws;
  let count = 0;
  if (!Number.isNaN(a.xC)) targets[count++] = a.xC;
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) targets[count++] = a.targets[k];
}

/** From the state at hand; from a cold start where that fails. */
function solveHeld(kernel: Kernel, a: Assemblage, system: System): SolveResult {
  const { ws, tableau } = kernel;
  const { present, maxIterations } = a;
  setTargets(kernel, a);
  for (let j = 0; j < tableau.componentCount; j++) {
    if (present[j] && !(ws.x[j] > -200 && ws.x[j] < 50)) ws.x[j] = Math.log(ws.totals[j] > 0 ? ws.totals[j] : SUPPLIED);
  }
  ws.ionicStrength = Math.min(Math.max(ws.ionicStrength, 1e-7), 2);
  ws.soluteSum = Math.min(Math.max(ws.soluteSum, 1e-7), 5);
  const first = solveSystem(system, tableau, ws, { maxIterations, isCold: false });
  if (first !== "failed") return first;
  coldStart(kernel, a);
  return solveSystem(system, tableau, ws, { maxIterations, isCold: true });
}

/** λ from the order of the system's phases to that of the assemblage. */
function readAmounts(kernel: Kernel, a: Assemblage): void {
  let count = 0;
  a.gasAmount = Number.isNaN(a.xC) ? 0 : kernel.ws.amounts[count++];
  for (let k = 0; k < a.count; k++) a.amounts[k] = a.isHeld[k] ? kernel.ws.amounts[count++] : 0;
}

function mostNegative(kernel: Kernel, a: Assemblage): number {
  const { totals } = kernel.ws;
  let scale = 0;
  for (let j = 0; j < totals.length; j++) if (Number.isFinite(totals[j])) scale += Math.abs(totals[j]);
  let worst = -1;
  let least = -NEGATIVE * scale;
  for (let k = 0; k < a.count; k++) {
    if (a.isHeld[k] && !a.isExcess[k] && a.amounts[k] < least) { least = a.amounts[k]; worst = k; }
  }
  return worst;
}

function mostExceeded(kernel: Kernel, a: Assemblage): number {
  const { ws, solids, tableau } = kernel;
  let worst = -1;
  let most = EXCEEDANCE;
  for (let k = 0; k < a.count; k++) {
    if (a.isHeld[k] || !a.mayHold[k]) continue;
    const phase = solids[a.solids[k]];
    let v = phase.water * ws.lnWater - a.targets[k];
    for (let j = 0; j < tableau.componentCount; j++) if (phase.nu[j] !== 0) v += phase.nu[j] * ws.x[j]; // absent: NaN, never exceeds
    if (v > most) { most = v; worst = k; }
  }
  return worst;
}

/** Holds one more solid, exchanging it for another where they depend; @returns false where none can make room. */
function join(kernel: Kernel, a: Assemblage, next: number): boolean {
  a.isHeld[next] = 1;
  const system = heldSystem(kernel, a);
  if (!("dependent" in system)) return true;
  // Σ r_m n_m = 0 over the gas (if open) and the held solids in order; n_next = Σ a_m n_m with a_m = −r_m/r_next.
  const offset = Number.isNaN(a.xC) ? 0 : 1;
  const r = (position: number) => position === system.dependent ? 1 : position < system.dependent ? -system.coefficients[position] : 0;
  let position = offset;
  let nextPosition = offset;
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) { if (k === next) nextPosition = position; position++; }
  const share = r(nextPosition);
  let leaving = -1;
  let least = Infinity;
  position = offset;
  for (let k = 0; k < a.count; k++) {
    if (!a.isHeld[k]) continue;
    const use = -r(position++) / share;
    if (k === next || a.isExcess[k] || !(use > 1e-9)) continue;
    const ratio = Math.max(a.amounts[k], 0) / use;
    if (ratio < least) { least = ratio; leaving = k; }
  }
  if (leaving < 0) return false;
  a.isHeld[leaving] = 0;
  return true;
}
