/**
 * The sure path for convex systems: damped Newton at fixed activity coefficients, inside a search over ionic strength.
 *
 * Core. At fixed γ and a_w the balances are the gradient of  f(y) = Σ_i c_i(y) − T·y, convex because its Hessian is Σ c_i N_i N_iᵀ.
 * A sum of exponentials satisfies |f‴| ≤ β·f″ along a direction d with β = max_i |N_i·d|, and for such functions the Newton step
 * cut by  t = ln(1 + β)/β  decreases f and converges from anywhere (Sun & Tran-Dinh 2019, Math. Program. 178:145). From below a
 * lone balance is solved in one step. (White, Johnson & Dantzig 1958, J. Chem. Phys. 28:751 for the minimisation.)
 * Stop: max_a |P_a − Q_a|/(P_a + Q_a) ≤ 2e-13, or ≤ 1e-11 and not halved. Bound: 400 steps.
 *
 * Water. a_w follows Σc by fixed-point steps (each contracts by about 0.017·Σ w c), then by halving a bracket: at most 90.
 *
 * Strength. φ(I) = I(c at I) − I is positive at I = 0, and up to I = 0.4, where every activity model keeps the problem strictly convex, it
 * changes sign at most once. So φ(0.4) < 0 brackets the answer below 0.4; otherwise I rises by a factor 1.2 until φ changes sign. The bracket
 * is closed by secants and bisection (of ln I while it is wide). The first sign change is the root of lowest I, which is the answer.
 * Where ln(I(c)/I) passes a least value above zero between three points, golden sections look for two roots close together there.
 * None up to 30 mol/kg: no finite solution.
 */
import { assembleJacobian, evaluateActivity, evaluateSystem } from "./evaluate";
import { solveDense } from "./linear";
import type { System } from "./system";
import type { Tableau } from "./tableau";
import type { Workspace } from "./workspace";

const STOP = 2e-13;
const ROUNDING = 1e-11;
const CORE_STEPS = 400;
/** Steps in which the activity of water may settle beside the balances. */
const FOLLOWING_STEPS = 30;
const WATER_STEPS = 90;
const HIGHEST_STRENGTH = 30;
const STRENGTH_FACTOR = 1.2;
/** Ionic strength up to which there is one root at most, mol/kg: 0.66 for Davies with |z| ≤ 3 at 25 °C, lower in hot water. */
export const CONVEX_STRENGTH = 0.4;
/** Sum of solutes at which 1 − 0.017·Σc reaches 0.02. */
export const MOST_SOLUTES = 57.6;
/** Relative change of the sum of solutes at which its steps end. */
const ROUGH_WATER = 1e-7;
const EXACT_WATER = 1e-14;
const LEAST_STRENGTH = 1e-12;

export type SureResult = "solved" | "no-finite-solution" | "failed";

/** Solves for the concentrations at the activity coefficients in the workspace; false where it could not. */
export interface Inner {
  (): boolean;
  /** The same with the activity of water following the concentrations on the way; false where that does not settle. */
  following?: () => boolean;
}

/** Solves a convex system from `ws.y`. On "solved" the state is in `ws.y`, `ws.cs`, `ws.ionicStrength`, `ws.soluteSum`. */
export function solveSurely(system: System, tableau: Tableau, ws: Workspace): SureResult {
  const inner: Inner = () => core(system, tableau, ws);
  inner.following = () => core(system, tableau, ws, FOLLOWING_STEPS);
  return searchStrength(tableau, ws, inner);
}

/** The search over ionic strength, around any way to solve at fixed activity coefficients. */
export function searchStrength(tableau: Tableau, ws: Workspace, inner: Inner): SureResult {
  if (tableau.gamma.isIdeal) return inner() ? "solved" : "failed";
  let low = LEAST_STRENGTH;
  let high = CONVEX_STRENGTH;
  let phiHigh = strengthError(tableau, ws, inner, high);
  let phiLow = phiHigh;
  if (phiHigh <= 0) phiLow = strengthError(tableau, ws, inner, low);
  while (phiHigh > 0) {
    const last = Math.log1p(phiLow / low);
    low = high;
    phiLow = phiHigh;
    if (low >= HIGHEST_STRENGTH) return "no-finite-solution";
    high = Math.min(high * STRENGTH_FACTOR, HIGHEST_STRENGTH);
    phiHigh = strengthError(tableau, ws, inner, high);
    const middle = Math.log1p(phiLow / low);
    if (phiHigh > 0 && middle < last && middle < Math.log1p(phiHigh / high)) {
      const dip = findDip(tableau, ws, inner, low / STRENGTH_FACTOR, high);
      if (dip) { low /= STRENGTH_FACTOR; high = dip[0]; phiHigh = dip[1]; phiLow = strengthError(tableau, ws, inner, low); }
    }
  }
  if (!Number.isFinite(phiLow) || !Number.isFinite(phiHigh)) return "failed";
  return closeBracket(tableau, ws, inner, { low, phiLow, high, phiHigh });
}

