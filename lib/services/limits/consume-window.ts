import { sql } from "drizzle-orm";
import { db } from "@/db/client";

export interface WindowState { count: number; secondsLeft: number }

/**
 * Counts one event in a fixed window kept in PostgreSQL, so the limit holds across processes and restarts.
 * Returns the count with this one included, and the seconds until the window ends.
 */
export async function consumeWindow(bucket: string, windowSeconds: number): Promise<WindowState> {
  const result = await db().execute<{ count: number; left: number }>(sql`
    insert into rate_window (bucket, window_start, count)
    values (${bucket}, to_timestamp(floor(extract(epoch from now()) / ${windowSeconds}::int) * ${windowSeconds}::int), 1)
    on conflict (bucket, window_start) do update set count = rate_window.count + 1
    returning count, ceil(extract(epoch from window_start) + ${windowSeconds}::int - extract(epoch from now()))::int as left`);
  const row = result.rows[0];
  return { count: Number(row.count), secondsLeft: Math.max(1, Number(row.left)) };
}

/** Forgets a bucket, after a success. Also sweeps windows of yesterday, so the table stays small. */
export async function clearWindow(bucket: string): Promise<void> {
  await db().execute(sql`delete from rate_window where bucket = ${bucket} or window_start < now() - interval '1 day'`);
}
