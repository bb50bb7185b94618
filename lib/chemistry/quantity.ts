/** Quantities as a spec writes them, read into base units: 62.1, "62.1 mg/L", "<0.05 mg/L", "1.4 mg/L as N", { value, unit, as, below … }. */
import type { Field } from "@/lib/chemistry/fields";
import { readUnit, type ReadUnit, unitScale, unitsOf } from "@/lib/chemistry/units";

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

const TEXT = /^\s*([<≤])?\s*([+\-−]?(?:\d+\.?\d*|\.\d+)(?:[eE][+\-−]?\d+)?)\s*([^\s,.\d].*)?$/;
/** A longer text is no quantity, and is not looked through. */
const LONGEST_TEXT = 200;
const LONGEST_BASIS = 40;

/**
 * Reads a quantity. @param defaultUnit of a bare number, with its basis ("mg/L as N"); the field's own where null.
 * Values out of range are not looked at here: in a row they make the row invalid, in a case or an axis they are faults.
 */
export function readQuantity(raw: unknown, field: Field, defaultUnit: string | null = null): Quantity | QuantityProblem {
  if (typeof raw === "number") return scaled(field, raw, readUnit(field, defaultUnit ?? field.defaultUnit), false, null);
  if (typeof raw === "string") {
    const match = raw.length > LONGEST_TEXT ? null : TEXT.exec(raw);
    if (!match) return unreadable(raw, field);
    const number = match[2].includes("−") ? match[2].replaceAll("−", "-") : match[2];
    return scaled(field, Number(number), readUnit(field, match[3] ?? defaultUnit ?? field.defaultUnit), match[1] !== undefined, null);
  }
  if (typeof raw === "object" && raw !== null && !Array.isArray(raw)) return readObject(raw as Record<string, unknown>, field, defaultUnit);
  return unreadable(raw, field);
}

function readObject(raw: Record<string, unknown>, field: Field, defaultUnit: string | null): Quantity | QuantityProblem {
  if (field.kind === "gas" && typeof raw.log10 === "number") return scaled(field, 10 ** raw.log10, readUnit(field, "atm"), false, null);
  if (typeof raw.value !== "number") return unreadable(raw, field);
  const fraction = typeof raw.fraction === "string" ? raw.fraction : null;
  const unit = typeof raw.unit === "string" ? raw.unit.slice(0, LONGEST_TEXT) : defaultUnit ?? field.defaultUnit;
  const reading = readUnit(field, unit);
  return scaled(field, raw.value, typeof raw.as === "string" ? counted(field, reading, raw.as.slice(0, LONGEST_BASIS)) : reading, raw.below === true, fraction);
}

/** A unit whose basis is named apart from it. */
const counted = (field: Field, { unit }: ReadUnit, as: string): ReadUnit => ({ unit, as, scale: unitScale(field, unit, as) });

/** Amounts and the pressure of CO2 may be reported as lying below a limit; half of a temperature means nothing. */
const mayLieBelow = (field: Field): boolean => field.kind === "analyte" || field.kind === "conductivity" || field.key === "pCO2";

function scaled(field: Field, value: number, { unit, as, scale }: ReadUnit, isBelow: boolean, fraction: string | null): Quantity | QuantityProblem {
  if ("message" in scale) return { code: "unknown-unit", ...scale };
  const base = value * scale.factor + scale.offset;
  if (!Number.isFinite(base)) return { code: "not-a-number", message: `${field.key} is not a finite number.`, remedy: "Write a number between −1.7e308 and 1.7e308, or leave the value out." };
  if (isBelow && !mayLieBelow(field)) return { code: "no-limit", message: `${field.key} cannot be given as lying below a limit.`, remedy: "Give the number itself." };
  return { base, value, unit, as, isBelow, isDryFraction: scale.isDryFraction, fraction };
}

/** Text of any value, short enough for a message. */
export function shorten(value: unknown): string {
  const text = typeof value === "string" ? value : jsonOf(value);
  return text.length > 80 ? `${text.slice(0, 77)}…` : text;
}

function jsonOf(value: unknown): string {
  try {
    return JSON.stringify(value) ?? String(value);
  } catch {
    // Nested deeper than the stack reaches.
    return Array.isArray(value) ? "[…]" : "{…}";
  }
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
