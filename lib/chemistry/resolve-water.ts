/** A row from words and units to numbers in base units, with the faults of its values. */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { type Field, rowFields } from "@/lib/chemistry/fields";
import { isProblem, type Quantity, readQuantity, shorten } from "@/lib/chemistry/quantity";
import type { ResolvedWater, RowFault } from "@/lib/chemistry/types";

export type BelowLimit = "half" | "zero" | "limit";
const COUNTED: Record<BelowLimit, number> = { half: 0.5, zero: 0, limit: 1 };

/** What a quantity counts as, in base units: a value below its limit as the spec says. */
export const countedBase = ({ base, isBelow }: Quantity, belowLimit: BelowLimit): number => (isBelow ? base * COUNTED[belowLimit] : base);

const PLAIN = new Set(["temperature", "pH", "pHTemperature", "altitude", "conductivity", "alkalinity", "ANC", "DIC", "DOC"]);
/** Looked at once the row is solved: a case or an axis may give another. */
const CHECKED_LATER = new Set(["temperature", "pH", "pHTemperature"]);

const textOf = (value: unknown): string | null => (typeof value === "string" ? value : null);

/** @param index place of the row, which names a water without an id. */
export function resolveWater(row: Readonly<Record<string, unknown>>, index: number, units: Readonly<Record<string, string>>, belowLimit: BelowLimit, set: ConstantsSet = BUILT_IN): ResolvedWater {
  const fields = rowFields(set);
  const water: ResolvedWater = {
    id: row.id === undefined || row.id === null || row.id === "" ? `W${index + 1}` : String(row.id), site: textOf(row.site), date: textOf(row.date),
    temperature: null, pH: null, pHTemperature: null, altitude: null, pressureAtm: null, conductivity: null,
    totals: {}, alkalinity: null, ANC: null, DIC: null, DOC: null, pCO2: null, aluminiumFractionGiven: false, faults: [], warnings: [],
  };
  for (const key of Object.keys(row)) {
    const field = fields.get(key);
    const raw = row[key];
    if (!field || raw === null || raw === undefined) continue;
    const read = readQuantity(raw, field, Object.hasOwn(units, key) ? units[key] : null);
    if (isProblem(read)) { water.faults.push({ code: read.code, column: key, message: `${read.message} ${read.remedy}` }); continue; }
    const base = countedBase(read, belowLimit);
    const fault = CHECKED_LATER.has(key) ? null : amountFault(base, field, raw);
    if (fault) water.faults.push(fault);
    else put(water, field, base, read);
  }
  return water;
}

function amountFault(base: number, field: Field, raw: unknown): RowFault | null {
  const { key, range } = field;
  if (!range || base >= range.from && base <= range.to && !(range.isOpen && base === range.from)) return null;
  if (key === "pCO2" && base <= 0) return { code: "out-of-range", column: key, message: `pCO2 is not above 0 (${shorten(raw)})` };
  if (base < 0 && range.from === 0) return { code: "negative-amount", column: key, message: `${key} is negative (${shorten(raw)}); amounts are 0 or more` };
  return { code: "out-of-range", column: key, message: `${key} is out of range (${shorten(raw)}); it must be ${range.from} to ${range.to} ${range.unit}` };
}

function put(water: ResolvedWater, { key, analyte }: Field, base: number, read: Quantity): void {
  if (analyte?.kind === "total") water.totals[key] = base;
  else if (PLAIN.has(key)) water[key as "pH"] = base;
  else if (key === "pressure") water.pressureAtm = base;
  else if (key === "pCO2") water.pCO2 = read.isDryFraction ? { dryFraction: base } : { atm: base };
  if (key === "Al" && read.fraction !== null) water.aluminiumFractionGiven = true;
}
