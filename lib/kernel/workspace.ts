/**
 * Everything that a solve reads and writes besides the system, allocated once per tableau. One workspace serves one row at a
 * time; nothing in the kernel allocates while rows are solved, except a system met for the first time.
 */
import type { Constants, Tableau } from "./tableau";

export interface Workspace {
  // Inputs of a solve.
  constants: Constants;
  /** T, mol/kg by component; entry 0 is the hydrogen total (or minus the alkalinity). */
  totals: Float64Array;
  /** ρ of the held phases. */
  targets: Float64Array;
  // The state: start value on entry, answer on return.
  /** x by component (NaN: absent). */
  x: Float64Array;
  /** Ionic strength and sum of solutes, mol/kg. */
  ionicStrength: number;
  soluteSum: number;
  /** c by species of the tableau, mol/kg, 0 where absent. */
  c: Float64Array;
  /** ln γ by class. */
  lnGamma: Float64Array;
  lnWater: number;
  /** λ of the sources, mol/kg. */
  amounts: Float64Array;
  /** Newton iterations spent since the caller last reset it. */
  iterations: number;
  // Scratch, in the system's order.
  y: Float64Array;
  base: Float64Array;
  cs: Float64Array;
  gammaSlope: Float64Array;
  debyeD: Float64Array; debyeBeta: Float64Array; debyeAz: Float64Array;
  balanceTotal: Float64Array;
  plus: Float64Array; minus: Float64Array;
  matrix: Float64Array;
  step: Float64Array;
  savedStep: Float64Array;
  savedY: Float64Array;
  /** k0, k1, k2 of the pH-dependent constant. */
  varyingFit: [number, number, number];
  waterSlope: number;
  sumI: number; sumM: number;
}

export function makeWorkspace(tableau: Tableau, phaseCount: number): Workspace {
  const n = tableau.componentCount;
  const ns = tableau.speciesCount;
  const k = tableau.gamma.count;
  const f = (size: number) => new Float64Array(size);
  return {
    constants: { lnK: f(ns), solidLnK: f(0), gasLnK: 0, debyeA: 0, debyeB: 0 },
    totals: f(n), targets: f(phaseCount + 3), x: f(n), ionicStrength: 0, soluteSum: 0, c: f(ns),
    lnGamma: f(k), lnWater: 0, amounts: f(phaseCount + 3), iterations: 0,
    y: f(n + 2), base: f(ns), cs: f(ns), gammaSlope: f(k), debyeD: f(k), debyeBeta: f(k), debyeAz: f(k),
    balanceTotal: f(n), plus: f(n + 2), minus: f(n + 2), matrix: f((n + 2) * (n + 2)), step: f(n + 2), savedStep: f(n + 2), savedY: f(n),
    varyingFit: tableau.varyingFit, waterSlope: 0, sumI: 0, sumM: 0,
  };
}
