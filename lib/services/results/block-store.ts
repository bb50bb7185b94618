/** Reading cells out of the stored blocks: which chunks are there, and columns of given rows with few queries. */
import { pool } from "@/db/client";
import { readBytes } from "@/db/read-bytes";
import { STATUS_NAMES } from "@/lib/chemistry/types";
import { cellBytes, columnSlice, decodeCells, decodeTexts, type StoredColumn, textTableOffset } from "@/lib/results/block";
import type { CellColumn } from "@/lib/results/cells";
import { planChunks, type PlannedChunk } from "@/lib/results/chunk-plan";
import type { ResultColumn } from "@/lib/results/query";
import { axisIndexOf, caseOf, pointsOf, type RowShape, waterOf } from "@/lib/results/row-index";
import { readWaterIds } from "./water-ids";
import type { JobRow } from "./types";

/** One stretch of bytes of a block. */
interface Piece { block: number; offset: number; length: number }

/** Bytes asked for in one query: bounds what a reader holds at a time. */
const QUERY_BYTES = 4 * 1024 * 1024;
/** Up to this many bytes between first and last row wanted, one stretch is cheaper than one per row. */
const SPAN_BYTES = 8 * 1024;

export const shapeOf = (row: JobRow): RowShape => ({
  caseCount: row.caseNames?.length ?? 1, axisLengths: (row.axes ?? []).map((axis) => axis.shown.length),
});

export const valueColumnCount = (row: JobRow): number => (row.columns ?? []).filter((c) => c.group !== "row" && c.group !== "axis").length;

export const plannedChunks = (row: JobRow): PlannedChunk[] => planChunks(row.rowCount, valueColumnCount(row));

export interface StoredChunks {
  /** Chunks whose rows are stored, in order. */
  stored: PlannedChunk[];
  /** The leading ones with no chunk still to come before them: what may be read in the job's own order without gaps. */
  settled: PlannedChunk[];
}

/** Which chunks of a planned job are stored just now. */
export async function readStoredChunks(row: JobRow): Promise<StoredChunks> {
  const planned = plannedChunks(row);
  if (row.status === "done") return { stored: planned, settled: planned };
  const { rows } = await pool().query<{ index: number; status: string }>("select index, status from chunk where job_id = $1 order by index", [row.id]);
  const done = rows.filter((chunk) => chunk.status === "done").map((chunk) => planned[chunk.index]);
  const firstOpen = rows.find((chunk) => chunk.status === "waiting" || chunk.status === "leased")?.index ?? planned.length;
  return { stored: done, settled: done.filter((chunk) => chunk.index < firstOpen) };
}

/** Fetches pieces in as many queries as their size asks for and hands them over in order; holds one query's at a time. */
async function readPieces(jobId: string, pieces: readonly Piece[], take: (bytes: Buffer, number: number) => void): Promise<void> {
  for (let from = 0; from < pieces.length;) {
    let to = from;
    for (let bytes = 0; to < pieces.length && (bytes === 0 || bytes + pieces[to].length <= QUERY_BYTES); to++) bytes += pieces[to].length;
    const batch = pieces.slice(from, to);
    const read = await readBytes(
      `select substring(b.bytes from p.start + 1 for p.length)
       from unnest($2::int[], $3::int[], $4::int[]) with ordinality as p(index, start, length, position)
       left join result_block b on b.job_id = $1 and b.index = p.index order by p.position`,
      [jobId, batch.map((p) => p.block), batch.map((p) => p.offset), batch.map((p) => p.length)]);
    read.forEach((bytes, position) => {
      if (!bytes) throw new Error(`Block ${batch[position].block} of ${jobId} is missing though its chunk is done`);
      take(bytes, from + position);
    });
    from = to;
  }
}

/** Rows wanted from one block: their numbers within the block and the positions they take in the answer. */
interface BlockRows { chunk: PlannedChunk; local: Uint32Array; positions: Uint32Array; first: number; last: number }

/** Sorts rows into their blocks by counting, in typed arrays: a sorted download asks for 10⁵ scattered rows at a time. */
function groupByBlock(rows: ArrayLike<number>, chunks: readonly PlannedChunk[]): BlockRows[] {
  const places = new Uint32Array(rows.length);
  const counts = new Uint32Array(chunks.length);
  let chunk: PlannedChunk | undefined;
  for (let position = 0; position < rows.length; position++) {
    const row = rows[position];
    if (!chunk || row < chunk.firstRow || row >= chunk.firstRow + chunk.rowCount) chunk = chunkOfRow(row, chunks);
    places[position] = chunk.index;
    counts[chunk.index]++;
  }
  const groups = new Map<number, BlockRows & { filled: number }>();
  for (let position = 0; position < rows.length; position++) {
    const place = places[position];
    let group = groups.get(place);
    if (!group) {
      group = { chunk: chunks[place], local: new Uint32Array(counts[place]), positions: new Uint32Array(counts[place]), first: Infinity, last: -1, filled: 0 };
      groups.set(place, group);
    }
    const local = rows[position] - group.chunk.firstRow;
    group.local[group.filled] = local;
    group.positions[group.filled++] = position;
    if (local < group.first) group.first = local;
    if (local > group.last) group.last = local;
  }
  return [...groups.values()];
}

