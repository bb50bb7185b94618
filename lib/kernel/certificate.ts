/**
 * The certificate of a returned state: its largest relative error in anything it claims, in plain arithmetic from the returned
 * concentrations, activities and amounts. Shares no code and no table with the solver: no eliminated phases, no logarithmic residuals, lists
 * of its own of the species in each balance; ionic strength, activity coefficients and water activity are computed again from the concentrations.
 *
 * The largest of
 *   balance      |Σ_i ν_ij c_i + Σ_k s_kj λ_k − T_j| / (Σ_i |ν_ij| c_i + Σ_k |s_kj λ_k| + |T_j|)      for each component present whose total is claimed
 *   mass action  |ln c_i + ln γ_i − ln K_i − Σ_j ν_ij x_j − w_i ln a_w|                                for each species present
 *   held         |ν_m·x + w_m ln a_w − ρ_m|                                                            for each fact or solid held
 *   bounded      max(0, ν_m·x + w_m ln a_w − ρ_m), max(0, −λ_m)/scale, min(λ_m/scale, |ρ_m − …|)       for solids that may form or run out
 * where scale is the largest divisor of the balances that the solid takes part in.
 */
import type { Constants, Phase, Tableau } from "./tableau";

export const TIE = { held: 0, bounded: 1 } as const;

/** What is claimed; filled anew for each state, without allocation. */
export interface Claim {
  c: Float64Array;
  x: Float64Array;
  present: Uint8Array;
  /** T; entry 0 is minus the alkalinity where usesAlkalinity. */
  totals: Float64Array;
  usesAlkalinity: boolean;
  /** 1 where no total is claimed: carbon under a given pressure, hydrogen under a given pH. */
  isFree: Uint8Array;
  sourceCount: number;
  sourceNu: Float64Array[];
  sourceAmount: Float64Array;
  tieCount: number;
  tiePhase: Phase[];
  tieTarget: Float64Array;
  tieKind: Uint8Array;
  /** Amount of a bounded tie, mol/kg. */
  tieAmount: Float64Array;
  /** Scratch and tables of the certificate itself. */
  holders: Int32Array[];
  lnGamma: Float64Array;
  sum: number;
  scale: number;
}

export function makeClaim(tableau: Tableau, size: number): Claim {
  const n = tableau.componentCount;
  return {
    c: new Float64Array(tableau.speciesCount), x: new Float64Array(n), present: new Uint8Array(n), totals: new Float64Array(n),
    usesAlkalinity: false, isFree: new Uint8Array(n), sourceCount: 0, sourceNu: [], sourceAmount: new Float64Array(size),
    tieCount: 0, tiePhase: [], tieTarget: new Float64Array(size), tieKind: new Uint8Array(size), tieAmount: new Float64Array(size),
    holders: Array.from({ length: n }, (_, j) => holdersOf(tableau, j)), lnGamma: new Float64Array(tableau.gamma.count), sum: 0, scale: 0,
  };
}

/** Species that count in the balance of a component. */
function holdersOf(tableau: Tableau, j: number): Int32Array {
  const n = tableau.componentCount;
  const all = Array.from({ length: tableau.speciesCount }, (_, i) => i);
  return Int32Array.from(all.filter((i) => tableau.nu[i * n + j] !== 0 || (j === 0 && tableau.alkalinity[i] !== 0)));
}

/** @returns the residual, NaN where the state is not made of numbers. */
export function certify(tableau: Tableau, constants: Constants, claim: Claim): number {
  let strength = 0;
  let solutes = 0;
  for (let i = 0; i < tableau.speciesCount; i++) {
    strength += 0.5 * claim.c[i] * tableau.charge[i] * tableau.charge[i];
    solutes += claim.c[i];
  }
  const lnWater = tableau.gamma.isIdeal ? 0 : Math.log(1 - 0.017 * solutes);
  const massAction = massActionError(tableau, constants, claim, strength, lnWater);
  const balance = balanceError(tableau, claim);
  const ties = tieError(tableau, claim, lnWater);
  const worst = Math.max(massAction, balance, ties); // NaN wins
  return worst;
}

