import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { CellColumn } from "../cells";

/** What a download says about itself, where the format has room for it. */
export interface Provenance {
  jobId: string; title: string; status: string; specHash: string; engineVersion: string; constantsVersion: string;
  /** Rows of the whole ordering and the position this download starts at. */
  rowCount: number; firstRow: number;
}

/** Turns batches of rows into bytes. `rows` is called with consecutive batches in the order of the download. */
export interface RowFormat {
  start(): Uint8Array;
  rows(cells: readonly CellColumn[], count: number): Uint8Array;
  end(): Uint8Array;
}

export type MakeFormat = (columns: readonly ColumnDescriptor[], provenance: Provenance) => RowFormat;

const encoder = new TextEncoder();
export const utf8 = (text: string): Uint8Array => encoder.encode(text);
