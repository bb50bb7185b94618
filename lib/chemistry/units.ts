/**
 * Units and what they are worth in base units: mol/kg, eq/kg (alkalinity, ANC), mg C/L (DOC), atm, °C, m, µS/cm, mol of sites per mg C.
 * One litre of a dilute water is taken for one kilogram of water (chemistry section 1).
 */
import { ATOMIC_MASSES } from "@/lib/chemistry/data";
import { compositionOf, molarMassOf } from "@/lib/chemistry/data/formula";
import type { Analyte } from "@/lib/chemistry/data/types";
import type { Field } from "@/lib/chemistry/fields";

/** base = value · factor + offset. */
export interface UnitScale { factor: number; offset: number; isDryFraction: boolean }
export interface UnitProblem { message: string; remedy: string }

/** mg of CaCO3 per meq, so g per eq (Standard Methods; half the molar mass as the trade rounds it). */
const MG_CACO3_PER_MEQ = 50.04;
/** One German degree is 10 mg/L CaO (ISO 6059, handbooks). */
const MG_CAO_PER_DEGREE = 10;

const PREFIX: Record<string, number> = { k: 1e3, "": 1, m: 1e-3, u: 1e-6, n: 1e-9, p: 1e-12 };
const VOLUME: Record<string, number> = { L: 1, kg: 1, dm3: 1, m3: 1e-3 };
const PRESSURES: Record<string, number> = {
  atm: 1, matm: 1e-3, uatm: 1e-6, Pa: 1 / 101325, hPa: 100 / 101325, kPa: 1000 / 101325, bar: 1e5 / 101325, mbar: 100 / 101325,
};

const CONDUCTIVITIES: Record<string, number> = { "uS/cm": 1, "mS/cm": 1000, "mS/m": 10, "S/m": 1e4 };
/** Equivalents in one formula unit that alkalinity or ANC may be counted in. */
const EQUIVALENTS: Record<string, number> = { HCO3: 1, CO3: 2, CaO: 2, C: 1 };

/** One spelling for each unit: u for micro, L for litre, "/L" for "L-1" and "·L⁻¹", no stray spaces. */
export function spellUnit(text: string): string {
  return text.trim().replaceAll(/[µμ]/g, "u").replaceAll(/[·⋅\s]+/g, " ").replaceAll(/⁻¹|−1\b/g, "-1").replaceAll(/ ?\/ ?/g, "/")
    .replace(/ (L|l|kg|dm3)\^?-1\b/, "/$1").replace(/\/(?:l|litre|liter)\b/, "/L");
}

const BEHIND = /^(\S+(?:\/\w+|M)|pp[mb]) (?:as )?(?:[A-Z][A-Za-z0-9]*-)?([A-Z][A-Za-z0-9()]*)(?:\^?\d?[+-])?$/;
const INSIDE = /^([kmunp]?g) ([A-Z][A-Za-z0-9()]*)\/(\w+)$/;

/** A unit with its basis: "mg/L as N", "mg N/L", "mg/L CaCO3", "mg/L NO3-N" all say what the mass is counted in. */
export function splitUnit(text: string): { unit: string; as: string | null } {
  const spelled = spellUnit(text);
  const behind = BEHIND.exec(spelled);
  if (behind) return { unit: behind[1], as: behind[2] };
  const inside = INSIDE.exec(spelled);
  return inside ? { unit: `${inside[1]}/${inside[3]}`, as: inside[2] } : { unit: spelled, as: null };
}

/** What a unit is worth in a field, or why the field does not take it. */
export function unitScale(field: Field, unit: string, as: string | null): UnitScale | UnitProblem {
  return findScale(field, unit, as)
    ?? { message: `${field.key} does not take the unit “${(as ? `${unit} as ${as}` : unit).slice(0, 80)}”.`, remedy: `Write one of ${unitsOf(field).join(", ")}.` };
}

export interface ReadUnit { unit: string; as: string | null; scale: UnitScale | UnitProblem }

