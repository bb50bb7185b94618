/** Thread entry of the web process: sorts jobs, formats downloads. Called by piscina with one task at a time or many. */
import type { MessagePort } from "node:worker_threads";
import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { job } from "@/db/schema";
import { jobColumns } from "@/lib/services/jobs/row";
import { parseQuery } from "@/lib/results/query";
import { plannedChunks } from "@/lib/services/results/block-store";
import { buildOrder, type StoredOrder } from "@/lib/services/results/build-order";
import { downloadBytes } from "@/lib/services/results/download-bytes";
import type { ExportTask, PortReply, PortRequest } from "@/lib/services/results/export-threads";
import type { JobRow } from "@/lib/services/results/types";

async function readJob(jobId: string): Promise<JobRow> {
  const [row] = await db().select(jobColumns).from(job).where(eq(job.id, jobId));
  if (!row) throw new Error(`job ${jobId} is gone`);
  return row;
}

/** Hands bytes over without a copy where they have their memory to themselves. */
function hand(port: MessagePort, bytes: Uint8Array | null): void {
  const own = bytes && bytes.byteLength > 0 && bytes.byteLength === bytes.buffer.byteLength;
  port.postMessage({ bytes } satisfies PortReply, own ? [bytes.buffer as ArrayBuffer] : []);
}

/** Sends bytes as they are asked for, until the end, an error, or the reader's `stop`. */
async function serve(port: MessagePort, bytes: AsyncGenerator<Uint8Array>): Promise<void> {
  await new Promise<void>((resolve) => {
    const end = () => { port.close(); void bytes.return(undefined).catch(() => {}); resolve(); };
    port.on("close", () => resolve());
    port.on("message", (request: PortRequest) => {
      if (request === "stop") return end();
      bytes.next().then(
        ({ value, done }) => hand(port, done ? null : value),
        (error: unknown) => port.postMessage({ error: error instanceof Error ? error.message : String(error) } satisfies PortReply));
    });
  });
}

export default async function runExportTask(task: ExportTask): Promise<StoredOrder | void> {
  const row = await readJob(task.jobId);
  if (task.kind === "order") {
    const planned = plannedChunks(row);
    return buildOrder(row, parseQuery(row.columns ?? [], task.words), task.chunks.map((index) => planned[index]), task.key);
  }
  const query = parseQuery(row.columns ?? [], task.query);
  await serve(task.port, downloadBytes(row, task.query, query, task.plan));
}
