/** Real worker processes with the stand-in for the chemistry in their solver threads. */
import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm } from "node:fs/promises";
import path from "node:path";
import { buildJobs } from "@/jobs/build.mjs";
import type { Lane } from "@/jobs/queue";

export interface WorkerBench {
  start(lane: Lane, threads: number): Promise<ChildProcess>;
  /** Ends with a signal and gives the exit code, or the signal's name. */
  end(worker: ChildProcess, signal: NodeJS.Signals): Promise<number | string | null>;
  /** Everything the workers wrote. */
  output(): string;
  close(): Promise<void>;
}

const root = path.resolve(import.meta.dirname, "../..");

/** Builds the worker into a folder of its own (inside the project, so that packages resolve) and starts processes of it. */
export async function openWorkerBench(databaseUrl: string, leaseMs: number): Promise<WorkerBench> {
  const outdir = await mkdtemp(path.join(root, ".build-test-"));
  const standIn = path.join(root, "tests/helpers/stand-in/compile-stored-job.ts");
  await buildJobs({ outdir, only: ["worker", "solver-thread"], alias: { "../handlers/compile-stored-job": standIn } });
  const running = new Set<ChildProcess>();
  let written = "";
  const end = async (worker: ChildProcess, signal: NodeJS.Signals) => {
    if (worker.exitCode !== null || worker.signalCode !== null) return worker.exitCode ?? worker.signalCode;
    worker.kill(signal);
    await once(worker, "exit");
    running.delete(worker);
    return worker.exitCode ?? worker.signalCode;
  };
  return {
    async start(lane, threads) {
      const worker = spawn(process.execPath, [path.join(outdir, "worker.mjs"), "--lane", lane, "--threads", String(threads)], {
        env: { ...process.env, DATABASE_URL: databaseUrl, TUFA_LEASE_MS: String(leaseMs), TUFA_LOG: "info", NODE_ENV: "test" }, stdio: ["ignore", "pipe", "pipe"],
      });
      running.add(worker);
      const ready = new Promise<void>((resolve, reject) => {
        worker.stdout.on("data", (data: Buffer) => { written += data; if (written.includes(`"pid":${worker.pid}`) && written.includes("worker ready")) resolve(); });
        worker.stderr.on("data", (data: Buffer) => { written += data; });
        worker.once("exit", () => reject(new Error(`worker ended before it was ready: ${written}`)));
      });
      await ready;
      return worker;
    },
    end,
    output: () => written,
    async close() {
      await Promise.all([...running].map((worker) => end(worker, "SIGKILL")));
      await rm(outdir, { recursive: true, force: true });
    },
  };
}
