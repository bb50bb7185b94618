/** Reading `select`, `where` and `sort` against a job's columns. Every fault is reported, each with what to write. */
import { AppError, type Issue } from "@/lib/errors";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { FIXED_COLUMNS, type StoredColumn } from "./block";
import { nearestName } from "@/lib/schemas/nearest-name";

/** Where a column's cells come from: computed from the row index, or stored in the blocks. */
export type ColumnPlace =
  | { kind: "water" } | { kind: "case" } | { kind: "axis"; axis: number } | { kind: "stored"; column: StoredColumn };
export interface ResultColumn { descriptor: ColumnDescriptor; place: ColumnPlace }

export type Operator = "=" | "!=" | "<" | "<=" | ">" | ">=" | "null" | "not-null";
export interface Condition { column: ResultColumn; operator: Operator; value: number | string | null }
export interface SortKey { column: ResultColumn; descending: boolean }

export interface ParsedQuery {
  select: ResultColumn[];
  where: Condition[];
  sort: SortKey[];
  /** Same text for the same order of rows: names an order, binds a cursor. Empty for the job's own order. */
  orderKey: string;
}

export interface QueryWords { select?: readonly string[]; where?: readonly string[]; sort?: string | null }

/** Places of all columns of a job, in the order in which they are shown. */
export function placeColumns(columns: readonly ColumnDescriptor[]): ResultColumn[] {
  let axis = 0;
  let value = 0;
  return columns.map((descriptor): ResultColumn => {
    if (descriptor.group === "axis") return { descriptor, place: { kind: "axis", axis: axis++ } };
    if (descriptor.group !== "row") return { descriptor, place: { kind: "stored", column: value++ } };
    if (descriptor.name === "water" || descriptor.name === "case") return { descriptor, place: { kind: descriptor.name } };
    const fixed = FIXED_COLUMNS.find((name) => name === descriptor.name);
    if (!fixed) throw new Error(`Column ${descriptor.name} of group row is not one of ${FIXED_COLUMNS.join(", ")}`);
    return { descriptor, place: { kind: "stored", column: fixed } };
  });
}

export const isText = (column: ResultColumn): boolean => column.descriptor.type === "text";

/** In a query string an unescaped `+` arrives as a space: `conc:Ca^2+` and `conc:Ca^2 ` must meet. */
const withoutPlus = (name: string): string => name.replaceAll("+", " ").trim();

class ColumnBook {
  private readonly byName: Map<string, ResultColumn>;
  private readonly bySpaced = new Map<string, ResultColumn | null>();

  constructor(readonly columns: ResultColumn[]) {
    this.byName = new Map(columns.map((column) => [column.descriptor.name, column]));
    for (const column of columns) {
      const spaced = withoutPlus(column.descriptor.name);
      this.bySpaced.set(spaced, this.bySpaced.has(spaced) ? null : column);
    }
  }

  find(written: string): ResultColumn | null {
    return this.byName.get(written) ?? this.byName.get(written.trim()) ?? this.bySpaced.get(withoutPlus(written)) ?? null;
  }

  names(): string[] {
    return this.columns.map((column) => column.descriptor.name);
  }
}

const shorten = (text: string): string => (text.length > 80 ? `${text.slice(0, 79)}…` : text);

function unknownColumn(pointer: string, written: string, names: readonly string[]): Issue {
  const near = nearestName(written.trim(), names);
  return {
    pointer, code: "unknown-column", value: shorten(written), message: `There is no column "${shorten(written.trim())}" in this job`,
    remedy: near ? `Did you mean "${near}"?` : "The job's `columns` lists every name",
  };
}

const CONDITION = /^(.+?)\s*(!=|<=|>=|=|<|>)\s*(.*)$/s;
const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

