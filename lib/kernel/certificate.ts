/**
 * The certificate of a returned state: its largest relative error in anything it claims, in plain arithmetic from the returned
 * concentrations, activities and amounts. Shares no code with the solver: no sparse tables, no eliminated phases, no logarithmic
 * residuals; ionic strength, activity coefficients and water activity are computed again from the concentrations.
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
}

export function makeClaim(tableau: Tableau, size: number): Claim {
  const n = tableau.componentCount;
  return {
    c: new Float64Array(tableau.speciesCount), x: new Float64Array(n), present: new Uint8Array(n), totals: new Float64Array(n),
    usesAlkalinity: false, isFree: new Uint8Array(n), sourceCount: 0, sourceNu: [], sourceAmount: new Float64Array(size),
    tieCount: 0, tiePhase: [], tieTarget: new Float64Array(size), tieKind: new Uint8Array(size), tieAmount: new Float64Array(size),
  };
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
    const expected = lnActivity - lnGamma(tableau, constants, tableau.gammaClass[i], strength);
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
    const error = Math.abs(imbalance(tableau, claim, j)) / balanceScale(tableau, claim, j);
    if (!(error <= worst)) worst = error;
  }
  return worst;
}

/** ν_ij, or for hydrogen under an alkalinity minus the equivalents. */
function weight(tableau: Tableau, claim: Claim, i: number, j: number): number {
  return j === 0 && claim.usesAlkalinity ? -tableau.alkalinity[i] : tableau.nu[i * tableau.componentCount + j];
}

function imbalance(tableau: Tableau, claim: Claim, j: number): number {
  let sum = -claim.totals[j];
  for (let i = 0; i < tableau.speciesCount; i++) sum += weight(tableau, claim, i, j) * claim.c[i];
  for (let k = 0; k < claim.sourceCount; k++) sum += claim.sourceNu[k][j] * claim.sourceAmount[k];
  return sum;
}

function balanceScale(tableau: Tableau, claim: Claim, j: number): number {
  let sum = Math.abs(claim.totals[j]);
  for (let i = 0; i < tableau.speciesCount; i++) sum += Math.abs(weight(tableau, claim, i, j)) * claim.c[i];
  for (let k = 0; k < claim.sourceCount; k++) sum += Math.abs(claim.sourceNu[k][j] * claim.sourceAmount[k]);
  return sum;
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
      if (claim.tieKind[m] === TIE.bounded) scale = Math.max(scale, balanceScale(tableau, claim, j));
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