/** Units already read, by field and text as written: a table repeats a handful of them in millions of cells. */
const readings = new WeakMap<Field, Map<string, ReadUnit>>();
/** Hostile documents may name any number of units, as long as they like; what is remembered of a field is bounded. */
const MOST_READINGS = 200;

/** A unit as written, with what it is worth in a field. */
export function readUnit(field: Field, text: string): ReadUnit {
  let known = readings.get(field);
  if (!known) readings.set(field, known = new Map());
  let reading = known.get(text);
  if (!reading) {
    const { unit, as } = splitUnit(text);
    reading = { unit, as, scale: unitScale(field, unit, as) };
    if (known.size >= MOST_READINGS) known.clear();
    known.set(text, reading);
  }
  return reading;
}

/** Units that a field takes, the usual one first. */
export function unitsOf(field: Field): string[] {
  const usual = (all: string[]): string[] => [field.defaultUnit, ...all.filter((each) => each !== field.defaultUnit)];
  switch (field.kind) {
    case "gas": return usual(["atm", "ppm", "uatm", "matm", "Pa", "hPa", "kPa", "bar", "mbar"]);
    case "pressure": return usual(Object.keys(PRESSURES));
    case "temperature": return ["°C", "K"];
    case "length": return ["m", "km", "ft"];
    case "conductivity": return ["uS/cm", "mS/cm", "mS/m", "S/m"];
    case "sites": return ["ueq/mg", "meq/g", "umol/mg", "mol/mol"];
    case "solid": return ["mmol/L", "umol/L", "mol/L", "mg/L", "g/L", "mmol/kg"];
    case "number": return ["no unit"];
    default: return usual(analyteUnits(field.analyte!));
  }
}

function analyteUnits(analyte: Analyte): string[] {
  if (analyte.kind === "equivalents") return ["meq/L", "ueq/L", "eq/L", "mg/L as CaCO3", "mg/L as HCO3", "°dH"];
  const charged = analyte.strongCharge !== 0 ? ["meq/L", "ueq/L"] : [];
  return ["mg/L", "ug/L", "g/L", "mmol/L", "umol/L", "mol/L", ...charged, ...(analyte.key === "Ca" || analyte.key === "Mg" ? ["mg/L as CaCO3", "°dH"] : [])];
}

const plain = (factor: number, offset = 0, isDryFraction = false): UnitScale => ({ factor, offset, isDryFraction });

function findScale(field: Field, unit: string, as: string | null): UnitScale | null {
  if (field.kind === "analyte") return analyteScale(field.analyte!, unit, as);
  if (as !== null && !(field.kind === "sites" && as === "C")) return null;
  switch (field.kind) {
    case "number": return unit === "" || unit === "-" ? plain(1) : null;
    case "gas": return unit === "ppm" ? plain(1e-6, 0, true) : pressureScale(unit);
    case "pressure": return pressureScale(unit);
    case "temperature": return /^(°C|° C|°c|degC|C|deg C)$/.test(unit) ? plain(1) : unit === "K" ? plain(1, -273.15) : null;
    case "length": return unit === "m" ? plain(1) : unit === "km" ? plain(1000) : unit === "ft" ? plain(0.3048) : null;
    case "conductivity": return Object.hasOwn(CONDUCTIVITIES, unit) ? plain(CONDUCTIVITIES[unit]) : null;
    case "sites": return sitesScale(unit);
    case "solid": {
      const amount = readAmount(unit);
      if (!amount) return null;
      if (amount.quantity === "mol") return plain(amount.scale);
      return amount.quantity === "g" ? plain(amount.scale / (field.solid!.molarMass ?? molarMassOf(field.solid!.formula)!)) : null;
    }
  }
}

const pressureScale = (unit: string): UnitScale | null => (Object.hasOwn(PRESSURES, unit) ? plain(PRESSURES[unit]) : null);

/** mol of sites per mg C. */
function sitesScale(unit: string): UnitScale | null {
  if (["ueq/mg", "meq/g", "umol/mg", "mmol/g"].includes(unit)) return plain(1e-6);
  return unit === "mol/mol" ? plain(1e-3 / ATOMIC_MASSES.C) : null;
}

