/** The bytes of a download, piece by piece, with memory that does not grow with the job. */
import { createHash } from "node:crypto";
import { type CellColumn, sliceCells } from "@/lib/results/cells";
import { arrowFormat } from "@/lib/results/formats/arrow";
import { csvFormat } from "@/lib/results/formats/csv";
import { type MakeFormat, type Provenance, utf8 } from "@/lib/results/formats/format";
import { jsonFormat, ndjsonFormat } from "@/lib/results/formats/json";
import type { ParsedQuery } from "@/lib/results/query";
import { plannedChunks, readCells } from "./block-store";
import { readOrder } from "./build-order";
import { touchOrder } from "./find-order";
import type { DownloadPlan } from "./plan-download";
import type { ExportFormat, ExportQuery, JobRow } from "./types";

const FORMATS: Record<ExportFormat, MakeFormat> = { csv: csvFormat, ndjson: ndjsonFormat, json: jsonFormat, arrow: arrowFormat };

/** Rows formatted at a time: some 100–300 KB of text. */
const TEXT_ROWS = 1024;
const ARROW_ROWS = 8192;
/** Rows of an order read at a time where they lie close together. */
const NEAR_ROWS = 8192;
/**
 * A sorted download finds its next rows scattered over all blocks, so it reads every block once for each window of
 * rows: the larger the window, the fewer the passes. This is what a window may hold.
 */
const WINDOW_BYTES = 16 * 1024 * 1024;
/** Texts are shared between rows (water ids, case names, messages): a cell is a reference. */
const TEXT_CELL_BYTES = 8;

export async function* downloadBytes(row: JobRow, words: ExportQuery, query: ParsedQuery, plan: DownloadPlan): AsyncGenerator<Uint8Array> {
  const provenance: Provenance = {
    jobId: row.id, title: row.title, status: row.status, specHash: row.specHash, engineVersion: row.engineVersion,
    constantsVersion: row.constantsVersion, rowCount: plan.total, firstRow: plan.from,
  };
  const format = FORMATS[words.format](query.select.map((column) => column.descriptor), provenance);
  const hash = words.footer ? createHash("sha256") : null;
  const step = words.format === "arrow" ? ARROW_ROWS : TEXT_ROWS;
  let sent = 0;
  const seen = (bytes: Uint8Array) => { hash?.update(bytes); return bytes; };
  yield seen(format.start());
  for await (const window of windows(row, query, plan)) {
    const count = window.length;
    const cells = await readCells(row, window, query.select);
    for (let from = 0; from < count; from += step) {
      const to = Math.min(from + step, count);
      yield seen(format.rows(from === 0 && to === count ? cells : sliceCells(cells, from, to) satisfies CellColumn[], to - from));
      sent += to - from;
    }
  }
  yield seen(format.end());
  if (hash) yield footer(words.format, sent, hash.digest("hex"));
}

/** Last record of a text download with `footer`: rows sent and the SHA-256 of all bytes before it. */
function footer(format: ExportFormat, rows: number, sha256: string): Uint8Array {
  if (format === "ndjson") return utf8(`${JSON.stringify({ end: true, rows, sha256 })}\n`);
  return utf8(format === "csv" ? `#end,${rows},${sha256}\r\n` : "");
}

/** Row indices of the download in order, as many at a time as are best read together. */
async function* windows(row: JobRow, query: ParsedQuery, plan: DownloadPlan): AsyncGenerator<ArrayLike<number>> {
  if (plan.orderId === null) {
    yield* chunkWindows(row, plan);
    return;
  }
  const rowBytes = query.select.reduce((sum, column) => sum + (column.descriptor.type === "text" ? TEXT_CELL_BYTES : 8), 0);
  const size = query.sort.length === 0 ? NEAR_ROWS : Math.max(NEAR_ROWS, Math.floor(WINDOW_BYTES / rowBytes));
  for (let from = plan.from; from < plan.total; from += size) {
    await touchOrder(plan.orderId);
    const rows = await readOrder(plan.orderId, from, Math.min(size, plan.total - from));
    if (!rows) throw new Error("the order of this download was dropped; start it again");
    yield rows;
  }
}

function* chunkWindows(row: JobRow, plan: DownloadPlan): Generator<ArrayLike<number>> {
  const planned = plannedChunks(row);
  let position = 0;
  for (const index of plan.chunks) {
    const { firstRow, rowCount } = planned[index];
    const skipped = Math.min(rowCount, Math.max(0, plan.from - position));
    position += rowCount;
    if (skipped < rowCount) yield Uint32Array.from({ length: rowCount - skipped }, (_, i) => firstRow + skipped + i);
  }
}
