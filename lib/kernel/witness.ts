/**
 * Witnesses: why a row has no state, in numbers that can be checked without solving anything for it again.
 *
 *   solids     a combination Σ a_m ν_m = 0 of solids (and the gas) that no activities satisfy. With all of them in excess,
 *              Σ a_m (ρ_m − w_m·ln a_w) would have to be 0 and is not. With solids that may form or run out among them (ν_m·x + w_m·ln a_w ≤ ρ_m),
 *              a_m ≥ 0 for those, and 0 = Σ a_m ν_m·x ≤ Σ a_m (ρ_m − w_m·ln a_w) < 0 is the contradiction (Farkas' lemma).
 *   scan       the error of the fact left out, over the whole bracket of the unknown: of one sign everywhere.
 *   strength   at every ionic strength up to the highest, the concentrations ask for a higher one.
 *   absent     components that a fact needs and the water has none of.
 *   gas        the gas alone dissolves more than the total carbon (activity coefficients of 1).
 *   input      a value missing or outside its range: the message names it.
 */
import type { Phase } from "./tableau";

export interface SolidsWitness {
  kind: "solids";
  phases: Phase[];
  coefficients: number[];
  /** ρ; and whether ν·x + w·ln a_w must equal it or only not exceed it. */
  targets: number[];
  isHeld: boolean[];
  /** ln a_w at which the combination was found; it matters only where Σ a_m w_m is not 0. */
  lnWater: number;
}

export type Witness =
  | SolidsWitness
  | { kind: "scan"; unknown: "hydrogen" | "carbon"; from: number; to: number; least: number; most: number }
  | { kind: "strength"; upTo: number; stage: "facts" | "own-temperature" | "reaction" }
  | { kind: "absent"; components: string[] }
  | { kind: "gas"; dissolves: number; total: number }
  | { kind: "input" };

/** Relative size of what counts as nothing in a sum of stoichiometric numbers and logarithms of constants. */
const ROUNDING = 1e-12;

/** Whether the combination proves what it claims, in plain sums. */
export function provesContradiction(w: SolidsWitness): boolean {
  const n = w.phases[0].nu.length;
  for (let j = 0; j < n; j++) {
    let sum = 0;
    let size = 0;
    w.phases.forEach((phase, m) => { sum += w.coefficients[m] * phase.nu[j]; size += Math.abs(w.coefficients[m] * phase.nu[j]); });
    if (Math.abs(sum) > 1e-9 * Math.max(size, 1)) return false;
  }
  let defect = 0;
  let scale = 0;
  w.phases.forEach((phase, m) => {
    const term = w.coefficients[m] * (w.targets[m] - phase.water * w.lnWater);
    defect += term;
    scale += Math.abs(term);
  });
  if (!(Math.abs(defect) > ROUNDING * scale)) return false;
  // The sign of a combination of held ones is free: turn it so that the sum is negative.
  const sign = defect > 0 ? -1 : 1;
  return w.isHeld.every((isHeld, m) => isHeld || sign * w.coefficients[m] >= -1e-9);
}
