import { AppError, type Issue } from "@/lib/errors";
import { type CellColumn } from "@/lib/results/cells";
import type { PlannedChunk } from "@/lib/results/chunk-plan";
import { parseQuery, type ParsedQuery, type ResultColumn } from "@/lib/results/query";
import type { ResultPage } from "@/lib/schemas/api";
import { readCells, readStoredChunks } from "./block-store";
import { readOrder } from "./build-order";
import { findOrder, touchOrder } from "./find-order";
import { cursorPrint, decodeResultCursor, encodeResultCursor, type ResultCursor } from "./result-cursor";
import type { JobRow, PageQuery } from "./types";

export const DEFAULT_LIMIT = 100;
export const MAX_LIMIT = 1000;

/** Rows of a page and where they stand. */
interface PageRows { rows: Uint32Array; first: number; total: number; next: ResultCursor | null }

/**
 * One page of a job's rows as objects keyed by column name, of the rows stored so far.
 *
 * Without `where` and `sort` rows come in the job's own order, up to the first chunk still to come; as long as the job
 * goes on, `nextCursor` is given even when no row is left, and asking again later continues without gap or double.
 * With either, the rows stored at the first page are sorted once, and cursors stay in that order.
 * Throws AppError "bad-request" with every fault of the query, "conflict" for a cursor whose order was dropped.
 */
export async function readResultPage(row: JobRow, words: PageQuery): Promise<ResultPage> {
  const limit = readNumber(words.limit, DEFAULT_LIMIT, 1, MAX_LIMIT, "limit");
  const offset = words.offset === null || words.offset === undefined ? null : readNumber(words.offset, 0, 0, 2 ** 31 - 1, "offset");
  const query = parseQuery(row.columns ?? [], row.columns ? words : {});
  const print = cursorPrint(row.id, row.columns ? query.orderKey : "");
  const cursor = words.cursor ? decodeResultCursor(words.cursor, print) : null;
  const page = query.orderKey === ""
    ? await naturalRows(row, cursor, offset, limit, print)
    : await orderedRows(row, words, query, cursor, offset, limit, print);
  const cells = page.rows.length > 0 ? await readCells(row, page.rows, query.select) : [];
  return {
    job: { id: row.id, status: row.status, specHash: row.specHash, engineVersion: row.engineVersion, constantsVersion: row.constantsVersion },
    columns: query.select.map((column) => column.descriptor),
    rowCount: page.total, firstRow: page.first, rows: rowObjects(query.select, cells, page.rows.length), rowIndices: Array.from(page.rows),
    nextCursor: page.next ? encodeResultCursor(page.next) : null,
  };
}

function readNumber(value: number | null | undefined, otherwise: number, least: number, most: number, name: string): number {
  if (value === null || value === undefined) return otherwise;
  if (Number.isInteger(value) && value >= least && value <= most) return value;
  const message = `${name} is ${value}; it must be a whole number from ${least} to ${most}`;
  const issue: Issue = { pointer: `/${name}`, code: "out-of-range", message, value: String(value) };
  throw new AppError("bad-request", message, { errors: [issue] });
}

async function naturalRows(row: JobRow, cursor: ResultCursor | null, offset: number | null, limit: number, print: string): Promise<PageRows> {
  const { settled } = row.columns ? await readStoredChunks(row) : { settled: [] as PlannedChunk[] };
  const total = settled.reduce((sum, chunk) => sum + chunk.rowCount, 0);
  const wanted = cursor && "row" in cursor ? cursor.row : 0;
  const first = offset ?? rowsBefore(settled, wanted);
  const rows: number[] = [];
  let position = 0;
  for (const { firstRow, rowCount } of settled) {
    for (let local = Math.max(0, first - position); local < rowCount && rows.length < limit; local++) rows.push(firstRow + local);
    position += rowCount;
    if (rows.length >= limit) break;
  }
  const nextRow = rows.length > 0 ? rows[rows.length - 1] + 1 : Math.max(wanted, lastRow(settled) + 1);
  const isOpen = row.status === "queued" || row.status === "running";
  const hasMore = first + rows.length < total || isOpen;
  return { rows: Uint32Array.from(rows), first, total, next: hasMore ? { row: nextRow, print } : null };
}

const lastRow = (chunks: readonly PlannedChunk[]): number => {
  const last = chunks.at(-1);
  return last ? last.firstRow + last.rowCount - 1 : -1;
};

/** Number of stored rows with an index below `row`. */
const rowsBefore = (chunks: readonly PlannedChunk[], row: number): number =>
  chunks.reduce((sum, chunk) => sum + Math.min(chunk.rowCount, Math.max(0, row - chunk.firstRow)), 0);

async function orderedRows(
  row: JobRow, words: PageQuery, query: ParsedQuery, cursor: ResultCursor | null, offset: number | null, limit: number, print: string,
): Promise<PageRows> {
  const named = cursor && "order" in cursor ? cursor : null;
  const order = named ? await keptOrder(named.order) : await findOrder(row, words, query);
  const first = offset ?? named?.position ?? 0;
  const rows = await readOrder(order.id, first, Math.min(limit, Math.max(0, order.rowCount - first)));
  if (!rows) throw orderGone();
  const hasMore = first + rows.length < order.rowCount;
  return { rows, first, total: order.rowCount, next: hasMore ? { order: order.id, position: first + rows.length, print } : null };
}

const orderGone = (): AppError =>
  new AppError("conflict", "The order this cursor belongs to was dropped after others took its place; start again without a cursor.");

async function keptOrder(id: string) {
  const rowCount = await touchOrder(id);
  if (rowCount === null) throw orderGone();
  return { id, rowCount };
}

function rowObjects(columns: readonly ResultColumn[], cells: readonly CellColumn[], count: number): ResultPage["rows"] {
  return Array.from({ length: count }, (_, position) => Object.fromEntries(columns.map(({ descriptor }, column) => {
    const { kind, data } = cells[column];
    if (kind === "text") return [descriptor.name, data[position]];
    return [descriptor.name, Number.isFinite(data[position]) ? data[position] : null];
  })));
}