/** "mmol/L" as { quantity: "mol", scale: 1e-3 } per litre or kilogram. */
function readAmount(unit: string): { quantity: "g" | "mol" | "eq"; scale: number } | null {
  // Parts by mass of a dilute water: mg/kg and µg/kg.
  if (unit === "ppm" || unit === "ppb") return { quantity: "g", scale: unit === "ppm" ? 1e-3 : 1e-6 };
  const molar = /^([munp]?)M$/.exec(unit);
  if (molar) return { quantity: "mol", scale: PREFIX[molar[1]] };
  const match = /^([kmunp]?)(g|mol|eq)\/(L|kg|dm3|m3)$/.exec(unit);
  return match ? { quantity: match[2] as "g" | "mol" | "eq", scale: PREFIX[match[1]] * VOLUME[match[3]] } : null;
}

function analyteScale(analyte: Analyte, unit: string, as: string | null): UnitScale | null {
  if (/^°? ?dH$/.test(unit)) return as === null ? degreeScale(analyte) : null;
  const amount = readAmount(unit);
  if (!amount) return null;
  const { quantity, scale } = amount;
  if (analyte.kind === "equivalents") {
    if (quantity === "eq") return as === null ? plain(scale) : null;
    if (quantity === "mol") return as === null || as === "HCO3" ? plain(scale) : as === "CO3" || as === "CaCO3" ? plain(scale * 2) : null;
    return as === null ? null : equivalentsOfMass(as, scale);
  }
  if (analyte.kind === "organic") return organicScale(quantity, scale, as);
  const charge = Math.abs(analyte.strongCharge);
  if (quantity === "eq") return as === null && charge > 0 ? plain(scale / charge) : null;
  if (quantity === "mol") return as === null || isOneOf(analyte, as) ? plain(scale) : null;
  if (as === "CaCO3" && charge > 0) return plain(scale / MG_CACO3_PER_MEQ / charge);
  return massScale(analyte, scale, as ?? analyte.formula);
}

/** eq per unit of mass counted in CaCO3, HCO3 or CO3. */
function equivalentsOfMass(as: string, scale: number): UnitScale | null {
  if (as === "CaCO3") return plain(scale / MG_CACO3_PER_MEQ);
  return Object.hasOwn(EQUIVALENTS, as) ? plain(scale * EQUIVALENTS[as] / molarMassOf(as)!) : null;
}

function organicScale(quantity: "g" | "mol" | "eq", scale: number, as: string | null): UnitScale | null {
  if (as !== null && as !== "C" || quantity === "eq") return null;
  return plain(quantity === "g" ? scale * 1000 : scale * ATOMIC_MASSES.C * 1000);
}

/** The element an analyte is counted by: the first of its formula that is not oxygen or hydrogen. */
function elementOf(formula: string): string | undefined {
  return Object.keys(compositionOf(formula) ?? {}).find((element) => element !== "O" && element !== "H");
}

const countIn = (analyte: Analyte, as: string): number => compositionOf(as)?.[elementOf(analyte.formula) ?? ""] ?? 0;
const isOneOf = (analyte: Analyte, as: string): boolean => countIn(analyte, as) === 1;

function massScale(analyte: Analyte, scale: number, as: string): UnitScale | null {
  if (as === analyte.formula) return plain(scale / analyte.molarMass);
  const count = countIn(analyte, as);
  const mass = molarMassOf(as);
  return mass !== null && count > 0 ? plain(scale * count / mass) : null;
}

/** Hardness of one metal, or alkalinity, in German degrees. */
function degreeScale(analyte: Analyte): UnitScale | null {
  const molesOfOxide = MG_CAO_PER_DEGREE * 1e-3 / molarMassOf("CaO")!;
  if (analyte.kind === "equivalents") return plain(2 * molesOfOxide);
  return analyte.key === "Ca" || analyte.key === "Mg" ? plain(molesOfOxide) : null;
}
