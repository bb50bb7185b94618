/**
 * A reaction's solids as the kernel keeps them, and what every way of solving an assemblage does with the held ones: their system, their
 * targets, their amounts.
 */
import { CLOSURE, type Kernel, systemFor } from "./kernel";
import { solveDense } from "./linear";
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
  /** What there is at first, mol/kg: λ less this has formed. */
  supplies: Float64Array;
  /** Held at the end, and λ (0 where not held), in the order of `solids`. */
  isHeld: Uint8Array;
  amounts: Float64Array;
  /** λ of the gas where it is open: negative where taken up. */
  gasAmount: number;
  /** At equilibrium though its composition depends on the held ones: its amount is a share, the least-norm one. */
  isTied: Uint8Array;
  /** On "contradiction": Σ combination·ν + gasCombination·ν_gas = 0, which no activities satisfy (witness.ts). */
  combination: Float64Array;
  gasCombination: number;
  /** On "contradiction": the solid that fits with the others least. */
  culprit: number;
}

export function makeAssemblage(size: number): Assemblage {
  return {
    closure: CLOSURE.balanceTotal, present: new Uint8Array(0), xH: NaN, xC: NaN, maxIterations: 100,
    count: 0, solids: new Int32Array(size), isExcess: new Uint8Array(size), mayHold: new Uint8Array(size),
    targets: new Float64Array(size), isHeld: new Uint8Array(size), amounts: new Float64Array(size), gasAmount: 0,
    supplies: new Float64Array(size), isTied: new Uint8Array(size), combination: new Float64Array(size), gasCombination: 0, culprit: -1,
  };
}

/** The system of the held solids, or which of them depends on the others. */
export function lookUpHeld(kernel: Kernel, a: Assemblage): System | DependentPhases {
  const { pattern } = kernel;
  pattern.closure = Number.isNaN(a.xC) ? CLOSURE.react : CLOSURE.reactGas;
  pattern.present = a.present;
  pattern.usesAlkalinity = false;
  pattern.heldCount = 0;
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) pattern.held[pattern.heldCount++] = a.solids[k];
  return systemFor(kernel);
}

export function heldSystem(kernel: Kernel, a: Assemblage): System {
  const system = lookUpHeld(kernel, a);
  if ("dependent" in system) throw new Error("assemblage: the held solids depend on each other");
  return system;
}

export function setTargets(kernel: Kernel, a: Assemblage): void {
  const { targets } = kernel.ws;
  let count = 0;
  if (!Number.isNaN(a.xC)) targets[count++] = a.xC;
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) targets[count++] = a.targets[k];
}

/** Makes the state at hand fit to start from: new components get an activity, overflown ones another. */
export function boundStart(kernel: Kernel, a: Assemblage): void {
  const { ws, tableau } = kernel;
  for (let j = 0; j < tableau.componentCount; j++) {
    if (a.present[j] && !(ws.x[j] > -200 && ws.x[j] < 50)) ws.x[j] = Math.log(ws.totals[j] > 0 ? ws.totals[j] : SUPPLIED);
  }
  ws.ionicStrength = Math.min(Math.max(ws.ionicStrength, 1e-7), 2);
  ws.soluteSum = Math.min(Math.max(ws.soluteSum, 1e-7), 5);
}

/**
 * A cold start that the held phases agree with: of all x that satisfy them, the one nearest to the start made of totals,
 * x += Aᵀ(AAᵀ)⁻¹(ρ − A·x), so that no component is thrown out to where its concentrations overflow.
 */
export function coldStartHeld(kernel: Kernel, a: Assemblage): void {
  const { ws, tableau } = kernel;
  coldStart(kernel, a);
  const { phases } = heldSystem(kernel, a);
  const m = phases.length;
  const n = tableau.componentCount;
  const { matrix, step, targets, x } = ws;
  for (let p = 0; p < m; p++) {
    let r = targets[p];
    for (let j = 0; j < n; j++) if (phases[p].nu[j] !== 0) r -= phases[p].nu[j] * x[j];
    step[p] = r;
    for (let q = 0; q < m; q++) {
      let v = 0;
      for (let j = 0; j < n; j++) v += phases[p].nu[j] * phases[q].nu[j];
      matrix[p * m + q] = v;
    }
  }
  if (!solveDense(matrix, step, m, m)) return;
  for (let p = 0; p < m; p++) for (let j = 0; j < n; j++) if (phases[p].nu[j] !== 0) x[j] += phases[p].nu[j] * step[p];
}

/** λ from the order of the system's phases to that of the assemblage. */
export function readAmounts(kernel: Kernel, a: Assemblage): void {
  let count = 0;
  a.gasAmount = Number.isNaN(a.xC) ? 0 : kernel.ws.amounts[count++];
  for (let k = 0; k < a.count; k++) a.amounts[k] = a.isHeld[k] ? kernel.ws.amounts[count++] : 0;
}

/** ν·x + w·ln a_w − ρ at the state in the workspace. */
export function exceedance(kernel: Kernel, a: Assemblage, k: number): number {
  const { ws, solids, tableau } = kernel;
  const phase = solids[a.solids[k]];
  let v = phase.water * ws.lnWater - a.targets[k];
  for (let j = 0; j < tableau.componentCount; j++) if (phase.nu[j] !== 0) v += phase.nu[j] * ws.x[j]; // absent: NaN, never exceeds
  return v;
}
