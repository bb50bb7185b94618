/**
 * Solids whose compositions depend on each other (calcite + celestite = anhydrite + strontianite; two forms of one composition).
 *
 * Rank-revealing elimination of the held compositions finds each dependence Σ a_m ν_m = 0. Then Σ a_m (ρ_m − w_m·ln a_w) must vanish
 * too, or the solids cannot all be at equilibrium: the combination is the proof. Where it vanishes the state is the same whichever
 * of them is held, and only the amounts are undecided: of all that keep the balances the one is given whose dissolved amounts have the
 * least sum of squares (the gas counted in), no bounded solid going below nothing.
 */
import { type Assemblage, exceedance, lookUpHeld } from "./held-solids";
import type { Kernel } from "./kernel";
import { solveDense } from "./linear";

/** Targets (ln units) closer than this are one and the same; a tenth of the tolerance of a certified row at most. */
export const SAME_TARGET = 1e-11;
/** The same for a state, whose own exactness counts in. */
const SAME_STATE = 5e-11;

/**
 * Holds `next` besides the held ones.
 * @returns false where that was possible (it is held now); true where its composition depends on them: then `combination` holds the
 *   coefficients of Σ = 0 with 1 at `next`, and `next` is not held.
 */
export function dependence(kernel: Kernel, a: Assemblage, next: number): boolean {
  a.isHeld[next] = 1;
  const system = lookUpHeld(kernel, a);
  if (!("dependent" in system)) return false;
  const { dependent, coefficients } = system;
  const r = (position: number) => (position === dependent ? 1 : position < dependent ? -coefficients[position] : 0);
  const offset = Number.isNaN(a.xC) ? 0 : 1;
  let position = offset;
  let share = 1;
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) { if (k === next) share = r(position); position++; }
  position = offset;
  for (let k = 0; k < a.count; k++) a.combination[k] = a.isHeld[k] ? r(position++) / share : 0;
  a.gasCombination = offset ? r(0) / share : 0;
  a.isHeld[next] = 0;
  return true;
}

/** Holds as many of the excess solids as are independent and ties the rest; @returns false where they contradict each other. */
export function pickExcess(kernel: Kernel, a: Assemblage): boolean {
  if (!("dependent" in lookUpHeld(kernel, a))) return true;
  a.isHeld.fill(0);
  for (let k = 0; k < a.count; k++) {
    if (!a.isExcess[k] || !dependence(kernel, a, k)) continue;
    a.isTied[k] = 1;
    a.culprit = k;
    let defect = Number.isNaN(a.xC) ? 0 : a.gasCombination * a.xC;
    let water = 0;
    for (let m = 0; m < a.count; m++) {
      defect += a.combination[m] * a.targets[m];
      water += a.combination[m] * kernel.solids[a.solids[m]].water;
    }
    // Where the combination takes up or sets free water, its activity decides: the state itself is looked at afterwards.
    const isDecided = kernel.tableau.gamma.isIdeal || Math.abs(water) < 1e-9;
    if (isDecided && Math.abs(defect) > SAME_TARGET) return false;
  }
  return true;
}

/** Shares the amounts of a solved assemblage among solids that depend on each other; @returns false where a tied one is off its target. */
export function spreadTies(kernel: Kernel, a: Assemblage): boolean {
  let ties = 0;
  for (let k = 0; k < a.count; k++) {
    if (a.isHeld[k]) continue;
    const v = Math.abs(exceedance(kernel, a, k));
    if (a.isTied[k]) {
      if (v > SAME_STATE) { dependence(kernel, a, k); a.culprit = k; return false; }
      ties++;
    } else if (a.mayHold[k] && v <= SAME_STATE) {
      if (dependence(kernel, a, k)) { a.isTied[k] = 1; ties++; } else a.isHeld[k] = 0; // at its target by chance: none of it
    }
  }
  if (ties > 0) spread(kernel, a);
  return true;
}

/** Places of the amounts: the solids, then the gas. */
function spread(kernel: Kernel, a: Assemblage): void {
  const gas = a.count;
  const amount = Float64Array.from([...a.amounts.subarray(0, gas), a.gasAmount]);
  const supply = Float64Array.from([...a.supplies.subarray(0, gas), 0]);
  let moves: Float64Array[] = [];
  for (let k = 0; k < gas; k++) {
    if (!a.isTied[k]) continue;
    dependence(kernel, a, k);
    moves.push(Float64Array.from([...a.combination.subarray(0, gas), a.gasCombination]));
  }
  while (moves.length > 0) {
    const step = leastNormStep(moves, amount, supply);
    const blocker = advance(a, amount, step);
    if (blocker < 0) break;
    moves = withoutMoving(moves, blocker);
  }
  for (let k = 0; k < gas; k++) a.amounts[k] = amount[k];
  a.gasAmount = amount[gas];
}

/** The step along the moves to the least Σ (supply − amount)². */
function leastNormStep(moves: readonly Float64Array[], amount: Float64Array, supply: Float64Array): Float64Array {
  const m = moves.length;
  const dot = (u: Float64Array, v: (i: number) => number) => u.reduce((sum, each, i) => sum + each * v(i), 0);
  const matrix = Float64Array.from({ length: m * m }, (_, at) => dot(moves[Math.floor(at / m)], (i) => moves[at % m][i]));
  const share = Float64Array.from(moves, (move) => dot(move, (i) => supply[i] - amount[i]));
  const step = new Float64Array(amount.length);
  if (solveDense(matrix, share, m, m)) moves.forEach((move, t) => move.forEach((each, i) => { step[i] += share[t] * each; }));
  return step;
}

/** Goes along the step until a bounded amount is nothing; @returns which, or −1 where the step could be taken whole. */
function advance(a: Assemblage, amount: Float64Array, step: Float64Array): number {
  let part = 1;
  let blocker = -1;
  for (let k = 0; k < a.count; k++) {
    if (a.isExcess[k] || !(step[k] < 0)) continue;
    const reach = Math.max(amount[k], 0) / -step[k];
    if (reach < part) { part = reach; blocker = k; }
  }
  for (let i = 0; i < amount.length; i++) amount[i] += part * step[i];
  if (blocker >= 0) amount[blocker] = 0;
  return blocker;
}

/** The moves that leave one amount as it is. */
function withoutMoving(moves: readonly Float64Array[], k: number): Float64Array[] {
  const pivot = moves.reduce((best, move, t) => (Math.abs(move[k]) > Math.abs(moves[best][k]) ? t : best), 0);
  return moves.filter((_, t) => t !== pivot).map((move) => move.map((each, i) => (i === k ? 0 : each - moves[pivot][i] * (move[k] / moves[pivot][k]))));
}
