/**
 * Solves one system: a start, Newton, and where that fails and the system is convex the sure path.
 */
import { CONVEX_STRENGTH, MOST_SOLUTES, solveSurely } from "./convex";
import { bindGamma, evaluateActivity, evaluateSystem, loadSystem, unloadSystem } from "./evaluate";
import { newton } from "./newton";
import type { System } from "./system";
import type { Tableau } from "./tableau";
import type { Workspace } from "./workspace";

export type SolveResult = "solved" | "no-finite-solution" | "failed";

/** Newton steps before a convex system is handed to the sure path. */
const NEWTON_STEPS = 60;

export interface SolveOptions {
  maxIterations: number;
  /** Improve the start by solving single balances in closed form first (for starts made of totals). */
  isCold: boolean;
  /** The start is the state of a problem next to this one: Newton's answer near it is on the same branch and needs no second look. */
  isFollowed?: boolean;
  /** Go on until rounding is reached. */
  isTight?: boolean;
}

/** Factor of ionic strength within which a followed answer is near. */
const NEAR_STRENGTH = 1.5;

/**
 * @param ws totals, targets, constants and the start (`x`, `ionicStrength`, `soluteSum`) on entry; state and amounts on "solved".
 */
export function solveSystem(system: System, tableau: Tableau, ws: Workspace, options: SolveOptions): SolveResult {
  const n = tableau.componentCount;
  const startStrength = options.isFollowed ? ws.ionicStrength : NaN;
  bindGamma(tableau, ws);
  loadSystem(system, ws, n);
  if (system.isConvex) keepStart(ws, system);
  if (options.isCold) relax(system, tableau, ws);
  let result: SolveResult = "failed";
  if (newton(system, tableau, ws, Math.min(options.maxIterations, NEWTON_STEPS), options.isTight ? 0 : undefined)) result = "solved";
  const isNear = ws.ionicStrength < NEAR_STRENGTH * startStrength && startStrength < NEAR_STRENGTH * ws.ionicStrength;
  const isSuspect = result === "solved" && !isNear && !tableau.gamma.isIdeal && ws.ionicStrength > CONVEX_STRENGTH;
  if (system.isConvex && (result === "failed" || isSuspect) && options.maxIterations > 1) {
    restoreStart(ws, system);
    result = solveSurely(system, tableau, ws);
  }
  if (result === "solved" && !tableau.gamma.isIdeal && !(ws.soluteSum < MOST_SOLUTES)) result = "no-finite-solution";
  if (result === "solved") unloadSystem(system, tableau, ws);
  return result;
}

function keepStart(ws: Workspace, system: System): void {
  for (let b = 0; b < system.size; b++) ws.savedY[b] = ws.y[b];
}

function restoreStart(ws: Workspace, system: System): void {
  for (let b = 0; b < system.size; b++) ws.y[b] = ws.savedY[b];
  ws.ionicStrength = 0;
  ws.soluteSum = 0;
}

/**
 * Two rounds of y_b += ln(T/S) for the balances with no negative part, hydrogen's left alone: exact for a metal whose ligands are
 * right. Starts made of totals are then within a step or two even where nearly all of a metal is bound.
 */
function relax(system: System, tableau: Tableau, ws: Workspace): void {
  for (let round = 0; round < 2; round++) {
    evaluateActivity(tableau, ws);
    evaluateSystem(system, ws);
    for (let b = 0; b < system.size; b++) {
      const a = system.rowOfColumn[b];
      if (a < 0 || system.free[b] === 0) continue;
      const total = ws.balanceTotal[a];
      if (total > 0 && ws.minus[a] === total) ws.y[b] += Math.log(total / ws.plus[a]);
    }
  }
}
