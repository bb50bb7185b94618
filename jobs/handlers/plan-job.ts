import { eq, sql } from "drizzle-orm";
import { isDatabaseAway } from "@/db/database-error";
import { db, type Tx } from "@/db/client";
import { chunk, job, jobWater } from "@/db/schema";
import { planChunks } from "@/lib/results/chunk-plan";
import { resultColumns } from "@/lib/results/result-columns";
import { jobColumns } from "@/lib/services/jobs/row";
import { WATERS_PER_ROW } from "@/lib/services/results/water-ids";
import { WORK_CHANNEL } from "../definitions/plan-job";
import { storeEvent } from "../queue";
import { SolverError } from "../solver-pool";
import type { JobPlan } from "../threads/messages";

const CHUNKS_PER_INSERT = 2000;

type Compile = (jobId: string) => Promise<JobPlan>;

/**
 * Turns a queued job into chunks: columns, water ids, chunks, status running and the event, all in one transaction.
 * Safe to run again and beside itself: an advisory lock lets one planner through, and a job that is no longer queued
 * is left alone. A fault of the job ends it as failed; a lost database is thrown on, for another try.
 */
export async function planJob(jobId: string, compile: Compile): Promise<void> {
  try {
    await db().transaction((tx) => planInside(tx, jobId, compile));
  } catch (error) {
    if (isDatabaseAway(error) || (error instanceof SolverError && error.isDatabaseAway)) throw error;
    await failPlanning(jobId, error instanceof Error ? error.message : String(error));
  }
}

async function planInside(tx: Tx, jobId: string, compile: Compile): Promise<void> {
  // Held by the connection, so a planner that dies frees it at once.
  const { rows: [lock] } = await tx.execute(sql`select pg_try_advisory_xact_lock(hashtext('tufa-plan'), hashtext(${jobId})) as taken`);
  if (!lock.taken) return;
  const [row] = await tx.select(jobColumns).from(job).where(eq(job.id, jobId));
  if (row?.status !== "queued") return;
  const plan = await compile(jobId);
  const chunks = planChunks(plan.rowCount, plan.valueColumns.length);
  for (let from = 0; from < chunks.length; from += CHUNKS_PER_INSERT) {
    await tx.insert(chunk).values(chunks.slice(from, from + CHUNKS_PER_INSERT).map((planned) => ({
      ...planned, jobId, lane: row.lane, ownerId: row.ownerId,
    })));
  }
  for (let from = 0; from < plan.waterIds.length; from += WATERS_PER_ROW) {
    await tx.insert(jobWater).values({ jobId, index: from / WATERS_PER_ROW, ids: plan.waterIds.slice(from, from + WATERS_PER_ROW) });
  }
  const [planned] = await tx.update(job).set({
    status: "running", startedAt: sql`clock_timestamp()`, rowCount: plan.rowCount, chunkCount: chunks.length,
    columns: resultColumns(plan.axes, plan.valueColumns), caseNames: plan.caseNames, axes: plan.axes,
  }).where(sql`${job.id} = ${jobId} and ${job.status} = 'queued'`).returning(jobColumns);
  // Cancelled meanwhile: nothing of the plan may stay.
  if (!planned) return tx.rollback();
  await storeEvent(tx, planned, "job-started");
  await tx.execute(sql`select pg_notify(${WORK_CHANNEL}, ${`chunks ${row.lane}`})`);
}

async function failPlanning(jobId: string, reason: string): Promise<void> {
  await db().transaction(async (tx) => {
    const [failed] = await tx.update(job)
      .set({ status: "failed", finishedAt: sql`clock_timestamp()`, error: `The job could not be planned: ${reason}` })
      .where(sql`${job.id} = ${jobId} and ${job.status} = 'queued'`).returning(jobColumns);
    if (failed) await storeEvent(tx, failed, "job-failed");
  });
}
