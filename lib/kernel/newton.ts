/**
 * Newton's method on a system, activity coefficients inside. The fast path; it promises nothing but to say whether it arrived.
 *
 * Unknowns: y (ln activities of the free components), ln I, ln M (sum of solutes, for the water activity).
 * Equations: G_a = ln(P_a/Q_a) = 0 for each balance, ln(I(c)/I) = 0, ln(M(c)/M) = 0: all logarithms of ratios, which are close to
 * linear in the unknowns over many decades (a metal with any number of complexes is solved in one step when its ligands are right).
 * Phase A, while some balance is out by more than a factor e: I and M follow the concentrations, bounded, and only y is stepped, so
 * that a poor start cannot throw the activity model out of its range. Phase B: all unknowns at once, quadratic convergence.
 * Steps are cut to 6 in any unknown.
 * Stop: max |G| ≤ 4e-13; or max |G| ≤ 1e-11 and not halved by the last step (rounding has been reached).
 * Failure: a side of a balance that is zero or not finite, a singular matrix, the iteration limit.
 */
import { assembleJacobian, evaluateActivity, evaluateSystem } from "./evaluate";
import { solveDense } from "./linear";
import type { System } from "./system";
import type { Tableau } from "./tableau";
import type { Workspace } from "./workspace";

const STOP = 4e-13;
const ROUNDING = 1e-11;
const LONGEST_STEP = 6;
const PHASE_A_STEPS = 25;
/** Bounds on the I and M that phase A follows, mol/kg. */
const PHASE_A_STRENGTH = 0.5;
const PHASE_A_SOLUTES = 2;

/**
 * @param stop lower than usual to go on until rounding is reached.
 * @returns true where the system at `ws.y`, `ws.ionicStrength`, `ws.soluteSum` is solved; `ws.cs` then holds its concentrations.
 */
export function newton(system: System, tableau: Tableau, ws: Workspace, maxIterations: number, stop = STOP): boolean {
  const isIdeal = tableau.gamma.isIdeal;
  const size = system.size;
  let isFollowing = !isIdeal;
  let previous = Infinity;
  for (let iteration = 0; iteration <= maxIterations; iteration++) {
    evaluateActivity(tableau, ws);
    evaluateSystem(system, ws);
    const worst = balanceErrors(system, ws);
    if (!(worst < 1e6)) return false;
    if (isFollowing && (worst < 1 || iteration >= PHASE_A_STEPS)) {
      isFollowing = false;
      if (iteration === 0 && !(ws.ionicStrength > 0)) followConcentrations(ws);
    }
    let error = worst;
    if (!isIdeal && !isFollowing) error = Math.max(error, strengthErrors(system, ws));
    if (error <= stop && !isFollowing) return true;
    if (error <= ROUNDING && error > 0.5 * previous) return true;
    if (iteration === maxIterations) return false;
    previous = error;
    ws.iterations++;
    const bordered = !isIdeal && !isFollowing;
    const order = assembleJacobian(system, ws, bordered ? "bordered" : "log");
    if (!solveDense(ws.matrix, ws.step, order, order)) return false;
    applyStep(ws, size, bordered);
    if (isFollowing) followConcentrations(ws);
  }
  return false;
}

/** Right sides −G of the balances into `ws.step`; @returns max |G|. */
function balanceErrors(system: System, ws: Workspace): number {
  let worst = 0;
  for (let a = 0; a < system.size; a++) {
    const g = Math.log(ws.plus[a] / ws.minus[a]);
    ws.step[a] = -g;
    const size = Math.abs(g);
    if (!(size <= worst)) worst = size; // keeps NaN
  }
  return worst;
}

function strengthErrors(system: System, ws: Workspace): number {
  const gI = Math.log(ws.sumI / ws.ionicStrength);
  const gM = Math.log(ws.sumM / ws.soluteSum);
  ws.step[system.size] = -gI;
  ws.step[system.size + 1] = -gM;
  return Math.max(Math.abs(gI), Math.abs(gM));
}

function followConcentrations(ws: Workspace): void {
  ws.ionicStrength = Math.min(Math.max(ws.sumI, 1e-9), PHASE_A_STRENGTH);
  ws.soluteSum = Math.min(Math.max(ws.sumM, 1e-9), PHASE_A_SOLUTES);
}

function applyStep(ws: Workspace, size: number, bordered: boolean): void {
  let longest = 0;
  const count = bordered ? size + 2 : size;
  for (let b = 0; b < count; b++) longest = Math.max(longest, Math.abs(ws.step[b]));
  const factor = longest > LONGEST_STEP ? LONGEST_STEP / longest : 1;
  for (let b = 0; b < size; b++) ws.y[b] += factor * ws.step[b];
  if (!bordered) return;
  ws.ionicStrength *= Math.exp(factor * ws.step[size]);
  ws.soluteSum *= Math.exp(factor * ws.step[size + 1]);
}
