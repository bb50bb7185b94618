/** What passes between a worker process and its solver threads. */
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { BlockCounts } from "@/lib/results/block";

/** What planning needs to know of a compiled job. */
export interface JobPlan {
  rowCount: number;
  waterIds: string[];
  caseNames: string[];
  axes: { field: string; unit: string; shown: number[] }[];
  valueColumns: ColumnDescriptor[];
}

export interface SolvedChunk { bytes: Uint8Array<ArrayBuffer>; counts: BlockCounts; solveMs: number }

export type SolverTask =
  | { kind: "plan"; jobId: string }
  | { kind: "solve"; jobId: string; firstRow: number; rowCount: number };

export type SolverResult<T extends SolverTask> = T extends { kind: "plan" } ? JobPlan : SolvedChunk | null;

/** `stop[0]` turned to 1 from outside makes a solve end early with a null result. */
export interface SolverRequest { id: number; task: SolverTask; stop: Int32Array<SharedArrayBuffer> }

export type SolverReply =
  | { id: number; result: JobPlan | SolvedChunk | null }
  | { id: number; error: { message: string; isDatabaseAway: boolean } };