function parseCondition(text: string, pointer: string, book: ColumnBook, issues: Issue[]): Condition | null {
  const bareNull = /^(.+?)\s+null\s*$/is.exec(text);
  const parts = CONDITION.exec(text.trim()) ?? (bareNull ? [text, bareNull[1], "=", "null"] : null);
  if (!parts) {
    issues.push({ pointer, code: "unreadable-condition", value: shorten(text), message: "This is not a condition", remedy: "Write `<column> <op> <value>` with = != < <= > >=, or `<column> null`" });
    return null;
  }
  const [, name, operator, written] = parts;
  const column = book.find(name);
  if (!column) {
    issues.push(unknownColumn(pointer, name, book.names()));
    return null;
  }
  const value = written.trim();
  if (/^null$/i.test(value)) return nullCondition(column, operator, pointer, issues);
  if (isText(column)) return { column, operator: operator as Operator, value: value.replace(/^"(.*)"$/s, "$1") };
  if (!NUMBER.test(value) || !Number.isFinite(Number(value))) {
    issues.push({ pointer, code: "not-a-number", value: shorten(value), message: `"${column.descriptor.name}" holds numbers; "${shorten(value)}" is not one`, remedy: `Write a number${column.descriptor.unit ? ` in ${column.descriptor.unit}` : ""} such as 7.5 or 1e-4, or null` });
    return null;
  }
  return { column, operator: operator as Operator, value: Number(value) };
}

function nullCondition(column: ResultColumn, operator: string, pointer: string, issues: Issue[]): Condition | null {
  if (operator === "=" || operator === "!=") return { column, operator: operator === "=" ? "null" : "not-null", value: null };
  issues.push({ pointer, code: "unreadable-condition", value: operator, message: `null cannot be compared with ${operator}`, remedy: "Write `= null` or `!= null`" });
  return null;
}

function parseSort(text: string, book: ColumnBook, issues: Issue[]): SortKey[] {
  const keys: SortKey[] = [];
  for (const part of text.split(",").filter((word) => word.trim() !== "")) {
    // A column's own name wins over the sign: no column starts with "-", but a later one might.
    const whole = book.find(part);
    const descending = !whole && part.trim().startsWith("-");
    const column = whole ?? book.find(part.trim().replace(/^-/, ""));
    if (column) keys.push({ column, descending });
    else issues.push(unknownColumn("/sort", part.trim().replace(/^-/, ""), book.names()));
  }
  return keys;
}

function parseSelect(words: readonly string[], book: ColumnBook, issues: Issue[]): ResultColumn[] {
  const groups = new Set(book.columns.map((column) => column.descriptor.group as string));
  const chosen = new Set<ResultColumn>();
  words.flatMap((word) => (book.find(word) ? [word] : word.split(","))).filter((word) => word.trim() !== "").forEach((word) => {
    const column = book.find(word);
    if (column) chosen.add(column);
    else if (groups.has(word.trim())) book.columns.filter((c) => c.descriptor.group === word.trim()).forEach((c) => chosen.add(c));
    else issues.push(unknownColumn("/select", word, [...book.names(), ...groups]));
  });
  return chosen.size > 0 ? [...chosen] : book.columns;
}

/** Throws AppError("bad-request") with every fault of the three parameters. */
export function parseQuery(columns: readonly ColumnDescriptor[], words: QueryWords): ParsedQuery {
  const book = new ColumnBook(placeColumns(columns));
  const issues: Issue[] = [];
  const select = parseSelect(words.select ?? [], book, issues);
  const where = (words.where ?? []).map((text, index) => parseCondition(text, `/where/${index}`, book, issues));
  const sort = parseSort(words.sort ?? "", book, issues);
  if (issues.length > 0) {
    throw new AppError("bad-request", issues.length === 1 ? issues[0].message : `The query has ${issues.length} faults`, { errors: issues });
  }
  const conditions = where.filter((condition) => condition !== null);
  return { select, where: conditions, sort, orderKey: keyOf(conditions, sort) };
}

/** Conditions are ANDed, so their order does not matter. */
function keyOf(where: readonly Condition[], sort: readonly SortKey[]): string {
  if (where.length === 0 && sort.length === 0) return "";
  const conditions = where.map(({ column, operator, value }) => JSON.stringify([column.descriptor.name, operator, value])).sort();
  return JSON.stringify([conditions, sort.map(({ column, descending }) => [column.descriptor.name, descending])]);
}
