import { eq, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { job } from "@/db/schema";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { Job } from "@/lib/schemas/api";
import { canRead } from "../access";
import { presentJob } from "./present";
import { jobColumns, type JobRow } from "./row";

/** A job's row, for services that read its results. Throws `not-found` also for one the actor may not see. */
export async function findJobRow(actor: Actor, jobId: string): Promise<JobRow> {
  const [row] = await db().select(jobColumns).from(job).where(eq(job.id, jobId));
  if (!row || !canRead(actor, row)) throw new AppError("not-found", `There is no job ${jobId}.`);
  return row;
}

/** A job with its counts and its place in the queue. */
export async function getJob(actor: Actor, jobId: string): Promise<Job> {
  return presentJob(await findJobRow(actor, jobId));
}

/** The spec of a job as JSON text, straight from the database. */
export async function getJobSpec(actor: Actor, jobId: string): Promise<{ json: string; specHash: string }> {
  const row = await findJobRow(actor, jobId);
  const [found] = await db().select({ json: sql<string>`${job.spec}::text` }).from(job).where(eq(job.id, jobId));
  return { json: found.json, specHash: row.specHash };
}
