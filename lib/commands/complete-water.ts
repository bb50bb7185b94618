import { ANALYTES } from "./named-constants";
import type { Completion } from "./command";
import type { Word } from "./words";

const NUMBER = /^<?[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const CONDITIONS: readonly Completion[] = [
  { insert: "pH", detail: "measured" },
  { insert: "pCO2", detail: "CO2 pressure" },
  { insert: "altitude", detail: "m" },
  { insert: "conductivity", detail: "µS/cm at 25 °C" },
];
const UNITS: Record<string, readonly string[]> = {
  total: ["mg/L", "mmol/L", "µmol/L", "meq/L", "µeq/L"],
  equivalents: ["meq/L", "µeq/L", "mg/L as CaCO3"],
  carbon: ["mmol/L", "mg/L"],
  organic: ["mg/L"],
};

const analyteOf = (text: string) => {
  const lower = text.toLowerCase();
  return ANALYTES.find((each) => each.key.toLowerCase() === lower || each.synonyms.includes(lower));
};

/** What may stand at the caret of a typed water: analytes at the start of a part, units behind its number. */
export function completeWater(before: readonly Word[], partial: string): Completion[] {
  const comma = before.findLastIndex((word) => word.text === ",");
  const part = before.slice(comma + 1);
  const starting = (all: readonly Completion[]): Completion[] => all.filter((each) => each.insert.toLowerCase().startsWith(partial.toLowerCase()));
  if (part.length === 0) {
    if (NUMBER.test(partial)) return [];
    const analytes = ANALYTES.map((each) => ({ insert: each.key, detail: `${each.description}, ${each.defaultUnit}` }));
    const words = partial.length > 1 ? ANALYTES.flatMap((each) => each.synonyms.filter((word) => word.length > 3).map((insert) => ({ insert, detail: each.key }))) : [];
    return starting([...analytes, ...CONDITIONS, ...words]).filter((each) => each.insert !== partial);
  }
  const last = part[part.length - 1].text;
  if (!NUMBER.test(last)) return [];
  if (part.length === 1) return starting([{ insert: "°C", detail: "temperature" }]);
  const name = part.slice(0, -1).map((word) => word.text).join(" ");
  if (/^p?co2$/i.test(name)) return starting(["ppm", "uatm", "atm", "kPa"].map((insert) => ({ insert, detail: "pressure" })));
  if (/^ph$/i.test(name)) return [];
  const analyte = analyteOf(name);
  const units = analyte ? UNITS[analyte.kind] : [];
  return starting(units.map((insert) => ({ insert, detail: insert === analyte?.defaultUnit ? "usual" : "unit" })));
}
