import type { ParsedQuery } from "@/lib/results/query";
import { readStoredChunks } from "./block-store";
import { findOrder } from "./find-order";
import type { ExportQuery, JobRow } from "./types";

/** What a download will carry, fixed when it starts: later chunks do not slip in. */
export interface DownloadPlan {
  /** The order whose rows are sent, or null for the job's own order of `chunks`. */
  orderId: string | null;
  chunks: number[];
  /** Rows of the whole ordering. */
  total: number;
  /** First position sent. */
  from: number;
}

/** Fixes which rows a download sends. In the job's own order that is all rows with no gap before them. */
export async function planDownload(row: JobRow, words: ExportQuery, query: ParsedQuery): Promise<DownloadPlan> {
  const from = Math.max(0, Math.trunc(words.from ?? 0));
  if (query.orderKey !== "") {
    const order = await findOrder(row, words, query);
    return { orderId: order.id, chunks: [], total: order.rowCount, from };
  }
  const { settled } = await readStoredChunks(row);
  return { orderId: null, chunks: settled.map((chunk) => chunk.index), total: settled.reduce((sum, chunk) => sum + chunk.rowCount, 0), from };
}
