/** Jobs of the stand-in kind for tests of queue and results: submitting, planning, solving without worker processes. */
import { sql } from "drizzle-orm";
import { db } from "@/db/client";
import { appUser, job } from "@/db/schema";
import { claimChunk, type LeasedChunk, storeChunk } from "@/jobs/chunk-table";
import { planJob } from "@/jobs/handlers/plan-job";
import { enqueueJob, type Lane, laneFor } from "@/jobs/queue";
import type { JobPlan } from "@/jobs/threads/messages";
import { newId } from "@/lib/ids";
import { encodeBlock } from "@/lib/results/block";
import { jobColumns, type JobRow } from "@/lib/services/jobs/row";
import { standInJob, type StandInSpec } from "./stand-in/compile-stored-job";

export const SPEC: StandInSpec = { waters: 10, cases: 2, axes: [5], valueColumns: 3 };
export const LEASE_MS = 10_000;

export const rowsOf = (spec: StandInSpec): number => spec.waters * spec.cases * spec.axes.reduce((product, length) => product * length, 1);

export async function createUser(): Promise<string> {
  const id = newId("usr");
  await db().insert(appUser).values({ id, email: `${id.toLowerCase()}@sallowmere.example`, name: "Someone", role: "modeller" });
  return id;
}

/** Submits a job as the API does: row and planning item in one transaction. */
export async function submit(ownerId: string, spec: StandInSpec, lane?: Lane): Promise<string> {
  const id = newId("job");
  await db().transaction(async (tx) => {
    await tx.insert(job).values({
      id, ownerId, title: "Beck round", spec: spec as unknown as Record<string, unknown>, specHash: "5f", status: "queued",
      lane: lane ?? laneFor(rowsOf(spec)), rowCount: rowsOf(spec), engineVersion: "1", constantsVersion: "2",
    });
    await enqueueJob(tx, id);
  });
  return id;
}

export function planOf(spec: StandInSpec): JobPlan {
  const { rowCount, waterIds, caseNames, axes, columns } = standInJob(spec);
  return { rowCount, waterIds, caseNames, valueColumns: columns, axes: axes.map((axis) => ({ ...axis, shown: Array.from(axis.shown) })) };
}

export async function submitPlanned(ownerId: string, spec: StandInSpec, lane?: Lane): Promise<string> {
  const id = await submit(ownerId, spec, lane);
  await planJob(id, async () => planOf(spec));
  return id;
}

export async function readJob(id: string): Promise<JobRow> {
  const [row] = await db().select(jobColumns).from(job).where(sql`${job.id} = ${id}`);
  return row;
}

export async function store(chunk: LeasedChunk, spec: StandInSpec): Promise<boolean> {
  const { bytes, counts } = encodeBlock(standInJob(spec).solve(chunk.firstRow, chunk.firstRow + chunk.rowCount));
  return storeChunk(chunk, bytes, counts);
}

/** Solves up to `most` chunks of a lane in place; returns how many there were. */
export async function solveChunks(lane: Lane, spec: StandInSpec, most = Infinity): Promise<number> {
  let count = 0;
  for (; count < most; count++) {
    const chunk = await claimChunk(lane, "wrk_test", LEASE_MS);
    if (!chunk) break;
    await store(chunk, spec);
  }
  return count;
}

/** Looks until the condition gives something; throws when it has not within the time. */
export async function until<T>(what: string, condition: () => Promise<T | null | undefined | false>, timeoutMs = 20_000): Promise<T> {
  const end = Date.now() + timeoutMs;
  for (;;) {
    const found = await condition();
    if (found) return found;
    if (Date.now() > end) throw new Error(`${what}: not within ${timeoutMs} ms`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}
