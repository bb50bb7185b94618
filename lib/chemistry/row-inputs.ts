/**
 * The numbers of one result row, gathered with the precedence of the job spec: axis, then case, then row. Filled in place; NaN means
 * not given. Everything in base units (mol/kg, eq/kg, atm, °C, m; DOC in mg C/L).
 */
import type { ChemistryModel } from "@/lib/chemistry/chemistry-model";
import type { Pressure, ResolvedAxis, ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";

export interface RowInput {
  temperature: number;
  pH: number;
  pHTemperature: number;
  altitude: number;
  pressureAtm: number;
  alkalinity: number;
  ANC: number;
  DIC: number;
  DOC: number;
  /** atm, or a dry mole fraction. */
  pCO2: number;
  isFraction: boolean;
  gas: "closed" | "open" | "given";
  gasPressure: number;
  isGasFraction: boolean;
  sitesPerMgC: number;
  closeSI: number;
  /** By component: total, and whether one was given. Hydrogen, carbon and the organic acid stay 0 here. */
  totals: Float64Array;
  isGiven: Uint8Array;
  /** By solid of the case, in the order of `caseSolids`. */
  supplies: Float64Array;
  supplyKind: Uint8Array;
  saturations: Float64Array;
  /** log K by reaction index, NaN where the constants set rules. */
  overrides: Float64Array;
}

export const SUPPLY = { excess: 0, mayForm: 1, finite: 2 } as const;

export type InputField = "temperature" | "pH" | "pHTemperature" | "altitude" | "pressureAtm" | "alkalinity" | "ANC" | "DIC" | "DOC";
const FIELDS: readonly InputField[] = ["temperature", "pH", "pHTemperature", "altitude", "pressureAtm", "alkalinity", "ANC", "DIC", "DOC"];

/** Analytes that are totals of a component, with that component's index in a model. */
export function totalAnalytes(model: ChemistryModel): { key: string; component: number; strongCharge: number }[] {
  return model.set.analytes
    .filter((a) => a.kind === "total" && a.component !== null)
    .map((a) => ({ key: a.key, component: model.components.indexOf(a.component ?? ""), strongCharge: a.strongCharge }));
}

/** Solids of the case's reaction, as indices into the model's solids, ascending (the kernel wants them so). */
export function caseSolids(model: ChemistryModel, kase: ResolvedCase): { index: number; at: number }[] {
  return (kase.react?.solids ?? [])
    .map((s, at) => ({ index: model.solids.indexOf(s.name), at }))
    .sort((a, b) => a.index - b.index);
}

type AxisSetter = (input: RowInput, value: number, isFraction: boolean) => void;

/** Fills a RowInput for a water and a grid point of one case. */
export interface InputReader {
  input: RowInput;
  read(water: ResolvedWater, point: number): RowInput;
}

export function makeInputReader(model: ChemistryModel, kase: ResolvedCase, axes: readonly ResolvedAxis[]): InputReader {
  const solids = caseSolids(model, kase);
  const nan = () => new Float64Array(model.reactionIndex.size).fill(NaN);
  const overrides = nan();
  for (const [name, { logK }] of Object.entries(kase.constants)) setOverride(model, overrides, name, logK);
  for (const s of kase.react?.solids ?? []) if (s.logK !== null) setOverride(model, overrides, s.name, s.logK);
  const input: RowInput = {
    temperature: NaN, pH: NaN, pHTemperature: NaN, altitude: NaN, pressureAtm: NaN, alkalinity: NaN, ANC: NaN, DIC: NaN, DOC: NaN,
    pCO2: NaN, isFraction: false, gas: "closed", gasPressure: NaN, isGasFraction: false, sitesPerMgC: NaN, closeSI: NaN,
    totals: new Float64Array(model.components.length), isGiven: new Uint8Array(model.components.length),
    supplies: new Float64Array(solids.length), supplyKind: new Uint8Array(solids.length), saturations: new Float64Array(solids.length),
    overrides: nan(),
  };
  const analytes = totalAnalytes(model);
  const setters = axes.map((axis) => axisSetter(axis.field, model, kase, solids));
  const read = (water: ResolvedWater, point: number): RowInput => {
    for (const field of FIELDS) input[field] = kase.given[field] ?? water[field] ?? NaN;
    setPressure(input, kase.given.pCO2 ?? water.pCO2);
    for (const { key, component } of analytes) {
      const value = kase.given.totals?.[key] ?? water.totals[key];
      input.isGiven[component] = value === undefined ? 0 : 1;
      input.totals[component] = value ?? 0;
    }
    input.sitesPerMgC = kase.organic.sitesPerMgC;
    input.closeSI = kase.close.saturated?.SI ?? NaN;
    setReaction(input, kase, solids);
    input.overrides.set(overrides);
    let rest = point;
    for (let k = axes.length - 1; k >= 0; k--) {
      const length = axes[k].base.length;
      setters[k](input, axes[k].base[rest % length], axes[k].isDryFraction);
      rest = Math.floor(rest / length);
    }
    return input;
  };
  return { input, read };
}

function setOverride(model: ChemistryModel, overrides: Float64Array, name: string, logK: number): void {
  const index = model.reactionIndex.get(name);
  if (index === undefined) throw new Error(`constants: ${name} is no species, solid or reaction of the constants set`);
  overrides[index] = logK;
}

function setPressure(input: RowInput, pressure: Pressure | null | undefined): void {
  input.isFraction = !!pressure && "dryFraction" in pressure;
  input.pCO2 = !pressure ? NaN : "dryFraction" in pressure ? pressure.dryFraction : pressure.atm;
}

function setReaction(input: RowInput, kase: ResolvedCase, solids: readonly { at: number }[]): void {
  const { react } = kase;
  if (!react) return;
  if (typeof react.gas === "string") { input.gas = react.gas; input.gasPressure = NaN; input.isGasFraction = false; }
  else {
    input.gas = "given";
    input.isGasFraction = "dryFraction" in react.gas;
    input.gasPressure = "dryFraction" in react.gas ? react.gas.dryFraction : react.gas.atm;
  }
  for (let k = 0; k < solids.length; k++) {
    const solid = react.solids[solids[k].at];
    setSupply(input, k, solid.supply);
    input.saturations[k] = solid.saturation;
  }
}

function setSupply(input: RowInput, k: number, supply: "excess" | "may-form" | number): void {
  input.supplyKind[k] = supply === "excess" ? SUPPLY.excess : supply === "may-form" || supply === 0 ? SUPPLY.mayForm : SUPPLY.finite;
  input.supplies[k] = typeof supply === "number" ? supply : 0;
}

const ignored: AxisSetter = () => undefined;

/** What an axis field sets. A field of a solid that a case does not list leaves that case's rows alike along the axis. */
function axisSetter(field: string, model: ChemistryModel, kase: ResolvedCase, solids: readonly { index: number }[]): AxisSetter {
  if (field === "pCO2") return (input, value, isFraction) => { input.pCO2 = value; input.isFraction = isFraction; };
  if (field === "pressure") return (input, value) => { input.pressureAtm = value; };
  const own = FIELDS.find((f) => f === field);
  if (own) return (input, value) => { input[own] = value; };
  if (field === "organic/sites") return (input, value) => { input.sitesPerMgC = value; };
  if (field === "close/SI") return (input, value) => { input.closeSI = value; };
  if (field === "react/gas") {
    if (!kase.react) return ignored;
    return (input, value, isFraction) => { input.gas = "given"; input.gasPressure = value; input.isGasFraction = isFraction; };
  }
  const solidField = /^react\/solids\/(.+)\/(saturation|supply|logK)$/.exec(field);
  if (solidField) return solidSetter(solidField[1], solidField[2], model, kase, solids);
  const constant = /^constants\/(.+)\/logK$/.exec(field);
  if (constant) {
    const index = model.reactionIndex.get(constant[1]);
    if (index === undefined) throw new Error(`axis ${field}: ${constant[1]} is no species, solid or reaction of the constants set`);
    return (input, value) => { input.overrides[index] = value; };
  }
  const analyte = totalAnalytes(model).find((a) => a.key === field);
  if (!analyte) throw new Error(`axis ${field}: no such field`);
  return (input, value) => { input.totals[analyte.component] = value; input.isGiven[analyte.component] = 1; };
}

function solidSetter(name: string, what: string, model: ChemistryModel, kase: ResolvedCase, solids: readonly { index: number }[]): AxisSetter {
  if (!model.solids.includes(name)) throw new Error(`axis react/solids/${name}/${what}: no solid is called ${name}`);
  const k = solids.findIndex((s) => s.index === model.solids.indexOf(name));
  if (k < 0 || !kase.react) return ignored;
  if (what === "saturation") return (input, value) => { input.saturations[k] = value; };
  if (what === "supply") return (input, value) => setSupply(input, k, value);
  const index = model.reactionIndex.get(name) ?? -1;
  return (input, value) => { input.overrides[index] = value; };
}
