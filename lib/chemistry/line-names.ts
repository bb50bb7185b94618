/** Words of the trade at the start of a statement, and the fields of a row that they mean. */
import { ANALYTES } from "@/lib/chemistry/data";
import type { Analyte } from "@/lib/chemistry/data/types";
import { type Field, ROW_FIELDS } from "@/lib/chemistry/fields";

/** Names of what is no analyte. */
const CONDITION_NAMES: Record<string, string> = {
  ph: "pH", t: "temperature", temp: "temperature", temperature: "temperature", pco2: "pCO2", co2: "pCO2", altitude: "altitude", elevation: "altitude",
  pressure: "pressure", conductivity: "conductivity", ec: "conductivity", cond: "conductivity",
};

export interface Name {
  field: Field;
  /** Formula that the name itself counts a mass in: N for "NO3-N", SiO2 for "silica". */
  basis: string | null;
  /** Unit of a bare number, where it is not the field's own. */
  unit: string | null;
}

/** Every name that may begin a statement, for suggestions; the keys come first. */
export const NAMES: readonly string[] = [
  ...ANALYTES.map((each) => each.key), "pH", "temperature", "pCO2", "altitude", "pressure", "conductivity", ...ANALYTES.flatMap((each) => each.synonyms),
];

const findAnalyte = (lower: string): Analyte | undefined => ANALYTES.find((each) => each.key.toLowerCase() === lower || each.synonyms.includes(lower));

/** "Ca^2+", "Ca²⁺" and "SO₄²⁻" as "ca2+" and "so42-". */
const fold = (text: string): string => text.normalize("NFKC").replaceAll("−", "-").replaceAll("^", "").toLowerCase();

/** The field that a name means, or null. */
export function findName(text: string): Name | null {
  const lower = fold(text);
  const condition = Object.hasOwn(CONDITION_NAMES, lower) ? ROW_FIELDS.get(CONDITION_NAMES[lower]) : undefined;
  if (condition) return { field: condition, basis: null, unit: null };
  const own = findAnalyte(lower);
  const dashed = own ? null : /^(.+?)-(n|p|s|si|c)$/.exec(lower);
  const analyte = own ?? (dashed ? findAnalyte(dashed[1]) : undefined);
  if (!analyte) return null;
  const field = ROW_FIELDS.get(analyte.key)!;
  if (dashed) return { field, basis: dashed[2].charAt(0).toUpperCase() + dashed[2].slice(1), unit: null };
  const basis = analyte.namedBasis?.[lower] ?? null;
  return { field, basis, unit: basis ? "mg/L" : null };
}
