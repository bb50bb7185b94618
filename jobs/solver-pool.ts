import { Worker } from "node:worker_threads";
import type { SolverReply, SolverRequest, SolverResult, SolverTask } from "./threads/messages";

/** A solver's failure; `isDatabaseAway` tells whether the rows or the circumstances were at fault. */
export class SolverError extends Error {
  constructor(message: string, readonly isDatabaseAway: boolean) {
    super(message);
    this.name = "SolverError";
  }
}

/** Longer than any chunk takes by far (at most 8,192 rows): a thread still at it then is stuck. */
const TASK_TIMEOUT_MS = 120_000;

/** The solving loop keeps nothing: a small nursery holds a thread's memory flat over a job's length, at no cost in speed (measured). */
const YOUNG_MB = 4;

interface Waiting { request: SolverRequest; settle: (reply: SolverReply) => void }
interface Slot { worker: Worker; busy: Waiting | null; timer: NodeJS.Timeout | undefined }

/**
 * A fixed number of solver threads, each with one task at a time. A thread that dies (out of memory, stuck) fails its
 * task alone and is replaced.
 */
export class SolverPool {
  private readonly slots: Slot[];
  private readonly queue: Waiting[] = [];
  private nextId = 1;
  private closed = false;

  constructor(private readonly script: URL | string, threads: number) {
    this.slots = Array.from({ length: threads }, () => this.start({ busy: null, timer: undefined } as unknown as Slot));
  }

  private start(slot: Slot): Slot {
    const worker = new Worker(this.script, { name: "tufa-solver", resourceLimits: { maxYoungGenerationSizeMb: YOUNG_MB } });
    slot.worker = worker;
    worker.on("message", (reply: SolverReply) => this.finish(slot, reply));
    worker.on("error", (error) => this.replace(slot, worker, error.message));
    worker.on("exit", (code) => this.replace(slot, worker, `solver thread ended with code ${code}`));
    return slot;
  }

  private replace(slot: Slot, worker: Worker, reason: string): void {
    if (this.closed || slot.worker !== worker) return;
    const { busy } = slot;
    this.start(slot);
    this.finish(slot, { id: busy?.request.id ?? 0, error: { message: reason, isDatabaseAway: false } });
  }

  private finish(slot: Slot, reply: SolverReply): void {
    const { busy } = slot;
    clearTimeout(slot.timer);
    slot.busy = null;
    if (busy?.request.id === reply.id) busy.settle(reply);
    this.assign();
  }

  private assign(): void {
    for (const slot of this.slots) {
      if (slot.busy || this.queue.length === 0) continue;
      const next = this.queue.shift()!;
      slot.busy = next;
      slot.timer = setTimeout(() => void slot.worker.terminate(), TASK_TIMEOUT_MS);
      slot.worker.postMessage(next.request);
    }
  }

  /** Runs a task on a free thread, or on the next that comes free. `stop` ends a solve early; its result is then null. */
  run<T extends SolverTask>(task: T, stop?: AbortSignal): Promise<SolverResult<T>> {
    const flag = new Int32Array(new SharedArrayBuffer(4));
    const raise = () => void Atomics.store(flag, 0, 1);
    if (stop?.aborted) raise();
    stop?.addEventListener("abort", raise, { once: true });
    return new Promise((resolve, reject) => {
      const settle = (reply: SolverReply) => {
        stop?.removeEventListener("abort", raise);
        if ("error" in reply) reject(new SolverError(reply.error.message, reply.error.isDatabaseAway));
        else resolve(reply.result as SolverResult<T>);
      };
      this.queue.push({ request: { id: this.nextId++, task, stop: flag }, settle });
      this.assign();
    });
  }

  async close(): Promise<void> {
    this.closed = true;
    await Promise.all(this.slots.map((slot) => { clearTimeout(slot.timer); return slot.worker.terminate(); }));
  }
}
