import { numberText } from "../cells";
import { type MakeFormat, utf8 } from "./format";

/** What makes a spreadsheet take a text for a formula (OWASP ASVS 5.0, 1.2.10). */
const FORMULA_START = /^[=+\-@\t\0]/;
const NEEDS_QUOTES = /[",\r\n]/;

/**
 * A text cell: one that a spreadsheet would run as a formula gets an apostrophe in front, then quotes as RFC 4180 asks.
 * Numbers never come here: an apostrophe before a minus would corrupt them.
 */
export function csvText(text: string): string {
  const safe = FORMULA_START.test(text) ? `'${text}` : text;
  return NEEDS_QUOTES.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** Plain RFC 4180: one header row of column names, CRLF, empty for missing. A `from` above 0 continues without the header. */
export const csvFormat: MakeFormat = (columns, { firstRow }) => ({
  start: () => utf8(firstRow > 0 ? "" : `${columns.map((column) => csvText(column.name)).join(",")}\r\n`),
  rows(cells, count) {
    let text = "";
    for (let row = 0; row < count; row++) {
      for (let column = 0; column < cells.length; column++) {
        if (column > 0) text += ",";
        const { kind, data } = cells[column];
        if (kind === "text") text += csvText(data[row]);
        else if (Number.isFinite(data[row])) text += numberText(data[row]);
      }
      text += "\r\n";
    }
    return utf8(text);
  },
  end: () => utf8(""),
});
