import { isDatabaseAway } from "@/db/database-error";
import { claimChunk, extendLeases, failAttempt, failLostChunks, type LeasedChunk, releaseChunks, storeChunk } from "../chunk-table";
import type { Lane } from "../definitions/plan-job";
import { SolverError, type SolverPool } from "../solver-pool";
import type { SolvedChunk } from "../threads/messages";

/** Waits between tries while the database is away. */
const RETRY_MS = 250;
/** A lane with nothing to do looks again this often, for leases that ran out. */
const IDLE_MS = 2000;

interface Options {
  lane: Lane;
  workerId: string;
  leaseMs: number;
  threads: number;
  solver: Pick<SolverPool, "run">;
  log: (message: string, details?: Record<string, unknown>) => void;
}

interface Held { chunk: LeasedChunk; stop: AbortController }

/**
 * The worker's main loop: as many lanes of claim, solve, store as there are threads. A store runs beside the next
 * claim, so that threads do not wait for the disk. Heartbeats come from here, the main thread, never from a thread
 * that is solving.
 */
export class ChunkRunner {
  private readonly held = new Set<Held>();
  private readonly sleepers = new Set<() => void>();
  private readonly heartbeat: NodeJS.Timeout;
  private readonly idleMs: number;
  private stopping = false;
  private finished: Promise<unknown>;

  constructor(private readonly options: Options) {
    this.idleMs = Math.min(IDLE_MS, options.leaseMs / 5);
    this.heartbeat = setInterval(() => void this.beat(), options.leaseMs / 5);
    this.finished = Promise.all(Array.from({ length: options.threads }, () => this.loop()));
  }

  /** Ends every idle wait: there may be work. */
  wake(): void {
    for (const resolve of this.sleepers) resolve();
  }

  /** Stops solving chunks of a job that was cancelled. Their writes would be refused anyway. */
  cancel(jobId: string): void {
    for (const { chunk, stop } of this.held) if (chunk.jobId === jobId) stop.abort();
  }

  /** Claims nothing more, lets chunks under way finish within `graceMs`, gives the others back. */
  async drain(graceMs: number): Promise<void> {
    this.stopping = true;
    this.wake();
    let timer: NodeJS.Timeout | undefined;
    const grace = new Promise((resolve) => { timer = setTimeout(resolve, graceMs); });
    await Promise.race([this.finished, grace]);
    clearTimeout(timer);
    clearInterval(this.heartbeat);
    const left = [...this.held].map((held) => held.chunk);
    if (left.length > 0) await releaseChunks(left).catch(() => {});
  }

  private async loop(): Promise<void> {
    let storing: Promise<void> = Promise.resolve();
    while (!this.stopping) {
      const chunk = await this.claim();
      if (!chunk) {
        await this.sleep(this.idleMs);
        continue;
      }
      const held: Held = { chunk, stop: new AbortController() };
      this.held.add(held);
      const solved = await this.solve(held);
      await storing;
      storing = solved ? this.store(held, solved) : Promise.resolve(void this.held.delete(held));
    }
    await storing;
  }

  private async claim(): Promise<LeasedChunk | null> {
    const { lane, workerId, leaseMs, log } = this.options;
    try {
      const chunk = await claimChunk(lane, workerId, leaseMs);
      if (!chunk) await failLostChunks(lane);
      return chunk;
    } catch (error) {
      log("claim failed", { error: String(error) });
      await this.sleep(RETRY_MS);
      return null;
    }
  }

  private async solve({ chunk, stop }: Held): Promise<SolvedChunk | null> {
    try {
      const { jobId, firstRow, rowCount } = chunk;
      return await this.options.solver.run({ kind: "solve", jobId, firstRow, rowCount }, stop.signal);
    } catch (error) {
      const message = error instanceof Error ? error.message : String(error);
      this.options.log("chunk failed", { job: chunk.jobId, chunk: chunk.index, attempt: chunk.attempt, error: message });
      const circumstances = error instanceof SolverError && error.isDatabaseAway;
      await this.persist(() => (circumstances ? releaseChunks([chunk]) : failAttempt(chunk, message)));
      return null;
    }
  }

  private async store(held: Held, { bytes, counts }: SolvedChunk): Promise<void> {
    const stored = await this.persist(() => storeChunk(held.chunk, bytes, counts));
    if (stored === false) this.options.log("write refused: the lease was taken over or the job cancelled", { job: held.chunk.jobId, chunk: held.chunk.index });
    this.held.delete(held);
  }

  /**
   * Runs a write until the database takes it. Trying for ever is safe: a write repeated after a lost answer, or after
   * another worker took the chunk over, changes nothing.
   */
  private async persist<T>(write: () => Promise<T>): Promise<T | undefined> {
    for (;;) {
      try {
        return await write();
      } catch (error) {
        this.options.log("write failed", { error: String(error) });
        if (!isDatabaseAway(error)) return undefined; // the lease runs out and the attempt counts
        await new Promise((resolve) => setTimeout(resolve, RETRY_MS));
      }
    }
  }

  private async beat(): Promise<void> {
    const sent = [...this.held];
    if (sent.length === 0) return;
    try {
      const kept = await extendLeases(sent.map((held) => held.chunk), this.options.leaseMs);
      const keys = new Set(kept.map((key) => `${key.jobId} ${key.index} ${key.fence}`));
      for (const { chunk, stop } of sent) {
        if (!keys.has(`${chunk.jobId} ${chunk.index} ${chunk.fence}`)) stop.abort();
      }
    } catch (error) {
      this.options.log("heartbeat failed", { error: String(error) });
    }
  }

  private sleep(ms: number): Promise<void> {
    return new Promise((resolve) => {
      const done = () => { clearTimeout(timer); this.sleepers.delete(done); resolve(); };
      const timer = setTimeout(done, ms);
      this.sleepers.add(done);
      if (this.stopping) done();
    });
  }
}
