/**
 * Reads documents in the request where they are small and in a thread where they are large, so that 50 MB of JSON never
 * hold up the web process. The thread's bundle is made by jobs/build.mjs; without it (unit tests) all is read in place.
 */
import { existsSync } from "node:fs";
import path from "node:path";
import { Worker } from "node:worker_threads";
import { AppError, type ErrorCode, type Issue } from "@/lib/errors";
import { type PreparedSamples, prepareSamples, type SampleDocument } from "./prepare-samples";
import { type PreparedSpec, prepareSpec } from "./prepare-spec";

/** Bodies beyond this go to a thread. */
export const THREAD_BYTES = 1024 * 1024;
const TIMEOUT_MS = 60_000;
/** Heap of the thread in MiB: a hostile document ends its thread, not the process. */
const HEAP_MB = 1024;

export type IntakeTask =
  | { kind: "spec"; bytes: Uint8Array }
  | { kind: "samples"; document: SampleDocument };
export type IntakeReply =
  | { ok: true; result: PreparedSpec | PreparedSamples }
  | { ok: false; code: ErrorCode | null; message: string; errors?: Issue[] };

/** Work of the thread, also callable in place. */
export function performIntake(task: IntakeTask): PreparedSpec | PreparedSamples {
  return task.kind === "spec" ? prepareSpec(task.bytes) : prepareSamples(task.document);
}

const script = (): string => path.join(process.cwd(), ".build", "parse-thread.mjs");

// Two at once is as many as the machine has cores to spare for; the others wait their turn.
const MAX_THREADS = 2;
let running = 0;
const waiting: (() => void)[] = [];

async function inThread(task: IntakeTask): Promise<PreparedSpec | PreparedSamples> {
  while (running >= MAX_THREADS) await new Promise<void>((resolve) => { waiting.push(resolve); });
  running++;
  try {
    const reply = await new Promise<IntakeReply>((resolve, reject) => {
      const worker = new Worker(/* turbopackIgnore: true */ script(), {
        workerData: task, resourceLimits: { maxOldGenerationSizeMb: HEAP_MB },
        // A spec's bytes are not needed here any more; an upload's are, to be stored.
        transferList: task.kind === "spec" ? [task.bytes.buffer as ArrayBuffer] : [],
      });
      const timer = setTimeout(() => { void worker.terminate(); }, TIMEOUT_MS);
      worker.once("message", (message: IntakeReply) => { clearTimeout(timer); resolve(message); });
      worker.once("error", (error) => { clearTimeout(timer); reject(error); });
      worker.once("exit", () => { clearTimeout(timer); reject(new Error("exit")); });
    }).catch((error: unknown): IntakeReply => ({
      ok: false, code: "too-large", message: `The document takes too much time or memory to read (${error instanceof Error ? error.message : "unknown"}); split it.`,
    }));
    if (reply.ok) return reply.result;
    if (reply.code === null) throw new Error(reply.message);
    throw new AppError(reply.code, reply.message, { errors: reply.errors });
  } finally {
    running--;
    waiting.shift()?.();
  }
}

async function run(task: IntakeTask, size: number): Promise<PreparedSpec | PreparedSamples> {
  return size > THREAD_BYTES && existsSync(script()) ? inThread(task) : performIntake(task);
}

/** A job spec from the bytes of a body. Throws `bad-request` where they are no JSON; faults of the spec are in the result. */
export const intakeSpec = async (bytes: Uint8Array): Promise<PreparedSpec> =>
  (await run({ kind: "spec", bytes }, bytes.byteLength)) as PreparedSpec;

/** Samples from an uploaded document. */
export const intakeSamples = async (document: SampleDocument): Promise<PreparedSamples> =>
  (await run({ kind: "samples", document }, document.bytes.byteLength)) as PreparedSamples;
