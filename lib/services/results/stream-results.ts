import { AppError } from "@/lib/errors";
import { parseQuery } from "@/lib/results/query";
import { downloadBytes } from "./download-bytes";
import { bytesFromThread } from "./export-threads";
import { planDownload } from "./plan-download";
import type { ExportFormat, ExportQuery, JobRow, ResultStream } from "./types";

const CONTENT_TYPES: Record<ExportFormat, string> = {
  ndjson: "application/x-ndjson", csv: "text/csv; charset=utf-8; header=present",
  arrow: "application/vnd.apache.arrow.stream", json: "application/json",
};
const EXTENSIONS: Record<ExportFormat, string> = { ndjson: "ndjson", csv: "csv", arrow: "arrow", json: "json" };

/**
 * Starts a download of a job's rows (those stored when it starts). Faults of the query throw here, before any byte is
 * sent; the body then streams chunk by chunk with backpressure and stops when `signal` aborts.
 *
 * A cut download can be told from a whole one: `Tufa-Row-Count` says beforehand how many rows come, JSON and Arrow have
 * an end of their own, and with `footer` NDJSON ends in `{"end":true,"rows":N,"sha256":"…"}` and CSV in
 * `#end,N,sha256`, the hash being over all bytes before that record. `from` resumes at a position.
 * Throws AppError "bad-request" for the query, "conflict" for a job that has not been planned yet.
 */
export async function streamResults(row: JobRow, words: ExportQuery, signal: AbortSignal): Promise<ResultStream> {
  if (!row.columns) {
    if (row.status === "queued") throw new AppError("conflict", `Job ${row.id} waits for its turn and has no rows yet`);
    throw new AppError("conflict", `Job ${row.id} ended before it had any rows`);
  }
  const query = parseQuery(row.columns, words);
  const plan = await planDownload(row, words, query);
  const rowCount = Math.max(0, plan.total - plan.from);
  const iterator = bytesFromThread({ jobId: row.id, query: words, plan }, signal, () => downloadBytes(row, words, query, plan));
  return { body: streamOf(iterator, signal), rowCount, headers: headersOf(row, words, plan.total, rowCount) };
}

function headersOf(row: JobRow, { format }: ExportQuery, total: number, rowCount: number): Record<string, string> {
  return {
    "content-type": CONTENT_TYPES[format],
    "content-disposition": `attachment; filename="${row.id}.${EXTENSIONS[format]}"`,
    "tufa-row-count": String(rowCount),
    "tufa-rows-total": String(total),
    // Rows of a job that has ended are all there will ever be.
    "tufa-complete": String(row.status !== "running"),
    "tufa-spec-hash": row.specHash,
    "tufa-engine-version": row.engineVersion,
    "tufa-constants-version": row.constantsVersion,
  };
}

/** One piece for each pull: the reader's pace is the writer's. */
function streamOf(iterator: AsyncGenerator<Uint8Array>, signal: AbortSignal): ReadableStream<Uint8Array> {
  const stop = () => void iterator.return(undefined).catch(() => {});
  // Behind a dropped connection cancel() may never be called (only the request's signal aborts), so both end it.
  signal.addEventListener("abort", stop, { once: true });
  const settle = () => signal.removeEventListener("abort", stop);
  return new ReadableStream<Uint8Array>({
    async pull(controller) {
      try {
        for (;;) {
          const { value, done } = await iterator.next();
          if (done) {
            settle();
            return controller.close();
          }
          if (value.byteLength > 0) return controller.enqueue(value);
        }
      } catch (error) {
        settle();
        controller.error(error);
      }
    },
    async cancel() {
      settle();
      await iterator.return(undefined);
    },
  }, { highWaterMark: 1 });
}
