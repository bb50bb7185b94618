/** Quantities as a spec writes them, read into base units: 62.1, "62.1 mg/L", "<0.05 mg/L", "1.4 mg/L as N", { value, unit, as, below … }. */
import type { Field } from "@/lib/chemistry/fields";
import { splitUnit, unitScale, unitsOf, type UnitScale } from "@/lib/chemistry/units";

export interface Quantity {
  /** In base units. */
  base: number;
  /** As written. */
  value: number;
  unit: string;
  as: string | null;
  /** Reported as "<x". */
  isBelow: boolean;
  isDryFraction: boolean;
  /** Given with an object: the operational fraction, "filtered", "labile" … */
  fraction: string | null;
}

export interface QuantityProblem { code: string; message: string; remedy: string }

export const isProblem = (result: object): result is QuantityProblem => "message" in result;

const TEXT = /^\s*([<≤])?\s*([+\-−]?(?:\d+\.?\d*|\.\d+)(?:[eE][+\-−]?\d+)?)\s*(.*?)\s*$/;

/**
 * Reads a quantity. @param defaultUnit of a bare number, with its basis ("mg/L as N"); the field's own where null.
 * Values out of range are not looked at here: in a row they make the row invalid, in a case or an axis they are faults.
 */
export function readQuantity(raw: unknown, field: Field, defaultUnit: string | null = null): Quantity | QuantityProblem {
  if (typeof raw === "number") return scaled(field, raw, null, null, false, null, defaultUnit);
  if (typeof raw === "string") {
    const match = TEXT.exec(raw);
    if (!match) return unreadable(raw, field);
    const { unit, as } = match[3] ? splitUnit(match[3]) : { unit: null, as: null };
    return scaled(field, Number(match[2].replaceAll("−", "-")), unit, as, match[1] !== undefined, null, defaultUnit);
  }
  if (typeof raw === "object" && raw !== null && !Array.isArray(raw)) return readObject(raw as Record<string, unknown>, field, defaultUnit);
  return unreadable(raw, field);
}

function readObject(raw: Record<string, unknown>, field: Field, defaultUnit: string | null): Quantity | QuantityProblem {
  if (field.kind === "gas" && typeof raw.log10 === "number") {
    return { base: 10 ** raw.log10, value: 10 ** raw.log10, unit: "atm", as: null, isBelow: false, isDryFraction: false, fraction: null };
  }
  if (typeof raw.value !== "number") return unreadable(raw, field);
  const fraction = typeof raw.fraction === "string" ? raw.fraction : null;
  const { unit, as } = typeof raw.unit === "string" ? splitUnit(raw.unit) : { unit: null, as: null };
  return scaled(field, raw.value, unit, typeof raw.as === "string" ? raw.as : as, raw.below === true, fraction, defaultUnit);
}

function scaled(field: Field, value: number, unit: string | null, as: string | null, isBelow: boolean, fraction: string | null, defaultUnit: string | null): Quantity | QuantityProblem {
  if (!Number.isFinite(value)) return { code: "not-a-number", message: `${field.key} is not a finite number.`, remedy: "Write a number between −1.7e308 and 1.7e308, or leave the value out." };
  const usual = unit === null ? splitUnit(defaultUnit ?? field.defaultUnit) : { unit, as: null };
  const basis = as ?? usual.as;
  const scale = unitScale(field, usual.unit, basis);
  if ("message" in scale) return { code: "unknown-unit", ...scale };
  return { base: toBase(value, scale), value, unit: usual.unit, as: basis, isBelow, isDryFraction: scale.isDryFraction, fraction };
}

const toBase = (value: number, scale: UnitScale): number => value * scale.factor + scale.offset;

/** Text of any value, short enough for a message. */
export function shorten(value: unknown): string {
  const text = typeof value === "string" ? value : JSON.stringify(value) ?? String(value);
  return text.length > 80 ? `${text.slice(0, 77)}…` : text;
}

function unreadable(raw: unknown, field: Field): QuantityProblem {
  const unit = unitsOf(field)[0];
  const example = unit === "no unit" ? "7.9" : `"62.1 ${unit}"`;
  return { code: "unreadable-quantity", message: `${field.key} cannot be read as a quantity: ${shorten(raw)}.`, remedy: `Write a number, a text like ${example}, or { "value": …, "unit": … }.` };
}

/** Why a base value is out of a field's range, or null. Used for values of cases and axes, which are the document's own. */
export function rangeProblem(base: number, field: Field): QuantityProblem | null {
  const { range } = field;
  if (!range || (range.isOpen ? base > range.from : base >= range.from) && base <= range.to) return null;
  const bounds = range.to === Infinity ? "0 or more" : `${range.isOpen ? "above " : ""}${range.from} to ${range.to}${range.unit ? ` ${range.unit}` : ""}`;
  return { code: "out-of-range", message: `${field.key} is out of range; it must be ${bounds}.`, remedy: `Give a value of ${bounds}.` };
}