function massActionError(tableau: Tableau, constants: Constants, claim: Claim, strength: number, lnWater: number): number {
  const n = tableau.componentCount;
  let worst = 0;
  for (let k = 0; k < claim.lnGamma.length; k++) claim.lnGamma[k] = lnGamma(tableau, constants, k, strength);
  for (let i = 0; i < tableau.speciesCount; i++) {
    let lnActivity = constants.lnK[i] + tableau.water[i] * lnWater;
    let isPresent = true;
    for (let j = 0; j < n; j++) {
      const nu = tableau.nu[i * n + j];
      if (nu === 0) continue;
      if (claim.present[j] === 0) { isPresent = false; break; }
      lnActivity += nu * claim.x[j];
    }
    if (!isPresent) { if (claim.c[i] !== 0) return NaN; continue; }
    if (i === tableau.varying) lnActivity = claim.x[tableau.varyingAcid] + oneSite(tableau, claim.x[0]);
    const expected = lnActivity - claim.lnGamma[tableau.gammaClass[i]];
    if (expected < -690 && claim.c[i] < 1e-299) continue; // below the smallest normal double
    const error = Math.abs(Math.log(claim.c[i]) - expected);
    if (!(error <= worst)) worst = error;
  }
  return worst;
}

/** ln([A−]·γ_H⁻¹/[HA]) of the one-site model at x_H = ln a(H+): pK = k0 + k1·pH + k2·pH². */
function oneSite(tableau: Tableau, xH: number): number {
  const pH = -xH / Math.log(10);
  const [k0, k1, k2] = tableau.varyingFit;
  return (pH - (k0 + k1 * pH + k2 * pH * pH)) * Math.log(10);
}

function lnGamma(tableau: Tableau, constants: Constants, k: number, strength: number): number {
  const g = tableau.gamma;
  if (g.isIdeal) return 0;
  if (g.hydrogenMultiple[k] !== 0) return g.hydrogenMultiple[k] * lnGamma(tableau, constants, g.hydrogenClass, strength);
  const root = Math.sqrt(strength);
  const size = g.ionSize[k] > 0 ? constants.debyeB * g.ionSize[k] : 1;
  const long = -constants.debyeA * g.squaredCharge[k] * (root / (1 + size * root) - g.relativeSlope * strength);
  return (long + g.slope[k] * strength) * Math.log(10);
}

function balanceError(tableau: Tableau, claim: Claim): number {
  let worst = 0;
  for (let j = 0; j < tableau.componentCount; j++) {
    if (claim.present[j] === 0 || claim.isFree[j] === 1) continue;
    sumBalance(tableau, claim, j);
    const error = Math.abs(claim.sum) / claim.scale;
    if (!(error <= worst)) worst = error;
  }
  return worst;
}

/** Sum and scale of a component's balance into the claim: ν_ij, or for hydrogen under an alkalinity minus the equivalents. */
function sumBalance(tableau: Tableau, claim: Claim, j: number): void {
  const n = tableau.componentCount;
  const isAlkalinity = j === 0 && claim.usesAlkalinity;
  const holders = claim.holders[j];
  let sum = -claim.totals[j];
  let scale = Math.abs(sum);
  for (let p = 0; p < holders.length; p++) {
    const i = holders[p];
    const part = (isAlkalinity ? -tableau.alkalinity[i] : tableau.nu[i * n + j]) * claim.c[i];
    sum += part;
    scale += Math.abs(part);
  }
  for (let k = 0; k < claim.sourceCount; k++) {
    const part = claim.sourceNu[k][j] * claim.sourceAmount[k];
    sum += part;
    scale += Math.abs(part);
  }
  claim.sum = sum;
  claim.scale = scale;
}

function tieError(tableau: Tableau, claim: Claim, lnWater: number): number {
  let worst = 0;
  for (let m = 0; m < claim.tieCount; m++) {
    const phase = claim.tiePhase[m];
    let excess = phase.water * lnWater - claim.tieTarget[m];
    let scale = 0;
    let isPresent = true;
    for (let j = 0; j < tableau.componentCount; j++) {
      if (phase.nu[j] === 0) continue;
      if (claim.present[j] === 0) { isPresent = false; continue; }
      excess += phase.nu[j] * claim.x[j];
      if (claim.tieKind[m] === TIE.bounded) { sumBalance(tableau, claim, j); scale = Math.max(scale, claim.scale); }
    }
    let error: number;
    if (!isPresent) error = claim.tieKind[m] === TIE.held ? NaN : 0; // a solid without one of its components cannot form
    else if (claim.tieKind[m] === TIE.held) error = Math.abs(excess);
    else {
      const amount = claim.tieAmount[m] / scale;
      error = Math.max(excess, -amount, Math.min(amount, -excess), 0);
    }
    if (!(error <= worst)) worst = error;
  }
  return worst;
}