function chunkOfRow(row: number, chunks: readonly PlannedChunk[]): PlannedChunk {
  let low = 0;
  let high = chunks.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (chunks[middle].firstRow <= row) low = middle;
    else high = middle - 1;
  }
  return chunks[low];
}

/** The pieces of a column that hold the rows of a group, and how to take the cells out of them. */
function piecesOf(group: BlockRows, column: StoredColumn): { pieces: Piece[]; together: boolean } {
  const { chunk, local, first, last } = group;
  const size = cellBytes(column);
  const start = columnSlice(chunk.rowCount, column).offset;
  const together = (last - first + 1) * size <= SPAN_BYTES || local.length * 16 > last - first;
  const piece = (from: number, count: number): Piece => ({ block: chunk.index, offset: start + from * size, length: count * size });
  return together ? { pieces: [piece(first, last - first + 1)], together } : { pieces: Array.from(local, (row) => piece(row, 1)), together };
}

/** Cells of stored columns, as numbers (codes for status and texts). */
async function readStored(jobId: string, groups: readonly BlockRows[], columns: readonly StoredColumn[], count: number): Promise<Float64Array[]> {
  const cells = columns.map(() => new Float64Array(count));
  const pieces: Piece[] = [];
  const takers: ((bytes: Buffer) => void)[] = [];
  columns.forEach((column, number) => groups.forEach((group) => {
    const { pieces: wanted, together } = piecesOf(group, column);
    wanted.forEach((piece, i) => {
      pieces.push(piece);
      takers.push((bytes) => {
        const read = decodeCells(column, bytes);
        if (!together) cells[number][group.positions[i]] = read[0];
        else group.local.forEach((local, k) => { cells[number][group.positions[k]] = read[local - group.first]; });
      });
    });
  }));
  await readPieces(jobId, pieces, (bytes, number) => takers[number](bytes));
  return cells;
}

/** Text tables of blocks, by block number. */
export async function readTextTables(row: JobRow, chunks: readonly PlannedChunk[]): Promise<Map<number, string[]>> {
  const values = valueColumnCount(row);
  // The table's length stands in the header only; substring() stops at the end by itself.
  const tables = await readBytes(
    `select substring(b.bytes from p.start + 1) from unnest($2::int[], $3::int[]) with ordinality as p(index, start, position)
     left join result_block b on b.job_id = $1 and b.index = p.index order by p.position`,
    [row.id, chunks.map((c) => c.index), chunks.map((c) => textTableOffset(c.rowCount, values))]);
  return new Map(tables.map((bytes, position) => [chunks[position].index, bytes ? decodeTexts(bytes) : [""]]));
}

/** Blocks whose texts are needed: those where some code is not 0. */
async function textsOf(row: JobRow, groups: readonly BlockRows[], codes: Float64Array): Promise<string[]> {
  const needed = groups.filter((group) => group.positions.some((position) => codes[position] !== 0));
  const tables = needed.length > 0 ? await readTextTables(row, needed.map((group) => group.chunk)) : new Map<number, string[]>();
  const texts = new Array<string>(codes.length).fill("");
  for (const group of needed) {
    const table = tables.get(group.chunk.index) ?? [];
    for (const position of group.positions) texts[position] = table[codes[position]] ?? "";
  }
  return texts;
}

/** Cells of the given columns for the given rows, which must be stored. */
export async function readCells(row: JobRow, rows: ArrayLike<number>, columns: readonly ResultColumn[]): Promise<CellColumn[]> {
  const shape = shapeOf(row);
  const points = pointsOf(shape);
  const groups = groupByBlock(rows, plannedChunks(row));
  const stored = columns.flatMap(({ place }) => (place.kind === "stored" ? [place.column] : []));
  const cells = await readStored(row.id, groups, stored, rows.length);
  const answer: CellColumn[] = [];
  let next = 0;
  for (const { place } of columns) {
    switch (place.kind) {
      case "water": answer.push({ kind: "text", data: await readWaterIds(row.id, Array.from(rows, (r) => waterOf(r, shape, points))) }); break;
      case "case": answer.push({ kind: "text", data: Array.from(rows, (r) => row.caseNames?.[caseOf(r, shape, points)] ?? "") }); break;
      case "axis": {
        const shown = row.axes?.[place.axis].shown ?? [];
        answer.push({ kind: "number", data: Float64Array.from(rows, (r) => shown[axisIndexOf(r, shape, place.axis)]) });
        break;
      }
      case "stored": {
        const data = cells[next++];
        if (place.column === "status") answer.push({ kind: "text", data: Array.from(data, (code) => STATUS_NAMES[code]) });
        else if (place.column === "message" || place.column === "warnings") answer.push({ kind: "text", data: await textsOf(row, groups, data) });
        else answer.push({ kind: "number", data });
      }
    }
  }
  return answer;
}