/** Golden sections for a point with φ ≤ 0 between two with φ > 0; null where the dip stays short. */
function findDip(tableau: Tableau, ws: Workspace, inner: Inner, from: number, to: number): [number, number] | null {
  const golden = 0.6180339887498949;
  let a = from;
  let b = to;
  let u = b + (a - b) * golden;
  let v = a + (b - a) * golden;
  let phiU = strengthError(tableau, ws, inner, u);
  let phiV = strengthError(tableau, ws, inner, v);
  for (let k = 0; k < 24; k++) {
    if (phiU <= 0) return [u, phiU];
    if (phiV <= 0) return [v, phiV];
    if (phiU / u < phiV / v) { b = v; v = u; phiV = phiU; u = b + (a - b) * golden; phiU = strengthError(tableau, ws, inner, u); }
    else { a = u; u = v; phiU = phiV; v = a + (b - a) * golden; phiV = strengthError(tableau, ws, inner, v); }
  }
  return null;
}

interface Bracket { low: number; phiLow: number; high: number; phiHigh: number }

function closeBracket(tableau: Tableau, ws: Workspace, inner: Inner, b: Bracket): SureResult {
  for (let k = 0; k < 200; k++) {
    if (Math.abs(b.phiLow) <= STOP * b.low || b.high - b.low <= 2e-16 * b.high) break;
    // Every third step halves the bracket, so that the secant cannot stall on one side.
    const secant = b.low + (b.high - b.low) * (b.phiLow / (b.phiLow - b.phiHigh));
    const half = b.high > 4 * b.low ? Math.sqrt(b.low * b.high) : 0.5 * (b.low + b.high);
    const middle = k % 3 === 2 || !(secant > b.low && secant < b.high) ? half : secant;
    const phi = strengthError(tableau, ws, inner, middle);
    if (!Number.isFinite(phi)) return "failed";
    if (Math.abs(phi) <= STOP * middle) return "solved";
    if (phi > 0) { b.low = middle; b.phiLow = phi; } else { b.high = middle; b.phiHigh = phi; }
  }
  return Number.isFinite(strengthError(tableau, ws, inner, b.low)) ? "solved" : "failed";
}

/** φ(I), with the core solved at γ(I); NaN where the core did not converge, huge where the solutes outgrow the water activity's law. */
function strengthError(tableau: Tableau, ws: Workspace, inner: Inner, ionicStrength: number): number {
  // A sign is soon known; only near the root must the activity of water be exact.
  const rough = errorAt(tableau, ws, inner, ionicStrength, ROUGH_WATER);
  return Math.abs(rough) > 1e-3 * ionicStrength ? rough : errorAt(tableau, ws, inner, ionicStrength, EXACT_WATER);
}

