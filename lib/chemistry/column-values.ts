/** The value of each result column from the state of the row solved last. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { isSensitivity, makeSensitivity } from "@/lib/chemistry/sensitivity";
import { conductivityIons, unconservedMetals } from "@/lib/chemistry/column-weights";
import { totalAnalytes } from "@/lib/chemistry/row-inputs";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, HYDROGEN } from "@/lib/kernel/kernel";

export type ColumnValue = () => number;

const LN10 = Math.LN10;
const MICRO = 1e6;
const MILLI = 1e3;
const noNumber: ColumnValue = () => NaN;
const zero: ColumnValue = () => 0;

/**
 * One function per column, bound to a case. A species that the case leaves out has concentration 0 and no activity.
 * @param units default unit per column, which derivatives by that column are taken in.
 */
export function columnValues(columns: readonly ColumnDescriptor[], solver: CaseSolver, units: Readonly<Record<string, string>> = {}): ColumnValue[] {
  const main = mainValues(solver);
  const sensitivity = columns.some(({ name }) => isSensitivity(name)) ? makeSensitivity(solver, units) : null;
  return columns.map(({ name }) => {
    if (sensitivity && isSensitivity(name)) return sensitivity.column(name);
    if (main[name]) return main[name];
    const colon = name.indexOf(":");
    return namedValue(name.slice(0, colon), name.slice(colon + 1), solver);
  });
}

function namedValue(kind: string, name: string, solver: CaseSolver): ColumnValue {
  const { model, kernel, reaction } = solver;
  switch (kind) {
    case "conc": {
      const i = model.species.indexOf(name);
      return i < 0 ? zero : () => kernel.ws.c[i];
    }
    case "lgActivity": return activityValue(name, solver);
    case "SI": return saturationValue(name, solver);
    case "solid": {
      const k = reaction.solids.indexOf(model.solids.indexOf(name));
      return k < 0 ? zero : () => reaction.dissolved[k] * MILLI;
    }
    case "gas": return () => (solver.kase.react ? reaction.gasTaken * MILLI : 0);
    case "dissolved": {
      const analyte = model.set.analytes.find((a) => a.key === name);
      if (name === "DIC") return () => dissolvedTotal(solver, CARBON);
      const j = analyte?.component ? model.components.indexOf(analyte.component) : -1;
      return j < 0 ? noNumber : () => dissolvedTotal(solver, j);
    }
    default: throw new Error(`column ${kind}:${name} is not known`);
  }
}

function dissolvedTotal(solver: CaseSolver, component: number): number {
  return componentSum(solver.model.tableau, solver.kernel.ws.c, component);
}

/** From the mass action rather than from c·γ, so that a species too dilute for a double still has its activity. */
function activityValue(name: string, solver: CaseSolver): ColumnValue {
  const { model, kernel } = solver;
  const i = model.species.indexOf(name);
  if (i < 0) return noNumber;
  const { tableau } = model;
  const n = tableau.componentCount;
  // Conditional constants speak of concentrations: an organic species' activity is its concentration.
  if (model.data[i] === null) return () => { const c = kernel.ws.c[i]; return c > 0 ? Math.log10(c) : NaN; };
  return () => {
    const { ws } = kernel;
    let v = ws.constants.lnK[i] + tableau.water[i] * ws.lnWater;
    for (let j = 0; j < n; j++) if (tableau.nu[i * n + j] !== 0) v += tableau.nu[i * n + j] * ws.x[j];
    return v / LN10;
  };
}

function saturationValue(name: string, solver: CaseSolver): ColumnValue {
  const { model, kernel } = solver;
  const k = model.solids.indexOf(name);
  if (k < 0) return noNumber;
  const phase = model.phases[k];
  return () => {
    const { ws } = kernel;
    let v = phase.water * ws.lnWater - ws.constants.solidLnK[k];
    for (let j = 0; j < phase.nu.length; j++) if (phase.nu[j] !== 0) v += phase.nu[j] * ws.x[j];
    return v / LN10;
  };
}

function mainValues(solver: CaseSolver): Record<string, ColumnValue> {
  const { kernel, model } = solver;
  const { tableau } = model;
  const { ws } = kernel;
  const ns = tableau.speciesCount;
  const chargeSum = () => { let v = 0; for (let i = 0; i < ns; i++) v += tableau.charge[i] * ws.c[i]; return v; };
  const chargeSize = () => { let v = 0; for (let i = 0; i < ns; i++) v += Math.abs(tableau.charge[i]) * ws.c[i]; return v; };
  const alkalinity = () => { let v = 0; for (let i = 0; i < ns; i++) v += tableau.alkalinity[i] * ws.c[i]; return v; };
  const { ancWeights } = solver.traits;
  const strong = totalAnalytes(model).filter((a) => a.strongCharge !== 0);
  const strongSum = () => { let v = 0; for (const a of strong) v += a.strongCharge * dissolvedTotal(solver, a.component); return v; };
  // Σ z·total(strong) − Σ z·c with the ions' own charge taken out of both, so that nothing large cancels.
  const anc = () => {
    let v = -dissolvedTotal(solver, HYDROGEN);
    for (let j = 1; j < ancWeights.length; j++) if (ancWeights[j] !== 0) v += ancWeights[j] * dissolvedTotal(solver, j);
    return v;
  };
  const unconserved = unconservedMetals(solver);
  const conserved = () => { let v = anc(); for (const a of unconserved) v -= a.strongCharge * dissolvedTotal(solver, a.component); return v; };
  return {
    pH: () => -ws.x[HYDROGEN] / LN10,
    ANC: () => anc() * MICRO,
    ANCions: () => strongSum() * MICRO,
    conservedANC: () => conserved() * MICRO,
    alkalinity: () => alkalinity() * MICRO,
    chargeError: () => chargeSum() * MICRO,
    balanceError: () => 100 * chargeSum() / chargeSize(),
    DIC: () => dissolvedTotal(solver, CARBON),
    ionicStrength: () => ws.sumI,
    pCO2: () => Math.exp(ws.x[CARBON] - ws.constants.gasLnK),
    conductivity: conductivityValue(solver),
  };
}

/** µS/cm at 25 °C: y²·Σ λ·|z|·c(meq/L) over free ions, log y² = −(√I/(1+√I) − 0.3·I) (Standard Methods 2510 A, from memory). */
function conductivityValue(solver: CaseSolver): ColumnValue {
  const { kernel, model } = solver;
  const ions = conductivityIons(model);
  return () => {
    let sum = 0;
    for (const ion of ions) sum += ion.weight * kernel.ws.c[ion.index];
    const strength = kernel.ws.sumI;
    const root = Math.sqrt(strength);
    return sum * 10 ** -(root / (1 + root) - 0.3 * strength);
  };
}
