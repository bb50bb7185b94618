/**
 * Threads of the web process for what would hold up its event loop: sorting whole jobs and formatting downloads. The
 * script is bundled by jobs/build.mjs; where it is absent (a dev server before the first build), may be stale (tests run
 * from source) and inside such a thread, the work is done in place.
 */
import { existsSync } from "node:fs";
import path from "node:path";
import { isMainThread, MessageChannel, type MessagePort } from "node:worker_threads";
import { Piscina } from "piscina";
import { env } from "@/lib/env";
import type { StoredOrder } from "./build-order";
import type { DownloadPlan } from "./plan-download";
import type { ExportQuery, ResultQuery } from "./types";

export type ExportTask =
  | { kind: "order"; jobId: string; words: ResultQuery; key: string; chunks: number[] }
  | { kind: "download"; jobId: string; query: ExportQuery; plan: DownloadPlan; port: MessagePort };

/** From the reader: `next` asks for bytes, `stop` ends. To the reader: bytes, then null; or an error's text. */
export type PortRequest = "next" | "stop";
export type PortReply = { bytes: Uint8Array | null } | { error: string };

const THREADS = 2;
/** Downloads wait for their readers most of the time, so a thread carries many. */
const TASKS_PER_THREAD = 32;
/** Formatting makes short-lived strings by the megabyte: a small nursery keeps the process from growing with them. */
const NURSERY_MB = 8;

const held = globalThis as { tufaExportThreads?: Piscina };

const script = (): string => path.join(process.cwd(), ".build", "export-thread.mjs");

function threads(): Piscina | null {
  if (held.tufaExportThreads) return held.tufaExportThreads;
  if (!isMainThread || env().NODE_ENV === "test" || !existsSync(script())) return null;
  held.tufaExportThreads = new Piscina({
    filename: script(), minThreads: 0, maxThreads: THREADS, concurrentTasksPerWorker: TASKS_PER_THREAD, idleTimeout: 60_000,
    resourceLimits: { maxYoungGenerationSizeMb: NURSERY_MB },
  });
  return held.tufaExportThreads;
}

/** Ends the threads, for tests and commands that want to exit. */
export async function closeExportThreads(): Promise<void> {
  const open = held.tufaExportThreads;
  held.tufaExportThreads = undefined;
  await open?.destroy();
}

/** Runs an order task in a thread, or `inPlace` where there are none. */
export async function runInThread(task: ExportTask & { kind: "order" }, inPlace: () => Promise<StoredOrder>): Promise<StoredOrder> {
  const pool = threads();
  return pool ? (pool.run(task) as Promise<StoredOrder>) : inPlace();
}

/** Bytes of a download as a thread makes them, one piece for each that is asked for; or those of `inPlace`. */
export function bytesFromThread(
  task: Omit<ExportTask & { kind: "download" }, "kind" | "port">, signal: AbortSignal, inPlace: () => AsyncGenerator<Uint8Array>,
): AsyncGenerator<Uint8Array> {
  const pool = threads();
  return pool ? pulledBytes(pool, task, signal) : inPlace();
}

async function* pulledBytes(
  pool: Piscina, task: Omit<ExportTask & { kind: "download" }, "kind" | "port">, signal: AbortSignal,
): AsyncGenerator<Uint8Array> {
  const { port1: near, port2: far } = new MessageChannel();
  const finished = pool.run({ ...task, kind: "download", port: far } satisfies ExportTask, { transferList: [far] }) as Promise<void>;
  let wake: (reply: PortReply) => void = () => {};
  near.on("message", (reply: PortReply) => wake(reply));
  const abort = () => wake({ bytes: null });
  signal.addEventListener("abort", abort, { once: true });
  // A thread that dies must not leave the reader waiting.
  finished.catch((error: unknown) => wake({ error: String(error) }));
  try {
    while (!signal.aborted) {
      const reply = await new Promise<PortReply>((resolve) => {
        wake = resolve;
        near.postMessage("next" satisfies PortRequest);
      });
      if ("error" in reply) throw new Error(`The download broke off: ${reply.error}`);
      if (!reply.bytes) return;
      yield reply.bytes;
    }
  } finally {
    signal.removeEventListener("abort", abort);
    near.postMessage("stop" satisfies PortRequest);
    near.close();
  }
}
