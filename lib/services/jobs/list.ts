import { and, desc, eq, or, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { job } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import type { Job, JobListQuery } from "@/lib/schemas/api";
import { decodeCursor, encodeCursor } from "../cursor";
import { presentJobs } from "./present";
import { jobColumns } from "./row";

/** Jobs the actor may see, newest first: all of the team's, or with `owner=me` one's own. */
export async function listJobs(actor: Actor, query: JobListQuery): Promise<{ jobs: Job[]; nextCursor: string | null }> {
  const bound = ["jobs", actor.userId, query.owner, query.status ?? null, query.q ?? null];
  const after = query.cursor ? decodeCursor(query.cursor, bound) : null;
  const mine = eq(job.ownerId, actor.userId);
  const visible = query.owner === "me" ? mine : actor.role === "administrator" ? undefined : or(mine, eq(job.visibility, "team"));
  const rows = await db().select(jobColumns).from(job)
    .where(and(
      visible, query.status ? eq(job.status, query.status) : undefined,
      query.q ? sql`position(lower(${query.q}) in lower(${job.title})) > 0` : undefined,
      after ? sql`(${job.createdAt}, ${job.id}) < (${after.at}::timestamptz, ${after.id})` : undefined,
    ))
    .orderBy(desc(job.createdAt), desc(job.id)).limit(query.limit + 1);
  const page = rows.slice(0, query.limit);
  const last = page.at(-1);
  return {
    jobs: await presentJobs(page),
    nextCursor: rows.length > query.limit && last ? encodeCursor({ at: last.createdAt.toISOString(), id: last.id }, bound) : null,
  };
}
