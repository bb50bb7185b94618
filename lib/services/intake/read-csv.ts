/** A laboratory's CSV as the waters of a sample set. */
import { parse } from "csv-parse/sync";
import { AppError, type Issue } from "@/lib/errors";
import { type CsvCell, type NumberStyle, numberStyle, readCell, readDate } from "./csv-cell";
import { type CsvColumn, readHeading } from "./csv-header";

export interface SampleFlag { water: string; code: string; column: string | null; message: string }

export interface ReadCsv {
  rows: Record<string, unknown>[];
  /** Line of the file on which each row stands. */
  lines: number[];
  units: Record<string, string>;
  flags: SampleFlag[];
  issues: Issue[];
}

const DELIMITERS = [",", ";", "\t", "|"];
const MAX_COLUMNS = 500;

/** UTF-8, else Windows-1252, which spreadsheets still write and in which every byte means something. */
function decode(bytes: Uint8Array): { text: string; isLatin: boolean } {
  try {
    return { text: new TextDecoder("utf-8", { fatal: true }).decode(bytes), isLatin: false };
  } catch {
    return { text: new TextDecoder("windows-1252").decode(bytes), isLatin: true };
  }
}

/** The sign that occurs most often in the heading line, outside quotes. */
function delimiterOf(text: string): string {
  const line = (text.split(/\r?\n/).find((each) => each.trim() !== "") ?? "").replaceAll(/"[^"]*"/g, "");
  const counts = DELIMITERS.map((sign) => line.split(sign).length);
  return DELIMITERS[counts.indexOf(Math.max(...counts))];
}

interface Line { record: string[]; line: number }

function readLines(text: string, delimiter: string): Line[] {
  try {
    const found = parse(text, { bom: true, delimiter, relax_column_count: true, skip_empty_lines: true, trim: true, info: true, max_record_size: 1_000_000 }) as unknown as { record: string[]; info: { lines: number } }[];
    return found.map(({ record, info }) => ({ record, line: info.lines })).filter(({ record }) => record.some((cell) => cell !== ""));
  } catch (error) {
    const message = error instanceof Error ? error.message : String(error);
    throw new AppError("invalid-samples", `The CSV cannot be read: ${message}`, {
      errors: [{ pointer: "", code: "csv-syntax", message, remedy: "RFC 4180: quotes are doubled inside quoted cells, and every quote is closed." }],
    });
  }
}

interface HeadedColumn { column: CsvColumn; at: number; heading: string }

function readHeadings(record: string[], flags: SampleFlag[], issues: Issue[]): HeadedColumn[] {
  const columns: HeadedColumn[] = [];
  record.slice(0, MAX_COLUMNS).forEach((heading, at) => {
    if (heading === "") return;
    const column = readHeading(heading);
    if (!column) {
      flags.push({ water: "", code: "unknown-column", column: heading.slice(0, 80), message: `The column “${heading.slice(0, 80)}” names nothing Tufa knows; it is kept in the uploaded file only.` });
      return;
    }
    const twin = columns.find((each) => each.column.key === column.key);
    if (twin) {
      issues.push({ pointer: `/units/${column.key}`, code: "two-columns", message: `The columns “${twin.heading}” and “${heading}” both give ${column.key}.`, remedy: "Keep one of them." });
      return;
    }
    columns.push({ column, at, heading });
  });
  return columns;
}

/** Reads one cell into the row. A text in a number's place becomes an issue; nothing is dropped silently. */
function placeCell(row: Record<string, unknown>, { column, heading }: HeadedColumn, raw: string, style: NumberStyle, fault: (code: string, message: string, remedy: string) => void): void {
  if (column.kind === "text") {
    if (raw !== "") row[column.key] = raw;
    return;
  }
  const cell: CsvCell = readCell(raw, style);
  if (cell.kind === "missing") return;
  if (column.kind === "date") {
    const date = readDate(raw);
    if (date) row[column.key] = date;
    else fault("unreadable-date", `“${raw.slice(0, 40)}” under “${heading}” is no date.`, "Write 2026-10-14.");
  } else if (cell.kind === "text") {
    // "1.2 mg/L" and the like: the job spec's own quantities.
    if (column.kind === "quantity" && /^[<≤]?\s*[\d.,]/.test(cell.text)) row[column.key] = style === "comma" ? cell.text.replace(",", ".") : cell.text;
    else fault("unreadable-value", `“${raw.slice(0, 40)}” under “${heading}” is no number.`, "Write a number, a number with its unit, or leave the cell empty.");
  } else if (cell.isBelow) {
    if (column.kind !== "quantity") fault("unreadable-value", `“${raw.slice(0, 40)}” under “${heading}”: only amounts can be below a limit.`, "Write the measured number, or leave the cell empty.");
    else row[column.key] = { value: cell.value, below: true, ...(column.unit ? unitParts(column.unit) : {}) };
  } else {
    row[column.key] = cell.value;
  }
}

/** "mg/L as N" as the members of a quantity object. */
function unitParts(unit: string): { unit: string; as?: string } {
  const [plain, basis] = unit.split(" as ");
  return basis ? { unit: plain, as: basis } : { unit: plain };
}

/** Reads a CSV upload. Faults of cells and headings are issues; columns not known are flags. */
export function readCsv(bytes: Uint8Array): ReadCsv {
  const { text, isLatin } = decode(bytes);
  const flags: SampleFlag[] = [];
  const issues: Issue[] = [];
  if (isLatin) flags.push({ water: "", code: "not-utf-8", column: null, message: "The file is not UTF-8; it was read as Windows-1252." });
  const delimiter = delimiterOf(text);
  const [headings, ...body] = readLines(text, delimiter);
  if (!headings || body.length === 0) {
    issues.push({ pointer: "", code: "empty", message: "The file has no row below its headings.", remedy: "One line of headings, then one line per water." });
    return { rows: [], lines: [], units: {}, flags, issues };
  }
  const columns = readHeadings(headings.record, flags, issues);
  const numbers = columns.filter((each) => each.column.kind === "number" || each.column.kind === "quantity");
  if (numbers.length === 0) {
    issues.push({ pointer: "", code: "no-known-column", message: "None of the headings names an analyte or a measurement.", value: headings.record.join(delimiter).slice(0, 80), remedy: "Headings such as: id, temperature, pH, Ca (mg/L), Alkalinity (meq/L)." });
  }
  const style = numberStyle(function* () { for (const { record } of body) for (const { at } of numbers) yield record[at] ?? ""; }(), delimiter);
  const rows = body.map(({ record, line }, index) => {
    const row: Record<string, unknown> = {};
    for (const headed of columns) {
      placeCell(row, headed, record[headed.at] ?? "", style, (code, message, remedy) =>
        issues.push({ pointer: `/rows/${index}/${headed.column.key}`, code, message: `Line ${line}: ${message}`, value: (record[headed.at] ?? "").slice(0, 80), remedy }));
    }
    return row;
  });
  const units = Object.fromEntries(columns.flatMap(({ column }) => (column.unit ? [[column.key, column.unit]] : [])));
  return { rows, lines: body.map(({ line }) => line), units, flags, issues };
}
