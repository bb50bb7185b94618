/**
 * A system: the tableau restricted to the components present, with the tied activities eliminated and only the balances kept
 * that hold. Built once for each pattern (components present, phases held, balances imposed) and used for many rows.
 *
 * Held phases  ν_m·x + ω_m·ln a_w = ρ_m  are eliminated:   x = X·(ρ − ω·ln a_w) + Z·y,  y = x of the free components.
 * Amounts that may be added at will (sources s_k: the gas, a held solid, an acid that holds the pH) leave the balances
 *     R·(Σ_i ν_i c_i − T) = 0  with  R·s_k = 0,  and afterwards  Σ_k s_k λ_k = T − S  gives the amounts λ.
 * Where the sources are the held phases, R = Zᵀ and the system is the gradient of a convex function (design: one convex problem).
 * Where they differ (pH held while CO2 is what is added, say) it is still square, but no minimisation.
 *
 * Storage: species of the system in the tableau's order; sparse rows of exponents N = Zᵀν_i (nStart, nColumn, nValue) and
 * of weights W = R·ν_i (wStart, wRow, wValue).
 */
import { eliminate, type Elimination } from "./linear";
import type { GeneratedCode } from "./generated";
import type { Phase, Tableau } from "./tableau";

export interface System {
  /** Solves so far, and straight-line code once there were enough of them. */
  solves: number;
  code: GeneratedCode | null;
  /** Unknowns and balances. */
  size: number;
  /** Tableau indices of the species present. */
  species: Int32Array;
  present: Uint8Array;
  nStart: Int32Array; nColumn: Int32Array; nValue: Float64Array;
  wStart: Int32Array; wRow: Int32Array; wValue: Float64Array;
  /** Exponent of water once phases are eliminated, per species. */
  water: Float64Array;
  /** ln K shift per species and held phase, row-major species × phases: ln K' = ln K + shift·ρ. */
  shift: Float64Array;
  charge: Float64Array;
  gammaClass: Int32Array;
  phases: readonly Phase[];
  /** Component of each unknown. */
  free: Int32Array;
  /** Component that a balance is named after. */
  rowComponent: Int32Array;
  /** Balance paired with an unknown (same component), or −1. */
  rowOfColumn: Int32Array;
  /** Z, n × size, and X, n × phases. */
  z: Float64Array; x: Float64Array;
  /** R, size × n. */
  r: Float64Array;
  /** Pivot component of each source and the inverse that turns imbalances there into amounts, sources × sources. */
  sourcePivots: Int32Array;
  sourceInverse: Float64Array;
  sources: readonly Float64Array[];
  /** Whether the hydrogen balance counts alkalinity only. */
  usesAlkalinity: boolean;
  /** R = Zᵀ: the system is a gradient. */
  isConvex: boolean;
  /** Position of the pH-dependent species and of its acid among `species`, or −1, with its exponents split in two. */
  varying: number; varyingAcid: number;
  varyingAcidValue: Float64Array; varyingHydrogenValue: Float64Array;
}

export interface DependentPhases { dependent: number; coefficients: Float64Array }

export interface SystemPlan {
  present: Uint8Array;
  phases: readonly Phase[];
  /** Directions in which amounts are free; absent: those of `phases`. */
  sources: readonly Float64Array[];
  usesAlkalinity: boolean;
  /** Component to eliminate each phase and source through, where one is wanted; the others choose metals first, hydrogen last. */
  pivots: readonly number[];
}

