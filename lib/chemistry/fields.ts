/** Every place of a spec that takes a number with a unit: what kind of number it is and what a bare one is counted in. */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import type { Analyte, Solid } from "@/lib/chemistry/data/types";

export type FieldKind = "analyte" | "gas" | "pressure" | "temperature" | "length" | "conductivity" | "number" | "sites" | "solid";

export interface Field {
  /** As written in a row, a case or an axis. */
  key: string;
  kind: FieldKind;
  /** Unit of a bare number; "" for plain numbers. */
  defaultUnit: string;
  analyte: Analyte | null;
  /** For amounts of a solid. */
  solid: Solid | null;
  /** Range of a plausible value in base units; null where any finite number will do. */
  range: { from: number; to: number; isOpen?: boolean; unit: string } | null;
}

const plain = (key: string, kind: FieldKind, defaultUnit: string, range: Field["range"]): Field => ({ key, kind, defaultUnit, analyte: null, solid: null, range });

/** Allowed temperatures, °C, and pH (job-spec section 3). */
export const TEMPERATURES = { from: 0, to: 90, unit: "°C" };
export const PH_RANGE = { from: -2, to: 16, unit: "" };

const CONDITIONS: readonly Field[] = [
  plain("temperature", "temperature", "°C", TEMPERATURES),
  plain("pH", "number", "", PH_RANGE),
  plain("pHTemperature", "temperature", "°C", TEMPERATURES),
  plain("altitude", "length", "m", { from: -500, to: 9000, unit: "m" }),
  plain("pressure", "pressure", "atm", { from: 0.1, to: 10, unit: "atm" }),
  plain("conductivity", "conductivity", "uS/cm", { from: 0, to: 1e6, unit: "uS/cm" }),
  plain("pCO2", "gas", "atm", { from: 0, to: 1000, isOpen: true, unit: "atm" }),
];

const analyteField = (analyte: Analyte): Field => ({
  key: analyte.key, kind: "analyte", defaultUnit: analyte.defaultUnit, analyte, solid: null,
  range: analyte.kind === "equivalents" ? null : { from: 0, to: Infinity, unit: "" },
});

const rowFieldsOfSet = new WeakMap<ConstantsSet, ReadonlyMap<string, Field>>();

/** Fields of a row, by key. `site`, `date` and `id` are text and not among them. */
export function rowFields(set: ConstantsSet): ReadonlyMap<string, Field> {
  let fields = rowFieldsOfSet.get(set);
  if (!fields) {
    fields = new Map([...CONDITIONS, ...set.analytes.map(analyteField)].map((field) => [field.key, field]));
    rowFieldsOfSet.set(set, fields);
  }
  return fields;
}

/** Those of the built-in set. */
export const ROW_FIELDS: ReadonlyMap<string, Field> = rowFields(BUILT_IN);

export const SATURATION = plain("saturation", "number", "", { from: -100, to: 100, unit: "" });
export const LOG_K = plain("logK", "number", "", { from: -100, to: 100, unit: "" });
export const SITES = plain("sites", "sites", "ueq/mg", { from: 0, to: Infinity, unit: "" });
export const GAS = plain("gas", "gas", "atm", { from: 0, to: 1000, isOpen: true, unit: "atm" });

/** An amount of a solid, mol/kg; grams are counted in its formula. */
export function supplyField(solid: Solid): Field {
  return { key: `supply of ${solid.name}`, kind: "solid", defaultUnit: "mmol/L", analyte: null, solid, range: { from: 0, to: Infinity, unit: "" } };
}

/** The field that an axis names, or null where there is none. */
export function axisField(name: string, set: ConstantsSet = BUILT_IN): Field | null {
  const fields = rowFields(set);
  if (name !== "conductivity" && fields.has(name)) return fields.get(name)!;
  if (name === "organic/sites") return SITES;
  if (name === "close/SI") return SATURATION;
  if (name === "react/gas") return GAS;
  const ofSolid = /^react\/solids\/(.+)\/(saturation|supply|logK)$/.exec(name);
  const solid = ofSolid && set.solids.find((each) => each.name === ofSolid[1]);
  if (solid) return ofSolid[2] === "supply" ? supplyField(solid) : ofSolid[2] === "logK" ? LOG_K : SATURATION;
  return /^constants\/(.+)\/logK$/.test(name) ? LOG_K : null;
}

/** Every name that an axis may vary and a derivative be taken by, patterns spelled out. */
export function axisNames(set: ConstantsSet = BUILT_IN): string[] {
  const solids = set.solids.flatMap(({ name }) => ["saturation", "supply", "logK"].map((what) => `react/solids/${name}/${what}`));
  const constants = [...set.species.filter((each) => each.logK), ...set.solids].map(({ name }) => `constants/${name}/logK`);
  return [...[...rowFields(set).keys()].filter((key) => key !== "conductivity"), "react/gas", "close/SI", "organic/sites", ...solids, ...constants];
}
