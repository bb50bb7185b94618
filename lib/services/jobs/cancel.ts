import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { job } from "@/db/schema";
import { openQueue, requestCancel, requestRetry } from "@/jobs/queue";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { Job } from "@/lib/schemas/api";
import { requireChange } from "../access";
import { recordAudit } from "../audit/record";
import { presentJob } from "./present";
import { jobColumns, type JobRow } from "./row";

async function changeableJob(actor: Actor, jobId: string): Promise<JobRow> {
  const [row] = await db().select(jobColumns).from(job).where(eq(job.id, jobId));
  if (!row) throw new AppError("not-found", `There is no job ${jobId}.`);
  requireChange(actor, row, `job ${jobId}`);
  return row;
}

async function shownAfter(jobId: string): Promise<Job> {
  const [row] = await db().select(jobColumns).from(job).where(eq(job.id, jobId));
  return presentJob(row);
}

/** Cancels a queued or running job; finished rows are kept. Throws `conflict` where it has ended already. */
export async function cancelJob(actor: Actor, jobId: string): Promise<Job> {
  const before = await changeableJob(actor, jobId);
  const isDone = await db().transaction(async (tx) => {
    const took = await requestCancel(tx, jobId);
    if (took) await recordAudit(tx, actor, { action: "job-cancelled", target: jobId });
    return took;
  });
  if (!isDone) throw new AppError("conflict", `Job ${jobId} has ended already (${before.status}); there is nothing to cancel.`);
  return shownAfter(jobId);
}

/** Takes up the failed or cancelled part of a job again. Throws `conflict` where there is nothing to retry. */
export async function retryJob(actor: Actor, jobId: string): Promise<Job> {
  const before = await changeableJob(actor, jobId);
  await openQueue();
  const isDone = await db().transaction(async (tx) => {
    const took = await requestRetry(tx, jobId);
    if (took) await recordAudit(tx, actor, { action: "job-retried", target: jobId });
    return took;
  });
  if (!isDone) throw new AppError("conflict", `Job ${jobId} is ${before.status}; only failed and cancelled jobs have something to retry.`);
  return shownAfter(jobId);
}
