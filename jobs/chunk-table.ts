/**
 * Every statement on the chunk table. The table alone says what is done: a chunk is leased with a fence that grows at
 * each lease, and a write that carries an older fence changes nothing.
 */
import pg from "pg";
import { pool } from "@/db/client";
import type { BlockCounts } from "@/lib/results/block";
import { EVENT_CHANNEL, type Lane } from "./definitions/plan-job";

/** Thrown errors are the chunk's own doing: after this many attempts it is given up. */
export const MAX_ATTEMPTS = 3;
/** Lost leases may be the machine's doing (restarts, kills): more of them are borne before the chunk is blamed. */
export const MAX_LOST_LEASES = 8;

const CLAIM_LOCK = 7_245_802;

export interface LeasedChunk {
  jobId: string; index: number; firstRow: number; rowCount: number; fence: number; attempt: number;
}
export type ChunkKey = Pick<LeasedChunk, "jobId" | "index" | "fence">;

/** Row of a job as an event's data; `j` is the job's row after the update. */
const EVENT_DATA = `jsonb_build_object(
  'status', j.status,
  'counts', jsonb_build_object('rows', j.row_count, 'done', j.done_count, 'ok', j.ok_count, 'invalid', j.invalid_count,
    'notConverged', j.not_converged_count, 'warned', j.warning_count),
  'rowsPerSecond', round((j.done_count / greatest(extract(epoch from clock_timestamp() - j.started_at), 0.001))::numeric, 1),
  'secondsLeft', case when j.status <> 'running' then 0 when j.done_count = 0 then null else
    round(((j.row_count - j.done_count - j.failed_count) * extract(epoch from clock_timestamp() - j.started_at) / j.done_count)::numeric, 1) end)`;

/**
 * Tail of a statement whose CTE \`j\` holds updated jobs: stores an event for each and announces it. The event's id is
 * drawn after the job row was locked, so ids of one job grow with its counts.
 */
const storeEvents = (onlyEnded: boolean) => `, e as (
  insert into job_event (job_id, at, type, data)
  select j.id, clock_timestamp(), case j.status when 'running' then 'chunk-done' when 'done' then 'job-done' else 'job-failed' end, ${EVENT_DATA}
  from j ${onlyEnded ? "where j.status <> 'running'" : ""}
  returning id, job_id, at, type, data)
  select e.job_id, e.type, pg_notify('${EVENT_CHANNEL}', json_build_object('id', e.id, 'owner', j.owner_id, 'event',
    jsonb_build_object('type', e.type, 'jobId', e.job_id, 'at', to_char(e.at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) || e.data)::text)
  from e join j on j.id = e.job_id`;

/** New status of a running job once `done` and `failed` more rows are accounted for. */
const endedStatus = (done: string, failed: string) => `case
  when job.done_count + ${done} + job.failed_count + ${failed} < job.row_count then 'running'
  when job.failed_count + ${failed} > 0 then 'failed' else 'done' end`;

/**
 * Leases the next chunk of a lane, or null when there is none. Among owners whoever holds the fewest live leases goes
 * first, then whoever has waited longest; within an owner, the oldest job. Expired leases count as waiting.
 */
export async function claimChunk(lane: Lane, workerId: string, leaseMs: number): Promise<LeasedChunk | null> {
  const [laneText, workerText] = [pg.escapeLiteral(lane), pg.escapeLiteral(workerId)];
  // One simple query is one transaction and one round trip. The lock makes claims of a lane take turns, so that each
  // sees the leases before it: without it two workers would both serve the same "fewest" owner.
  const results = (await pool().query(`
    select pg_advisory_xact_lock(${CLAIM_LOCK}, ${lane === "batch" ? 1 : 0});
    with held as (
      select owner_id, count(*) as leases from chunk
      where lane = ${laneText} and status = 'leased' and lease_until >= now() group by owner_id
    ), owner as (
      select j.owner_id, coalesce(max(h.leases), 0) as leases, min(j.created_at) as since
      from job j left join held h using (owner_id)
      where j.lane = ${laneText} and j.status = 'running' group by j.owner_id
    ), next as (
      select n.job_id, n.index from owner o cross join lateral (
        select c.job_id, c.index from job j join chunk c on c.job_id = j.id
        where j.owner_id = o.owner_id and j.lane = ${laneText} and j.status = 'running'
          and c.status in ('waiting', 'leased') and (c.status = 'waiting' or c.lease_until < now()) and c.attempt < ${MAX_LOST_LEASES}
        order by j.created_at, j.id, c.index limit 1) n
      order by o.leases, o.since limit 1
    ), locked as (
      select c.job_id, c.index from chunk c join next n on n.job_id = c.job_id and n.index = c.index for update of c skip locked
    )
    update chunk c set status = 'leased', fence = c.fence + 1, attempt = c.attempt + 1, leased_by = ${workerText},
      lease_until = now() + interval '${Math.round(leaseMs)} milliseconds'
    from locked l where c.job_id = l.job_id and c.index = l.index
    returning c.job_id, c.index, c.first_row, c.row_count, c.fence, c.attempt`)) as unknown as pg.QueryResult[];
  const row = results[1].rows[0];
  if (!row) return null;
  return { jobId: row.job_id, index: row.index, firstRow: row.first_row, rowCount: row.row_count, fence: Number(row.fence), attempt: row.attempt };
}

