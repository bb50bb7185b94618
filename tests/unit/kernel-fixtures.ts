/** Small builders for resolved jobs, so that a test says only what it is about. */
import { compileJob } from "@/lib/chemistry/compile-job";
import type { CarbonFact, ProtonFact, ResolvedAxis, ResolvedCase, ResolvedJob, ResolvedSolid, ResolvedWater, SolvedRows } from "@/lib/chemistry/types";
import { STATUS_NAMES } from "@/lib/chemistry/types";

export type Fact = ProtonFact | CarbonFact;

export function makeWater(given: Partial<ResolvedWater> = {}): ResolvedWater {
  return {
    id: "w", site: null, date: null, temperature: 25, pH: null, pHTemperature: null, altitude: null, pressureAtm: null, conductivity: null,
    totals: {}, alkalinity: null, ANC: null, DIC: null, DOC: null, pCO2: null, aluminiumFractionGiven: true, faults: [], warnings: [], ...given,
  };
}

export function makeCase(given: Partial<ResolvedCase> = {}): ResolvedCase {
  return {
    name: "case", close: { facts: ["charge", "pCO2"], saturated: null }, given: {}, activity: "davies",
    organic: { model: "none", pKa: [], sitesPerMgC: 0 }, complexes: "all", constants: {}, react: null, ...given,
  };
}

export function closing(a: Fact, b: Fact, SI = 0): Pick<ResolvedCase, "close"> {
  return { close: { facts: [a, b], saturated: a === "saturated" || b === "saturated" ? { solid: "calcite", SI } : null } };
}

export function meeting(gas: "open" | "closed", solids: Record<string, "excess" | "may-form" | number>): Pick<ResolvedCase, "react"> {
  return { react: { gas, solids: Object.entries(solids).map(([name, supply]): ResolvedSolid => ({ name, supply, saturation: 0, logK: null })) } };
}

export function makeAxis(field: string, values: number[], isDryFraction = false): ResolvedAxis {
  return { field, unit: "", shown: Float64Array.from(values), base: Float64Array.from(values), isDryFraction };
}

export function makeJob(waters: ResolvedWater[], cases: ResolvedCase[], given: Partial<ResolvedJob> = {}): ResolvedJob {
  return { waters, cases, axes: [], missing: "zero", report: ["pH"], solver: { tolerance: 1e-10, maxIterations: 100 }, ...given };
}

export interface Row { status: string; message: string; warnings: string; iterations: number; residual: number; values: Record<string, number> }

/** Every row of a job as objects. */
export function solveAll(job: ResolvedJob): Row[] {
  const compiled = compileJob(job);
  return readRows(compiled.solve(0, compiled.rowCount), compiled.columns.map((c) => c.name));
}

export function readRows(rows: SolvedRows, names: string[]): Row[] {
  return Array.from({ length: rows.count }, (_, at) => ({
    status: STATUS_NAMES[rows.status[at]], message: rows.texts[rows.message[at]], warnings: rows.texts[rows.warnings[at]],
    iterations: rows.iterations[at], residual: rows.residual[at],
    values: Object.fromEntries(names.map((name, k) => [name, rows.values[k][at]])),
  }));
}

/** One water under one case, with the columns a test asks for. */
export function solveOne(water: Partial<ResolvedWater>, kase: Partial<ResolvedCase>, report: string[], given: Partial<ResolvedJob> = {}): Row {
  return solveAll(makeJob([makeWater(water)], [makeCase(kase)], { report, ...given }))[0];
}

/** Close enough in relative terms, for numbers of any size. */
export function isClose(a: number, b: number, relative: number): boolean {
  return Math.abs(a - b) <= relative * Math.max(Math.abs(a), Math.abs(b));
}

/** A hard-water beck with a bit of everything in it. */
export const BECK: Partial<ResolvedWater> = {
  temperature: 12, DOC: 4, pCO2: { atm: 10 ** -2.8 },
  totals: {
    Ca: 1.5e-3, Mg: 3e-4, Na: 4e-4, K: 5e-5, Cl: 4e-4, SO4: 3e-4, NO3: 1e-4, F: 5e-6, Al: 1e-6, Si: 1e-4, NH4: 1e-5, PO4: 1e-6, Sr: 1e-6, Ba: 1e-7, NO2: 1e-7,
  },
};
