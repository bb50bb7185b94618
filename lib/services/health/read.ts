import { sql } from "drizzle-orm";
import { db } from "@/db/client";
import { WORK_CHANNEL } from "@/jobs/definitions/plan-job";
import { CONSTANTS_VERSION } from "@/lib/chemistry/data";
import { ENGINE_VERSION } from "@/lib/chemistry/version";
import type { Health } from "@/lib/schemas/api";

/** State of the installation. Never throws: a database that does not answer is part of the answer. */
export async function readHealth(): Promise<Health> {
  const base = { engineVersion: ENGINE_VERSION, constantsVersion: CONSTANTS_VERSION, time: new Date().toISOString() };
  try {
    // Every worker, on whatever host, keeps one connection listening for work under this name (db/listener.ts).
    const { rows } = await db().execute<{ workers: number; waiting: string; running: number }>(sql`
      select (select count(*)::int from pg_stat_activity where datname = current_database()
          and application_name = ${`tufa-listen-${WORK_CHANNEL}`}) as workers,
        coalesce(sum(row_count - done_count), 0) as waiting, count(*) filter (where status = 'running')::int as running
      from job where status in ('queued', 'running')`);
    const workers = Number(rows[0].workers);
    return {
      ...base, status: workers > 0 ? "ok" : "degraded", database: "ok", workers,
      queue: { waitingRows: Number(rows[0].waiting), runningJobs: Number(rows[0].running) },
    };
  } catch {
    return { ...base, status: "degraded", database: "down", workers: 0, queue: null };
  }
}
