/**
 * How work gets onto the queue and off it: always inside the caller's transaction, so that no job exists without its
 * planning item and no item without its job. Wake-ups ride on the same commit.
 */
import { sql } from "drizzle-orm";
import PgBoss from "pg-boss";
import { db, pool, type Tx } from "@/db/client";
import { job, jobEvent } from "@/db/schema";
import { jobColumns, type JobRow } from "@/lib/services/jobs/row";
import { EVENT_CHANNEL, LANES, PLAN_QUEUE_OPTIONS, type Lane, planQueue, WORK_CHANNEL } from "./definitions/plan-job";

export { INTERACTIVE_ROWS, laneFor, type Lane } from "./definitions/plan-job";

const held = globalThis as { tufaBoss?: Promise<PgBoss> };

/** Serialises installation between processes that start together. */
const PREPARE_LOCK = 7_245_801;

/**
 * Installs pg-boss's schema and both planning queues where they are missing. Safe to call often and from several
 * processes at once; `send` to a queue that was never created would silently return null.
 */
export async function prepareQueues(): Promise<void> {
  const client = await pool().connect();
  try {
    await client.query("select pg_advisory_lock($1)", [PREPARE_LOCK]);
    const boss = new PgBoss({ db: { executeSql: (text, values) => client.query(text, values) }, supervise: false, schedule: false });
    boss.on("error", () => {});
    await boss.start();
    for (const lane of LANES) {
      const name = planQueue(lane);
      if (await boss.getQueue(name)) continue;
      await boss.createQueue(name, { name, policy: "standard", ...PLAN_QUEUE_OPTIONS });
    }
  } finally {
    await client.query("select pg_advisory_unlock($1)", [PREPARE_LOCK]).catch(() => {});
    client.release();
  }
}

/** A pg-boss that only sends, over the process's pool. */
function sender(): Promise<PgBoss> {
  held.tufaBoss ??= (async () => {
    await prepareQueues();
    const boss = new PgBoss({ db: { executeSql: (text, values) => pool().query(text, values) }, supervise: false, schedule: false, migrate: false });
    boss.on("error", () => {});
    return boss.start();
  })();
  // A failed preparation (database away) must not be remembered as the answer.
  held.tufaBoss.catch(() => { held.tufaBoss = undefined; });
  return held.tufaBoss;
}

/** Makes the sender ready before a transaction takes its connection: preparing it inside could wait for the pool forever. */
export const openQueue = async (): Promise<void> => { await sender(); };

/** pg-boss's statements inside a Drizzle transaction: `$n` becomes a parameter of Drizzle's. */
function inside(tx: Tx): PgBoss.Db {
  return {
    executeSql: (text, values) => tx.execute(sql.join(
      text.split(/\$(\d+)/).map((part, index) => (index % 2 ? sql`${sql.param(values[Number(part) - 1])}` : sql.raw(part))),
    )),
  };
}

const notifyWork = (tx: Tx, payload: string) => tx.execute(sql`select pg_notify(${WORK_CHANNEL}, ${payload})`);

/** Counts of a job row as they stand in events and API bodies. */
function countsOf(row: JobRow) {
  return {
    rows: row.rowCount, done: row.doneCount, ok: row.okCount, invalid: row.invalidCount,
    notConverged: row.notConvergedCount, warned: row.warningCount,
  };
}

type EventType = (typeof jobEvent.$inferInsert)["type"];

/** Stores an event of a job inside the transaction and announces it at commit. */
export async function storeEvent(tx: Tx, row: JobRow, type: EventType): Promise<void> {
  const data = { status: row.status, counts: countsOf(row), rowsPerSecond: null, secondsLeft: null };
  const [event] = await tx.insert(jobEvent).values({ jobId: row.id, type, data }).returning({ id: jobEvent.id, at: jobEvent.at });
  const payload = JSON.stringify({ id: event.id, owner: row.ownerId, event: { type, jobId: row.id, at: event.at.toISOString(), ...data } });
  await tx.execute(sql`select pg_notify(${EVENT_CHANNEL}, ${payload})`);
}

/**
 * Puts a job that `tx` has just inserted (status queued) on its lane's planning queue, stores the job-queued event and
 * wakes the workers when `tx` commits.
 */
export async function enqueueJob(tx: Tx, jobId: string): Promise<void> {
  const boss = await sender();
  const [row] = await tx.select(jobColumns).from(job).where(sql`${job.id} = ${jobId}`);
  if (!row) throw new Error(`enqueueJob: no job ${jobId} in this transaction`);
  await send(tx, boss, row.lane, jobId);
  await storeEvent(tx, row, "job-queued");
}

async function send(tx: Tx, boss: PgBoss, lane: Lane, jobId: string): Promise<void> {
  const queued = await boss.send(planQueue(lane), { jobId }, { db: inside(tx) });
  if (!queued) throw new Error(`pg-boss did not take the planning item of ${jobId}: queue ${planQueue(lane)} is missing`);
  await notifyWork(tx, `plan ${lane}`);
}

/**
 * Cancels a queued or running job at once: waiting chunks are never taken, a chunk under way loses its fence, so its
 * write is refused; rows stored so far stay readable. Returns false when the job had ended already.
 */
export async function requestCancel(tx: Tx, jobId: string): Promise<boolean> {
  // Chunks before the job, the order in which a chunk's write locks them.
  const stopChunks = () => tx.execute(sql`
    update chunk set status = 'cancelled', fence = fence + 1, lease_until = null, leased_by = null
    where job_id = ${jobId} and status in ('waiting', 'leased')`);
  await stopChunks();
  const [row] = await tx.update(job)
    .set({ status: "cancelled", cancelRequestedAt: sql`now()`, finishedAt: sql`now()` })
    .where(sql`${job.id} = ${jobId} and ${job.status} in ('queued', 'running')`).returning(jobColumns);
  if (!row) return false;
  // Once more: planning may have inserted chunks while the update waited for its lock on the job.
  await stopChunks();
  await storeEvent(tx, row, "job-cancelled");
  await notifyWork(tx, `cancel ${jobId}`);
  return true;
}

/**
 * Takes up a failed or cancelled job again where it stopped: its unfinished chunks wait anew, finished ones are kept.
 * Returns false when there is nothing to take up.
 */
export async function requestRetry(tx: Tx, jobId: string): Promise<boolean> {
  const boss = await sender();
  await tx.execute(sql`
    update chunk set status = 'waiting', attempt = 0, fence = fence + 1, error = null, lease_until = null, leased_by = null
    where job_id = ${jobId} and status in ('failed', 'cancelled')
      and exists (select from job where id = ${jobId} and status in ('failed', 'cancelled'))`);
  const [row] = await tx.update(job)
    .set({
      status: sql`case when ${job.chunkCount} = 0 then 'queued' else 'running' end`,
      error: null, finishedAt: null, cancelRequestedAt: null, failedCount: 0,
    })
    .where(sql`${job.id} = ${jobId} and ${job.status} in ('failed', 'cancelled')`).returning(jobColumns);
  if (!row) return false;
  if (row.status === "queued") await send(tx, boss, row.lane, jobId);
  await storeEvent(tx, row, row.status === "queued" ? "job-queued" : "job-started");
  await notifyWork(tx, `chunks ${row.lane}`);
  return true;
}

/** Convenience for commands and tests: the verbs above in a transaction of their own. */
export const inTransaction = <T>(body: (tx: Tx) => Promise<T>): Promise<T> => db().transaction(body);
