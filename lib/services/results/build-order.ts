/** Orders of a job's rows under a `where` and a `sort`: loading whole columns, sorting, storing the permutation. */
import { pool } from "@/db/client";
import { readBytes } from "@/db/read-bytes";
import { STATUS_NAMES } from "@/lib/chemistry/types";
import { columnSlice, decodeCells, type StoredColumn } from "@/lib/results/block";
import type { PlannedChunk } from "@/lib/results/chunk-plan";
import { applyCondition, type LoadedColumn, sortPositions } from "@/lib/results/order-rows";
import type { ParsedQuery, ResultColumn } from "@/lib/results/query";
import { axisIndexOf, caseOf, pointsOf, waterOf } from "@/lib/results/row-index";
import { newId } from "@/lib/ids";
import { readTextTables, shapeOf } from "./block-store";
import type { JobRow } from "./types";
import { readWaterIds, WATERS_PER_ROW } from "./water-ids";

/** Orders kept for a job; the least recently used go first. */
const ORDERS_PER_JOB = 8;
/** Blocks per query: at most 4 MB of one column. */
const BLOCKS_PER_QUERY = 64;

export interface StoredOrder { id: string; rowCount: number }

/**
 * Sorts and filters the rows of `chunks` and stores the row indices in that order. Takes about 0.3 s for 10⁶ rows and
 * one sort column, all of it off any event loop that serves requests: callers run it in a thread.
 */
export async function buildOrder(row: JobRow, query: ParsedQuery, chunks: readonly PlannedChunk[], key: string): Promise<StoredOrder> {
  const rows = rowsOf(chunks);
  const loaded = new Map<string, LoadedColumn>();
  const load = async (column: ResultColumn): Promise<LoadedColumn> => {
    const known = loaded.get(column.descriptor.name) ?? await loadColumn(row, column, chunks, rows);
    loaded.set(column.descriptor.name, known);
    return known;
  };
  const kept = new Uint8Array(rows.length).fill(1);
  for (const condition of query.where) applyCondition(condition, await load(condition.column), kept);
  const keys = [];
  for (const { column, descending } of query.sort) keys.push({ column: await load(column), descending });
  const positions = sortPositions(kept, keys);
  for (let i = 0; i < positions.length; i++) positions[i] = rows[positions[i]];
  return storeOrder(row.id, key, positions);
}

function rowsOf(chunks: readonly PlannedChunk[]): Uint32Array {
  const rows = new Uint32Array(chunks.reduce((sum, chunk) => sum + chunk.rowCount, 0));
  let next = 0;
  for (const { firstRow, rowCount } of chunks) for (let row = firstRow; row < firstRow + rowCount; row++) rows[next++] = row;
  return rows;
}

async function loadColumn(row: JobRow, { place }: ResultColumn, chunks: readonly PlannedChunk[], rows: Uint32Array): Promise<LoadedColumn> {
  const shape = shapeOf(row);
  const points = pointsOf(shape);
  switch (place.kind) {
    case "axis": {
      const shown = row.axes?.[place.axis].shown ?? [];
      return { kind: "number", data: Float64Array.from(rows, (r) => shown[axisIndexOf(r, shape, place.axis)]) };
    }
    case "case": return { kind: "text", texts: row.caseNames ?? [], codes: rows.map((r) => caseOf(r, shape, points)) };
    case "water": {
      const count = Math.ceil(row.rowCount / (points * shape.caseCount));
      const texts: string[] = [];
      for (let first = 0; first < count; first += WATERS_PER_ROW) {
        texts.push(...await readWaterIds(row.id, Array.from({ length: Math.min(WATERS_PER_ROW, count - first) }, (_, i) => first + i)));
      }
      return { kind: "text", texts, codes: rows.map((r) => waterOf(r, shape, points)) };
    }
    case "stored": return loadStored(row, place.column, chunks, rows.length);
  }
}

async function loadStored(row: JobRow, column: StoredColumn, chunks: readonly PlannedChunk[], count: number): Promise<LoadedColumn> {
  const hasTexts = column === "message" || column === "warnings";
  const codes = hasTexts || column === "status" ? new Uint32Array(count) : null;
  const data = codes ? null : new Float64Array(count);
  const texts: string[] = column === "status" ? [...STATUS_NAMES] : [];
  const codeOf = new Map<string, number>();
  let next = 0;
  for (let from = 0; from < chunks.length; from += BLOCKS_PER_QUERY) {
    const batch = chunks.slice(from, from + BLOCKS_PER_QUERY);
    const slices = batch.map((chunk) => columnSlice(chunk.rowCount, column));
    const found = await readBytes(
      `select substring(b.bytes from p.start + 1 for p.length) from unnest($2::int[], $3::int[], $4::int[]) as p(index, start, length)
       left join result_block b on b.job_id = $1 and b.index = p.index order by p.index`,
      [row.id, batch.map((chunk) => chunk.index), slices.map((s) => s.offset), slices.map((s) => s.length)]);
    const tables = hasTexts ? await readTextTables(row, batch) : null;
    found.forEach((bytes, position) => {
      if (!bytes) throw new Error(`Block ${batch[position].index} of ${row.id} is missing though its chunk is done`);
      const cells = decodeCells(column, bytes);
      const table = tables?.get(batch[position].index);
      if (table && codes) {
        const translated = table.map((text) => {
          if (!codeOf.has(text)) codeOf.set(text, texts.push(text) - 1);
          return codeOf.get(text)!;
        });
        for (let i = 0; i < cells.length; i++) codes[next + i] = translated[cells[i]];
      } else (codes ?? data)!.set(cells, next);
      next += cells.length;
    });
  }
  return codes ? { kind: "text", codes, texts } : { kind: "number", data: data! };
}

async function storeOrder(jobId: string, key: string, rows: Uint32Array): Promise<StoredOrder> {
  const id = newId("ord");
  await pool().query("insert into result_order (id, job_id, key, row_count, rows) values ($1, $2, $3, $4, $5)",
    [id, jobId, key, rows.length, Buffer.from(rows.buffer, rows.byteOffset, rows.byteLength)]);
  await pool().query(
    "delete from result_order where job_id = $1 and id not in (select id from result_order where job_id = $1 order by last_used_at desc, created_at desc limit $2)",
    [jobId, ORDERS_PER_JOB]);
  return { id, rowCount: rows.length };
}

/** Row indices at positions [from, from + count) of an order; null when the order was dropped. */
export async function readOrder(id: string, from: number, count: number): Promise<Uint32Array | null> {
  const [part] = await readBytes("select substring(rows from $2 for $3) from result_order where id = $1", [id, from * 4 + 1, Math.max(0, count) * 4]);
  return part ? new Uint32Array(new Uint8Array(part).buffer) : null;
}
