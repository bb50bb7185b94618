/** Cells of laboratory tables. */
const MISSING = /^(?:|-+|–|—|\.|n\/?a|nan|null|none|nd|n\.d\.?|nm|n\.m\.?|not (?:measured|determined|analysed|analyzed))$/i;
const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;

export type NumberStyle = "point" | "comma";

export type CsvCell = { kind: "missing" } | { kind: "number"; value: number; isBelow: boolean } | { kind: "text"; text: string };

/** A number written with the file's decimal sign; thousands may be set apart with the other sign or a space. */
function readNumber(text: string, style: NumberStyle): number | null {
  const spaced = text.replaceAll(/(\d)[\u00a0\u202f ](?=\d{3}(?:\D|$))/g, "$1");
  const plain = style === "comma"
    ? spaced.replaceAll(/\.(?=\d{3}(?:[.,]|$))/g, (dot, at: number) => (spaced.includes(",") && at < spaced.indexOf(",") ? "" : dot)).replace(",", ".")
    : spaced.replaceAll(/,(?=\d{3}(?:[.,eE]|$))/g, "");
  return NUMBER.test(plain) ? Number(plain) : null;
}

/** What a cell says: nothing, a number, a number below its reporting limit (`<0.05`), or text to be read elsewhere. */
export function readCell(raw: string, style: NumberStyle): CsvCell {
  const text = raw.trim();
  if (MISSING.test(text)) return { kind: "missing" };
  const isBelow = /^[<≤]/.test(text);
  const value = readNumber(isBelow ? text.slice(1).trim() : text, style);
  return value === null ? { kind: "text", text } : { kind: "number", value, isBelow };
}

/**
 * Decimal sign of a file: a comma where a semicolon or tab separates the columns and some cell has one in a place that
 * no thousands sign can have, or where cells have commas but none has a point.
 */
export function numberStyle(cells: Iterable<string>, delimiter: string): NumberStyle {
  let commas = 0;
  let points = 0;
  for (const cell of cells) {
    const text = cell.trim().replace(/^[<≤]\s*/, "");
    if (/^[+-]?\d+,(?:\d{1,2}|\d{4,})(?:[eE][+-]?\d+)?$/.test(text) || /^[+-]?0,\d+$/.test(text)) return "comma";
    if (/^[+-]?\d{1,3},\d{3}$/.test(text)) commas++;
    if (/^[+-]?\d*\.\d+$/.test(text)) points++;
  }
  return delimiter !== "," && commas > 0 && points === 0 ? "comma" : "point";
}

/** A date as ISO 8601: taken as it is, or turned round from day.month.year or day/month/year; null where it is neither. */
export function readDate(raw: string): string | null {
  const text = raw.trim();
  if (/^\d{4}-\d{2}-\d{2}(?:[T ]\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?(?:Z|[+-]\d{2}:?\d{2})?)?$/.test(text)) return text.replace(" ", "T");
  const match = /^(\d{1,2})([./])(\d{1,2})\2(\d{4})$/.exec(text);
  if (!match) return null;
  const [, day, , month, year] = match;
  if (Number(day) > 31 || Number(month) > 12 || Number(day) < 1 || Number(month) < 1) return null;
  return `${year}-${month.padStart(2, "0")}-${day.padStart(2, "0")}`;
}
