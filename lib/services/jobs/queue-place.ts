import { sql } from "drizzle-orm";
import { db, type Db, type Tx } from "@/db/client";

export interface QueuePlace { rowsAhead: number; secondsEstimated: number | null }

/**
 * Where open jobs stand: rows not yet done of earlier jobs in the same lane, and seconds until the job's own last row
 * at the pace of the lane's last ten finished jobs (null while none has finished).
 */
export async function queuePlaces(jobIds: readonly string[], on: Db | Tx = db()): Promise<Map<string, QueuePlace>> {
  if (jobIds.length === 0) return new Map();
  const ids = sql.join(jobIds.map((id) => sql`${id}`), sql`, `);
  const result = await on.execute<{ id: string; own: string; ahead: string; pace: number | null }>(sql`
    select j.id, (j.row_count - j.done_count) as own,
      (select coalesce(sum(o.row_count - o.done_count), 0) from job o
        where o.lane = j.lane and o.status in ('queued', 'running') and (o.created_at, o.id) < (j.created_at, j.id)) as ahead,
      (select sum(r.row_count) / nullif(sum(extract(epoch from r.finished_at - r.started_at)), 0) from (
        select d.row_count, d.finished_at, d.started_at from job d
        where d.lane = j.lane and d.status = 'done' and d.started_at is not null
        order by d.finished_at desc limit 10) r) as pace
    from job j where j.id in (${ids}) and j.status in ('queued', 'running')`);
  return new Map(result.rows.map((row) => {
    const rowsAhead = Number(row.ahead);
    const pace = row.pace === null ? null : Number(row.pace);
    return [row.id, { rowsAhead, secondsEstimated: pace ? Math.round(((rowsAhead + Number(row.own)) / pace) * 10) / 10 : null }];
  }));
}