function errorAt(tableau: Tableau, ws: Workspace, inner: Inner, ionicStrength: number, waterStop: number): number {
  ws.ionicStrength = ionicStrength;
  let low = 0;
  let high = MOST_SOLUTES;
  ws.soluteSum = Math.min(ws.soluteSum, high);
  if (inner.following && inner.following()) return ws.sumM >= MOST_SOLUTES ? Number.MAX_VALUE : ws.sumI - ionicStrength;
  if (!(ws.soluteSum >= 0 && ws.soluteSum <= high)) ws.soluteSum = 0;
  for (let k = 0; k < WATER_STEPS; k++) {
    evaluateActivity(tableau, ws);
    if (!inner()) return NaN;
    if (Math.abs(ws.sumM - ws.soluteSum) <= waterStop * (1 + ws.sumM)) return ws.sumI - ionicStrength;
    if (ws.sumM > ws.soluteSum) low = ws.soluteSum; else high = ws.soluteSum;
    if (low >= MOST_SOLUTES) return Number.MAX_VALUE;
    // Plain steps first; then halving, which cannot oscillate: the more solutes, the less water, and so the fewer solutes.
    const isInside = ws.sumM > low && ws.sumM < high;
    ws.soluteSum = k < 8 && ws.sumM < MOST_SOLUTES ? ws.sumM : isInside && k % 2 === 0 ? ws.sumM : ws.sumM > high && high === MOST_SOLUTES ? high : 0.5 * (low + high);
  }
  return Math.abs(high - low) <= 1e-9 * (1 + high) ? ws.sumI - ionicStrength : NaN;
}

/**
 * Newton at the activity coefficients in `ws`; @returns whether it converged.
 * @param following steps allowed with the activity of water following the concentrations, which may not converge; 0: it stays.
 */
export function core(system: System, tableau: Tableau, ws: Workspace, following = 0): boolean {
  if (tableau.gamma.isIdeal) evaluateActivity(tableau, ws);
  const steps = following > 0 ? following : CORE_STEPS;
  let previous = Infinity;
  for (let step = 0; step <= steps; step++) {
    if (following > 0) {
      if (step > 0) followSolutes(system, ws);
      evaluateActivity(tableau, ws);
    }
    evaluateSystem(system, ws);
    let error = 0;
    for (let a = 0; a < system.size; a++) {
      const f = (ws.plus[a] - ws.minus[a]) / (ws.plus[a] + ws.minus[a]);
      ws.step[a] = -f;
      if (!(Math.abs(f) <= error)) error = Math.abs(f);
    }
    if (!Number.isFinite(error)) return false;
    // More solutes than the law of the water activity holds for even where that is least: settled, beyond the end.
    const isSettled = following === 0 || Math.abs(ws.sumM - ws.soluteSum) <= EXACT_WATER * (1 + ws.sumM) || (ws.soluteSum === MOST_SOLUTES && ws.sumM >= MOST_SOLUTES);
    if (isSettled && (error <= STOP || (error <= ROUNDING && error > 0.5 * previous))) return true;
    previous = error;
    ws.iterations++;
    if (!newtonStep(system, ws)) return false;
    const beta = longestChange(system, ws);
    const t = beta > 1e-3 ? Math.log1p(beta) / beta : 1;
    for (let b = 0; b < system.size; b++) ws.y[b] += t * ws.step[b];
  }
  return false;
}

/** The Newton step into `ws.step`; where rounding has made the matrix singular, one shortened towards the scaled gradient, still downhill. */
function newtonStep(system: System, ws: Workspace): boolean {
  const { size } = system;
  ws.savedStep.set(ws.step);
  for (let damping = 0; damping < 1; damping = damping === 0 ? 1e-9 : damping * 1000) {
    assembleJacobian(system, ws, "linear");
    for (let a = 0; a < size; a++) ws.matrix[a * size + a] += damping;
    if (solveDense(ws.matrix, ws.step, size, size)) return true;
    ws.step.set(ws.savedStep);
  }
  return false;
}

/** Newton's step for M = Σc(M) alone: dΣc/dM = −Σ w c·0.017/a_w at fixed activities. */
function followSolutes(system: System, ws: Workspace): void {
  let bound = 0;
  for (let s = 0; s < system.gammaClass.length; s++) bound += system.water[s] * ws.cs[s];
  const slope = Math.max(0, 0.017 * bound / Math.exp(ws.lnWater));
  ws.soluteSum = Math.min(Math.max(ws.soluteSum + (ws.sumM - ws.soluteSum) / (1 + slope), 0), MOST_SOLUTES);
}

/** β = max_i |N_i·d|, the largest change of ln c along the step. */
function longestChange(system: System, ws: Workspace): number {
  let beta = 0;
  for (let s = 0; s < system.gammaClass.length; s++) {
    let v = 0;
    for (let q = system.nStart[s]; q < system.nStart[s + 1]; q++) v += system.nValue[q] * ws.step[system.nColumn[q]];
    if (Math.abs(v) > beta) beta = Math.abs(v);
  }
  return beta;
}