/** @returns the system, or which held phase depends on those before it and with what coefficients. */
export function buildSystem(tableau: Tableau, plan: SystemPlan): System | DependentPhases {
  const n = tableau.componentCount;
  const order: number[] = [];
  for (let j = 2; j < n; j++) if (plan.present[j]) order.push(j);
  // Carbon and hydrogen last: their balances couple everything and are better kept than solved for.
  if (plan.present[1]) order.push(1);
  order.push(0);
  const held = eliminate(plan.phases.map((p) => p.nu), n, order, plan.pivots);
  if ("dependentRow" in held) return { dependent: held.dependentRow, coefficients: held.coefficients };
  const added = eliminate(plan.sources, n, order, plan.pivots);
  if ("dependentRow" in added) return { dependent: added.dependentRow, coefficients: added.coefficients };

  const free = Int32Array.from(held.free.filter((j) => plan.present[j]));
  const rowComponent = Int32Array.from(added.free.filter((j) => plan.present[j]));
  const size = free.length;
  const phaseCount = plan.phases.length;
  const z = new Float64Array(n * size);
  const x = new Float64Array(n * phaseCount);
  free.forEach((j, b) => { z[j * size + b] = 1; });
  held.pivots.forEach((p, m) => {
    free.forEach((j, b) => { z[p * size + b] = -held.reduced[m * n + j]; });
    for (let k = 0; k < phaseCount; k++) x[p * phaseCount + k] = held.transform[m * phaseCount + k];
  });
  const r = balanceRows(added, rowComponent, n);
  const isConvex = plan.sources.length === phaseCount && !plan.usesAlkalinity
    && plan.sources.every((s, k) => s.every((v, j) => v === plan.phases[k].nu[j]));

  const species: number[] = [];
  for (let i = 0; i < tableau.speciesCount; i++) {
    let isPresent = true;
    for (let j = 0; j < n; j++) if (tableau.nu[i * n + j] !== 0 && !plan.present[j]) isPresent = false;
    if (isPresent) species.push(i);
  }
  const varying = species.indexOf(tableau.varying);
  const tables = speciesTables(tableau, plan, species, { z, x, r, size });
  const a = varying >= 0 ? tables.nStart[varying] : 0;
  const b = varying >= 0 ? tables.nStart[varying + 1] : 0;
  const columns = tables.nColumn.subarray(a, b);
  return {
    solves: 0, code: null, size, species: Int32Array.from(species), present: plan.present, ...tables,
    charge: Float64Array.from(species, (i) => tableau.charge[i]),
    gammaClass: Int32Array.from(species, (i) => tableau.gammaClass[i]),
    phases: plan.phases, free, rowComponent,
    rowOfColumn: free.map((j) => rowComponent.indexOf(j)),
    z, x, r,
    sourcePivots: Int32Array.from(added.pivots), sourceInverse: added.transform, sources: plan.sources,
    usesAlkalinity: plan.usesAlkalinity, isConvex,
    varying, varyingAcid: species.indexOf(tableau.varyingAcid),
    // The acid is a component, so its species index is its component index.
    varyingAcidValue: Float64Array.from(columns, (c) => z[tableau.varyingAcid * size + c]),
    varyingHydrogenValue: Float64Array.from(columns, (c) => z[c]),
  };
}

/** R: one balance for each component that is no pivot of a source, freed of every source. */
function balanceRows(added: Elimination, rowComponent: Int32Array, n: number): Float64Array {
  const r = new Float64Array(rowComponent.length * n);
  rowComponent.forEach((j, a) => {
    r[a * n + j] = 1;
    added.pivots.forEach((p, m) => { r[a * n + p] = -added.reduced[m * n + j]; });
  });
  return r;
}

interface Bases { z: Float64Array; x: Float64Array; r: Float64Array; size: number }

function speciesTables(tableau: Tableau, plan: SystemPlan, species: readonly number[], bases: Bases) {
  const n = tableau.componentCount;
  const { z, x, r, size } = bases;
  const phaseCount = plan.phases.length;
  const nStart = new Int32Array(species.length + 1);
  const wStart = new Int32Array(species.length + 1);
  const nColumn: number[] = []; const nValue: number[] = [];
  const wRow: number[] = []; const wValue: number[] = [];
  const water = new Float64Array(species.length);
  const shift = new Float64Array(species.length * phaseCount);
  species.forEach((i, s) => {
    const nu = tableau.nu.subarray(i * n, (i + 1) * n);
    for (let b = 0; b < size; b++) {
      let v = 0;
      for (let j = 0; j < n; j++) v += nu[j] * z[j * size + b];
      if (v !== 0) { nColumn.push(b); nValue.push(v); }
    }
    water[s] = tableau.water[i];
    for (let k = 0; k < phaseCount; k++) {
      let v = 0;
      for (let j = 0; j < n; j++) v += nu[j] * x[j * phaseCount + k];
      shift[s * phaseCount + k] = v;
      water[s] -= v * plan.phases[k].water;
    }
    for (let a = 0; a < size; a++) {
      let v = 0;
      for (let j = 0; j < n; j++) v += r[a * n + j] * (j === 0 && plan.usesAlkalinity ? -tableau.alkalinity[i] : nu[j]);
      if (v !== 0) { wRow.push(a); wValue.push(v); }
    }
    nStart[s + 1] = nColumn.length;
    wStart[s + 1] = wRow.length;
  });
  return {
    nStart, wStart, water, shift,
    nColumn: Int32Array.from(nColumn), nValue: Float64Array.from(nValue),
    wRow: Int32Array.from(wRow), wValue: Float64Array.from(wValue),
  };
}