const keyArrays = (chunks: readonly ChunkKey[]) => [chunks.map((c) => c.jobId), chunks.map((c) => c.index), chunks.map((c) => c.fence)];
const KEYS = "unnest($1::text[], $2::int[], $3::bigint[]) as k(job_id, index, fence)";
const STILL_OURS = "c.job_id = k.job_id and c.index = k.index and c.fence = k.fence and c.status = 'leased'";

/** Extends leases; returns those still held. One that is missing was cancelled or taken by another worker. */
export async function extendLeases(chunks: readonly ChunkKey[], leaseMs: number): Promise<ChunkKey[]> {
  const { rows } = await pool().query(
    `update chunk c set lease_until = now() + $4::float8 * interval '1 millisecond' from ${KEYS} where ${STILL_OURS} returning c.job_id, c.index, c.fence`,
    [...keyArrays(chunks), leaseMs]);
  return rows.map((row) => ({ jobId: row.job_id, index: row.index, fence: Number(row.fence) }));
}

/** Gives leases back unused: the attempt does not count. */
export async function releaseChunks(chunks: readonly ChunkKey[]): Promise<void> {
  await pool().query(
    `update chunk c set status = 'waiting', attempt = greatest(c.attempt - 1, 0), lease_until = null, leased_by = null from ${KEYS} where ${STILL_OURS}`,
    keyArrays(chunks));
}

/**
 * Stores a finished chunk: block, chunk state, job counts, event and announcement in one transaction. Returns false,
 * and changes nothing, when the fence is stale. A second write of the same chunk replaces equal bytes by equal bytes.
 */
export async function storeChunk(chunk: LeasedChunk, bytes: Uint8Array, counts: BlockCounts): Promise<boolean> {
  const { rows } = await pool().query({
    name: "store-chunk",
    text: `with c as (
      update chunk c set status = 'done', lease_until = null, leased_by = null, error = null
      where c.job_id = $1 and c.index = $2 and c.fence = $3 and c.status = 'leased' returning job_id, index, row_count
    ), b as (
      insert into result_block (job_id, index, row_count, bytes) select job_id, index, row_count, $4::bytea from c
      on conflict (job_id, index) do update set row_count = excluded.row_count, bytes = excluded.bytes
    ), j as (
      update job set done_count = done_count + c.row_count, ok_count = ok_count + $5::int, not_converged_count = not_converged_count + $6::int,
        invalid_count = invalid_count + $7::int, warning_count = warning_count + $8::int, status = ${endedStatus("c.row_count", "0")},
        finished_at = case when ${endedStatus("c.row_count", "0")} = 'running' then null else clock_timestamp() end
      from c where job.id = c.job_id and job.status = 'running' returning job.*
    )${storeEvents(false)}`,
    values: [chunk.jobId, chunk.index, chunk.fence, Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length), counts.ok, counts.notConverged, counts.invalid, counts.warned],
  });
  return rows.length > 0;
}

/** Notes a thrown error: the chunk waits for another attempt, or has failed after the third, and its job with it in the end. */
export async function failAttempt(chunk: LeasedChunk, reason: string): Promise<void> {
  if (chunk.attempt < MAX_ATTEMPTS) {
    await pool().query(
      `update chunk c set status = 'waiting', error = $4, lease_until = null, leased_by = null
       where c.job_id = $1 and c.index = $2 and c.fence = $3 and c.status = 'leased'`,
      [chunk.jobId, chunk.index, chunk.fence, reason]);
    return;
  }
  await giveUp("c.job_id = $2 and c.index = $3 and c.fence = $4 and c.status = 'leased'", reason, [chunk.jobId, chunk.index, chunk.fence]);
}

/** Gives up chunks of a lane whose workers died over them again and again. */
export async function failLostChunks(lane: Lane): Promise<void> {
  await giveUp(
    `c.lane = $2 and c.status = 'leased' and c.lease_until < now() and c.attempt >= ${MAX_LOST_LEASES}`,
    `the worker stopped answering over these rows ${MAX_LOST_LEASES} times`, [lane]);
}

/** `which` is SQL over `chunk c` with parameters from $2 on. */
async function giveUp(which: string, reason: string, values: unknown[]): Promise<void> {
  await pool().query(`with c as (
      update chunk c set status = 'failed', fence = c.fence + 1, error = $1::text, lease_until = null, leased_by = null
      where ${which} returning job_id, first_row, row_count
    ), s as (
      select job_id, sum(row_count)::int as rows, min(first_row) as first, max(first_row + row_count) - 1 as last from c group by job_id
    ), j as (
      update job set failed_count = failed_count + s.rows, status = ${endedStatus("0", "s.rows")},
        error = coalesce(error, 'rows ' || s.first || ' to ' || s.last || ' could not be solved: ' || $1::text),
        finished_at = case when ${endedStatus("0", "s.rows")} = 'running' then null else clock_timestamp() end
      from s where job.id = s.job_id and job.status = 'running' returning job.*
    )${storeEvents(true)}`, [reason, ...values]);
}
