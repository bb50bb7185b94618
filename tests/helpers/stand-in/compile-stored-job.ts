/**
 * Stand-in for jobs/handlers/compile-stored-job.ts where a test is about the queue and not about chemistry. The job's
 * spec says what its rows are like: values are a pure function of row and column, so any run stores the same bytes.
 */
import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { job } from "@/db/schema";
import { STATUS, type CompiledJob, type SolvedRows } from "@/lib/chemistry/types";

export interface StandInSpec {
  waters: number; cases: number; axes: number[]; valueColumns: number;
  /** Busy time per row, to make chunks last. */
  microsecondsPerRow?: number;
  /** Solving this row throws. */
  poisonRow?: number;
  /** Compiling throws with this text. */
  compileError?: string;
}

/** A value in [−5, 5) or, for every 13th row, none. Same for the same row and column everywhere. */
export function standInValue(row: number, column: number): number {
  if (row % 13 === 0) return Number.NaN;
  let hash = Math.imul(row + 1, 0x9e3779b1) ^ Math.imul(column + 1, 0x85ebca6b);
  hash = Math.imul(hash ^ (hash >>> 15), 0xc2b2ae35);
  return (((hash ^ (hash >>> 13)) >>> 0) / 2 ** 32) * 10 - 5;
}

export function standInRows(from: number, to: number, valueColumns: number): SolvedRows {
  const count = to - from;
  const failed = (row: number) => row % 13 === 0;
  return {
    from, count,
    status: Uint8Array.from({ length: count }, (_, i) => (failed(from + i) ? STATUS.invalid : STATUS.ok)),
    message: Int32Array.from({ length: count }, (_, i) => (failed(from + i) ? 1 : 0)),
    warnings: Int32Array.from({ length: count }, (_, i) => ((from + i) % 7 === 0 ? 2 : 0)),
    iterations: Int32Array.from({ length: count }, (_, i) => (from + i) % 9),
    residual: Float64Array.from({ length: count }, (_, i) => ((from + i) % 5) * 1e-12),
    values: Array.from({ length: valueColumns }, (_, column) => Float64Array.from({ length: count }, (_, i) => standInValue(from + i, column))),
    texts: ["", "=no value: Ca is missing, \"given\" nowhere", "ill-conditioned"],
  };
}

export function standInJob(spec: StandInSpec): CompiledJob {
  const pointsPerCase = spec.axes.reduce((product, length) => product * length, 1);
  return {
    rowCount: spec.waters * spec.cases * pointsPerCase, pointsPerCase,
    waterIds: Array.from({ length: spec.waters }, (_, index) => `W-${index}`),
    caseNames: Array.from({ length: spec.cases }, (_, index) => `case ${String.fromCharCode(97 + index)}`),
    axes: spec.axes.map((length, axis) => ({ field: `axis${axis}`, unit: "mmol/L", shown: Float64Array.from({ length }, (_, i) => i / 10) })),
    columns: Array.from({ length: spec.valueColumns }, (_, index) => ({
      name: index === 0 ? "pH" : index === 1 ? "conc:Ca^2+" : `v${index}`, type: "number", unit: index === 0 ? "" : "mol/kg", basis: null,
      description: "stand-in", group: index === 1 ? "species" : "main",
    })),
    solve(from, to) {
      if (spec.poisonRow !== undefined && spec.poisonRow >= from && spec.poisonRow < to) throw new Error(`row ${spec.poisonRow} is poison`);
      const until = performance.now() + ((spec.microsecondsPerRow ?? 0) * (to - from)) / 1000;
      const rows = standInRows(from, to, spec.valueColumns);
      while (performance.now() < until);
      return rows;
    },
  };
}

export async function compileStoredJob(jobId: string): Promise<CompiledJob> {
  const [row] = await db().select({ spec: job.spec }).from(job).where(eq(job.id, jobId));
  const spec = row.spec as unknown as StandInSpec;
  if (spec.compileError) throw new Error(spec.compileError);
  return standInJob(spec);
}
