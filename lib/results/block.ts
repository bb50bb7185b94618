/**
 * The stored form of a chunk's rows: one uncompressed columnar block, little-endian.
 *
 *   offset 0   header, 32 bytes: magic "TUFB" · version u16 · header bytes u16 · first row u32 · row count u32 ·
 *              value columns u32 · text count u32 · text table offset u32 · text table bytes u32
 *   then       status u8 · message i32 · warnings i32 · iterations i32 · residual f64 · values f64 …
 *   last       text table: (text count + 1) × u32 offsets, then UTF-8; text 0 is the empty text
 *
 * Columns are contiguous and start at multiples of 8, at offsets that follow from row count and column number alone:
 * a reader fetches one column with `substring(bytes from … for …)` and needs no header. Missing numbers are NaN.
 * Water, case and axes are not stored; they follow from the row index (row-index.ts).
 */
import type { SolvedRows } from "@/lib/chemistry/types";

const MAGIC = 0x42465554; // "TUFB" read as little-endian u32
const VERSION = 1;
export const HEADER_BYTES = 32;

/** Stored columns before the values, in order. */
export const FIXED_COLUMNS = ["status", "message", "warnings", "iterations", "residual"] as const;
export type FixedColumn = (typeof FIXED_COLUMNS)[number];

/** A stored column: one of the fixed ones or the number of a value column. */
export type StoredColumn = FixedColumn | number;

export interface Slice { offset: number; length: number }

const pad8 = (bytes: number): number => Math.ceil(bytes / 8) * 8;

/** Bytes of one cell. */
export function cellBytes(column: StoredColumn): 1 | 4 | 8 {
  if (column === "status") return 1;
  return column === "message" || column === "warnings" || column === "iterations" ? 4 : 8;
}

/** Where a column lies in a block of `rowCount` rows. */
export function columnSlice(rowCount: number, column: StoredColumn): Slice {
  const afterStatus = HEADER_BYTES + pad8(rowCount);
  const ints = pad8(4 * rowCount);
  const afterInts = afterStatus + 3 * ints;
  switch (column) {
    case "status": return { offset: HEADER_BYTES, length: rowCount };
    case "message": return { offset: afterStatus, length: 4 * rowCount };
    case "warnings": return { offset: afterStatus + ints, length: 4 * rowCount };
    case "iterations": return { offset: afterStatus + 2 * ints, length: 4 * rowCount };
    case "residual": return { offset: afterInts, length: 8 * rowCount };
    default: return { offset: afterInts + 8 * rowCount * (1 + column), length: 8 * rowCount };
  }
}

/** Where the text table starts: right after the last value column. */
export const textTableOffset = (rowCount: number, valueColumnCount: number): number =>
  columnSlice(rowCount, valueColumnCount).offset;

/** Typed views of a block under construction or decoded; `values` in the order of the job's value columns. */
export interface BlockColumns {
  status: Uint8Array;
  message: Int32Array;
  warnings: Int32Array;
  iterations: Int32Array;
  residual: Float64Array;
  values: Float64Array[];
}

export interface DecodedBlock extends BlockColumns { firstRow: number; rowCount: number; texts: string[] }

/** Views over the columns inside `buffer`, which must start at a multiple of 8 in memory. */
function viewColumns(buffer: ArrayBuffer, rowCount: number, valueColumnCount: number): BlockColumns {
  const at = (column: StoredColumn) => columnSlice(rowCount, column).offset;
  return {
    status: new Uint8Array(buffer, at("status"), rowCount),
    message: new Int32Array(buffer, at("message"), rowCount),
    warnings: new Int32Array(buffer, at("warnings"), rowCount),
    iterations: new Int32Array(buffer, at("iterations"), rowCount),
    residual: new Float64Array(buffer, at("residual"), rowCount),
    values: Array.from({ length: valueColumnCount }, (_, index) => new Float64Array(buffer, at(index), rowCount)),
  };
}

export interface BlockCounts { ok: number; notConverged: number; invalid: number; warned: number }

/**
 * Builds one block from consecutive pieces, so that a long chunk can be solved in steps with a look at the cancel flag
 * between them. Texts are numbered in order of first use over the rows, so the bytes do not depend on the cut.
 */
export class BlockBuilder {
  private readonly columnBytes: number;
  private readonly buffer: ArrayBuffer;
  private readonly columns: BlockColumns;
  private readonly texts: string[] = [""];
  private readonly codes = new Map<string, number>([["", 0]]);
  private filled = 0;

  constructor(private readonly firstRow: number, private readonly rowCount: number, private readonly valueColumnCount: number) {
    this.columnBytes = textTableOffset(rowCount, valueColumnCount);
    this.buffer = new ArrayBuffer(this.columnBytes);
    this.columns = viewColumns(this.buffer, rowCount, valueColumnCount);
  }

