import { sql } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import { ROLE_LIMITS } from "../access";

/**
 * Back-pressure: rows of a person's jobs that wait or run stay under the role's limit. Holds a lock until the
 * transaction ends, so that submissions at once cannot each find the same room. Throws `backlog-full` with Retry-After.
 */
export async function requireBacklogRoom(tx: Tx, actor: Actor, rows: number): Promise<void> {
  const limit = ROLE_LIMITS[actor.role].backlogRows;
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`backlog ${actor.userId}`}, 0))`);
  const result = await tx.execute<{ open: string }>(sql`
    select coalesce(sum(row_count - done_count), 0) as open from job
    where owner_id = ${actor.userId} and status in ('queued', 'running')`);
  const open = Number(result.rows[0].open);
  if (open + rows <= limit) return;
  throw new AppError(
    "backlog-full",
    `Your jobs have ${open} rows waiting; with these ${rows} they would pass ${limit}. Wait for one to finish, or cancel one.`,
    { headers: { "Retry-After": "30", "RateLimit": `"rows";r=${Math.max(0, limit - open)};t=30`, "RateLimit-Policy": `"rows";q=${limit}` } },
  );
}
