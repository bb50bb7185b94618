import {
  AsyncByteQueue, Field, Float64, Int32, makeData, RecordBatch, RecordBatchStreamWriter, Schema, Struct, Utf8, type DataType,
} from "apache-arrow";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { CellColumn } from "../cells";
import type { MakeFormat } from "./format";

/** Collects what the writer puts out, so that each call can hand over its own bytes. */
class Collector extends AsyncByteQueue {
  private parts: Uint8Array[] = [];

  override write(bytes: Uint8Array): void {
    if (bytes.byteLength > 0) this.parts.push(bytes);
  }

  take(): Uint8Array {
    const whole = new Uint8Array(this.parts.reduce((sum, part) => sum + part.byteLength, 0));
    let at = 0;
    for (const part of this.parts) {
      whole.set(part, at);
      at += part.byteLength;
    }
    this.parts = [];
    return whole;
  }
}

function arrowType({ type }: ColumnDescriptor): DataType {
  if (type === "text") return new Utf8();
  return type === "integer" ? new Int32() : new Float64();
}

function arrowField(column: ColumnDescriptor): Field {
  const notes = new Map([["unit", column.unit], ["description", column.description], ["group", column.group]]);
  if (column.basis) notes.set("basis", column.basis);
  return new Field(column.name, arrowType(column), true, notes);
}

/** Validity bits: 1 where the cell is there (Arrow columnar format, validity bitmaps). */
function validity(data: ArrayLike<number>): { nullBitmap: Uint8Array; nullCount: number } {
  const nullBitmap = new Uint8Array(Math.ceil(data.length / 64) * 8);
  let nullCount = 0;
  for (let row = 0; row < data.length; row++) {
    if (Number.isFinite(data[row])) nullBitmap[row >> 3] |= 1 << (row & 7);
    else nullCount++;
  }
  return { nullBitmap, nullCount };
}

/** Encoded texts, remembered: water, case and status repeat for thousands of rows. */
const encoder = new TextEncoder();

function textData(texts: readonly string[]) {
  const encoded = new Map<string, Uint8Array>();
  const valueOffsets = new Int32Array(texts.length + 1);
  const parts = texts.map((text, row) => {
    let bytes = encoded.get(text);
    if (!bytes) encoded.set(text, bytes = encoder.encode(text));
    valueOffsets[row + 1] = valueOffsets[row] + bytes.length;
    return bytes;
  });
  const data = new Uint8Array(valueOffsets[texts.length]);
  parts.forEach((bytes, row) => data.set(bytes, valueOffsets[row]));
  return makeData({ type: new Utf8(), length: texts.length, nullCount: 0, valueOffsets, data });
}

function columnData(column: ColumnDescriptor, cells: CellColumn) {
  if (cells.kind === "text") return textData(cells.data);
  const { nullBitmap, nullCount } = validity(cells.data);
  const shared = { length: cells.data.length, nullCount, nullBitmap };
  return column.type === "integer"
    ? makeData({ type: new Int32(), data: Int32Array.from(cells.data), ...shared })
    : makeData({ type: new Float64(), data: Float64Array.from(cells.data), ...shared });
}

/**
 * Arrow IPC stream, uncompressed (apache-arrow 21 writes compressed bodies that other readers refuse: arrow-js issue
 * 470). Missing numbers are null. The stream's end marker tells a whole download from a cut one.
 */
export const arrowFormat: MakeFormat = (columns, provenance) => {
  const schema = new Schema(columns.map(arrowField), new Map(Object.entries(provenance).map(([name, value]) => [name, String(value)])));
  const sink = new Collector();
  const writer = new RecordBatchStreamWriter({ autoDestroy: false });
  return {
    start() {
      writer.reset(sink, schema);
      return sink.take();
    },
    rows(cells, count) {
      const children = cells.map((column, index) => columnData(columns[index], column));
      writer.write(new RecordBatch(schema, makeData({ type: new Struct(schema.fields), length: count, nullCount: 0, children })));
      return sink.take();
    },
    end() {
      writer.finish();
      return sink.take();
    },
  };
};