  /** Appends the next rows. Throws when they do not follow the rows before or have another number of columns. */
  add(rows: SolvedRows): void {
    if (rows.from !== this.firstRow + this.filled || this.filled + rows.count > this.rowCount) {
      throw new Error(`Block of rows ${this.firstRow}+${this.rowCount}: rows ${rows.from}+${rows.count} do not follow the ${this.filled} before`);
    }
    if (rows.values.length !== this.valueColumnCount) {
      throw new Error(`Block with ${this.valueColumnCount} value columns was given ${rows.values.length}`);
    }
    const { columns, filled } = this;
    columns.status.set(rows.status.subarray(0, rows.count), filled);
    columns.iterations.set(rows.iterations.subarray(0, rows.count), filled);
    columns.residual.set(rows.residual.subarray(0, rows.count), filled);
    rows.values.forEach((values, index) => columns.values[index].set(values.subarray(0, rows.count), filled));
    for (let row = 0; row < rows.count; row++) {
      columns.message[filled + row] = this.codeOf(rows.texts[rows.message[row]]);
      columns.warnings[filled + row] = this.codeOf(rows.texts[rows.warnings[row]]);
    }
    this.filled += rows.count;
  }

  private codeOf(text: string): number {
    let code = this.codes.get(text);
    if (code === undefined) {
      code = this.texts.push(text) - 1;
      this.codes.set(text, code);
    }
    return code;
  }

  /** The finished block and its counts by status. Throws when rows are missing. */
  finish(): { bytes: Uint8Array<ArrayBuffer>; counts: BlockCounts } {
    if (this.filled !== this.rowCount) throw new Error(`Block of ${this.rowCount} rows holds only ${this.filled}`);
    const table = encodeTexts(this.texts);
    const bytes = new Uint8Array(this.columnBytes + table.length);
    bytes.set(new Uint8Array(this.buffer));
    bytes.set(table, this.columnBytes);
    const header = new DataView(bytes.buffer);
    header.setUint32(0, MAGIC, true);
    header.setUint16(4, VERSION, true);
    header.setUint16(6, HEADER_BYTES, true);
    [this.firstRow, this.rowCount, this.valueColumnCount, this.texts.length, this.columnBytes, table.length]
      .forEach((field, index) => header.setUint32(8 + 4 * index, field, true));
    return { bytes, counts: countRows(this.columns) };
  }
}

function countRows({ status, warnings }: BlockColumns): BlockCounts {
  const byStatus = [0, 0, 0];
  let warned = 0;
  for (let row = 0; row < status.length; row++) {
    byStatus[status[row]]++;
    if (warnings[row] !== 0) warned++;
  }
  return { ok: byStatus[0], notConverged: byStatus[1], invalid: byStatus[2], warned };
}

/** One block from one piece of solved rows. */
export function encodeBlock(rows: SolvedRows): { bytes: Uint8Array<ArrayBuffer>; counts: BlockCounts } {
  const builder = new BlockBuilder(rows.from, rows.count, rows.values.length);
  builder.add(rows);
  return builder.finish();
}

function encodeTexts(texts: string[]): Uint8Array {
  const encoded = texts.map((text) => new TextEncoder().encode(text));
  const bytes = new Uint8Array(encoded.reduce((sum, text) => sum + text.length, 4 * (texts.length + 1)));
  const view = new DataView(bytes.buffer);
  let end = 4 * (texts.length + 1);
  encoded.forEach((text, index) => {
    view.setUint32(4 * index, end, true);
    bytes.set(text, end);
    end += text.length;
  });
  view.setUint32(4 * texts.length, end, true);
  return bytes;
}

/** The texts of a text table as read from the end of a block. */
export function decodeTexts(table: Uint8Array): string[] {
  const view = new DataView(table.buffer, table.byteOffset, table.length);
  const count = view.getUint32(0, true) / 4 - 1; // the first text starts where the offsets end
  const decoder = new TextDecoder();
  return Array.from({ length: count }, (_, index) =>
    decoder.decode(table.subarray(view.getUint32(4 * index, true), view.getUint32(4 * index + 4, true))));
}

/** A copy of `bytes` that starts at the beginning of an ArrayBuffer, as typed views of 8 bytes need. */
const aligned = (bytes: Uint8Array): ArrayBuffer => new Uint8Array(bytes).buffer;

/** A whole block. Throws when the header is not of this format or does not fit the length. */
export function decodeBlock(bytes: Uint8Array): DecodedBlock {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length);
  if (bytes.length < HEADER_BYTES || view.getUint32(0, true) !== MAGIC) throw new Error("Not a result block");
  if (view.getUint16(4, true) !== VERSION) throw new Error(`Result block of version ${view.getUint16(4, true)}; this build reads ${VERSION}`);
  const [firstRow, rowCount, valueColumnCount, , tableOffset, tableLength] = Array.from({ length: 6 }, (_, index) => view.getUint32(8 + 4 * index, true));
  if (tableOffset !== textTableOffset(rowCount, valueColumnCount) || bytes.length !== tableOffset + tableLength) {
    throw new Error(`Result block of ${rowCount} rows is ${bytes.length} bytes long, which does not fit its header`);
  }
  return {
    firstRow, rowCount,
    ...viewColumns(aligned(bytes), rowCount, valueColumnCount),
    texts: decodeTexts(bytes.subarray(tableOffset)),
  };
}

/** One column (or a run of its cells) as read by substring(), as numbers: f64 for values, codes for status and texts. */
export function decodeCells(column: StoredColumn, bytes: Uint8Array): Float64Array | Int32Array | Uint8Array {
  const size = cellBytes(column);
  if (size === 1) return new Uint8Array(bytes);
  return size === 4 ? new Int32Array(aligned(bytes)) : new Float64Array(aligned(bytes));
}
