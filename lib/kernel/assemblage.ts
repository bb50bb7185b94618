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
 * first, min λ_m/a_m over a_m > 0, makes room for it (dual step of Goldfarb & Idnani 1983, Math. Program. 27:1). Where none can, the
 * combination proves that no state exists (`combination`). Excess solids that depend on each other, and solids that stand at their target
 * though they depend on the held ones, are the business of solid-ties.ts.
 * Stop: amounts ≥ −1e-14·scale, exceedance ≤ 1e-11. Bound: 20 + 6·solids changes. At fixed γ the point is unique (a convex programme with
 * linear constraints; Boyd & Vandenberghe 2004, ch. 5 and 10). Where the changes do not end, or a set met on the way has no finite state
 * of its own, the nested search (nested.ts) takes over, which solves for the assemblage at fixed γ and searches over ionic strength.
 */
import { type Assemblage, boundStart, coldStartHeld, heldSystem, readAmounts, setTargets } from "./held-solids";
import type { Kernel } from "./kernel";
import { solveNested } from "./nested";
import { nextChange } from "./solid-changes";
import { pickExcess, spreadTies } from "./solid-ties";
import { solveSystem, type SolveResult } from "./solve-system";
import type { System } from "./system";

export { type Assemblage, makeAssemblage } from "./held-solids";

/** "contradiction": no activities satisfy the solids together; `combination` and `culprit` say why. */
export type AssemblageResult = "solved" | "contradiction" | "no-finite-solution" | "failed";

/**
 * @param kernel its workspace holds constants, totals (supplies included) and the start (`x`, I, M; NaN in x where a component is new).
 * @param a filled by the caller but for isHeld, isTied, amounts, gasAmount and the combination, which are the answer beside the state in
 *   the workspace.
 */
export function solveAssemblage(kernel: Kernel, a: Assemblage): AssemblageResult {
  for (let k = 0; k < a.count; k++) { a.isHeld[k] = a.isExcess[k]; a.isTied[k] = 0; a.amounts[k] = 0; }
  a.culprit = -1;
  estimateAbundance(kernel, a);
  if (!pickExcess(kernel, a)) return "contradiction";
  const bound = 20 + 6 * a.count;
  for (let change = 0; change < bound; change++) {
    if (solveHeld(kernel, a, heldSystem(kernel, a)) !== "solved") break;
    readAmounts(kernel, a);
    const next = nextChange(kernel, a);
    if (next === "settled") return spreadTies(kernel, a) ? "solved" : "contradiction";
    if (next === "contradiction") return "contradiction";
  }
  if (a.maxIterations <= 1) return "failed";
  const result = solveNested(kernel, a);
  if (result !== "solved") return result;
  return spreadTies(kernel, a) ? "solved" : "contradiction";
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

/** From the state at hand; from a cold start where that fails. */
function solveHeld(kernel: Kernel, a: Assemblage, system: System): SolveResult {
  const { ws, tableau } = kernel;
  const { maxIterations } = a;
  setTargets(kernel, a);
  boundStart(kernel, a);
  const first = solveSystem(system, tableau, ws, { maxIterations, isCold: false });
  if (first !== "failed") return first;
  coldStartHeld(kernel, a);
  return solveSystem(system, tableau, ws, { maxIterations, isCold: true });
}

/** Takes a solved assemblage on to where rounding ends, for states whose balances cancel large amounts. */
export function refineAssemblage(kernel: Kernel, a: Assemblage): void {
  setTargets(kernel, a);
  const options = { maxIterations: a.maxIterations, isCold: false, isFollowed: true, isTight: true };
  if (solveSystem(heldSystem(kernel, a), kernel.tableau, kernel.ws, options) !== "solved") return;
  readAmounts(kernel, a);
  spreadTies(kernel, a);
}
