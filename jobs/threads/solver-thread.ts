/** Thread entry: compiles stored jobs and solves their rows into blocks. Holds the jobs it saw last, compiled. */
import { parentPort } from "node:worker_threads";
import { isDatabaseAway } from "@/db/database-error";
import type { CompiledJob } from "@/lib/chemistry/types";
import { BlockBuilder } from "@/lib/results/block";
import { compileStoredJob } from "../handlers/compile-stored-job";
import type { JobPlan, SolvedChunk, SolverReply, SolverRequest } from "./messages";

/** A compiled job may hold many megabytes of waters; an owner's turn rarely touches more than two jobs. */
const COMPILED_JOBS = 2;
/** Rows between two looks at the stop flag: well under a second of work; a multiple of 256 (lib/chemistry/types.ts). */
const STEP_ROWS = 1024;

const compiled = new Map<string, CompiledJob>();

async function compiledJob(jobId: string): Promise<CompiledJob> {
  const known = compiled.get(jobId) ?? await compileStoredJob(jobId);
  compiled.delete(jobId);
  compiled.set(jobId, known);
  for (const oldest of compiled.keys()) {
    if (compiled.size <= COMPILED_JOBS) break;
    compiled.delete(oldest);
  }
  return known;
}

async function plan(jobId: string): Promise<JobPlan> {
  const { rowCount, waterIds, caseNames, axes, columns } = await compiledJob(jobId);
  return {
    rowCount, waterIds, caseNames, valueColumns: columns,
    axes: axes.map((axis) => ({ field: axis.field, unit: axis.unit, shown: Array.from(axis.shown) })),
  };
}

async function solve(jobId: string, firstRow: number, rowCount: number, stop: Int32Array): Promise<SolvedChunk | null> {
  const job = await compiledJob(jobId);
  const started = performance.now();
  const builder = new BlockBuilder(firstRow, rowCount, job.columns.length);
  for (let row = firstRow; row < firstRow + rowCount; row += STEP_ROWS) {
    if (Atomics.load(stop, 0) !== 0) return null;
    builder.add(job.solve(row, Math.min(row + STEP_ROWS, firstRow + rowCount)));
  }
  return { ...builder.finish(), solveMs: performance.now() - started };
}

parentPort?.on("message", async ({ id, task, stop }: SolverRequest) => {
  let reply: SolverReply;
  const transfer: ArrayBuffer[] = [];
  try {
    const result = task.kind === "plan" ? await plan(task.jobId) : await solve(task.jobId, task.firstRow, task.rowCount, stop);
    if (result && "bytes" in result) transfer.push(result.bytes.buffer);
    reply = { id, result };
  } catch (error) {
    const message = error instanceof Error ? error.message : String(error);
    reply = { id, error: { message, isDatabaseAway: isDatabaseAway(error) } };
  }
  parentPort?.postMessage(reply, transfer);
});
