import { sql } from "drizzle-orm";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { db, pool } from "@/db/client";
import { claimChunk, extendLeases, failAttempt, failLostChunks, type LeasedChunk, MAX_ATTEMPTS, MAX_LOST_LEASES, releaseChunks } from "@/jobs/chunk-table";
import { planJob } from "@/jobs/handlers/plan-job";
import { enqueueJob, requestCancel, requestRetry } from "@/jobs/queue";
import { SolverError } from "@/jobs/solver-pool";
import { openQueueDatabase } from "../helpers/queue-database";
import { createUser, LEASE_MS, planOf, readJob, SPEC, solveChunks, store, submit, submitPlanned } from "../helpers/queue-jobs";

let database: Awaited<ReturnType<typeof openQueueDatabase>>;
let ada: string;
let ben: string;
/** 20,000 rows: four chunks of 512, two of 8,192, one of 1,568. */
const LARGE = { ...SPEC, waters: 2000 };
const LARGE_CHUNKS = 7;

beforeAll(async () => { database = await openQueueDatabase(); });
afterAll(() => database.drop());
beforeEach(async () => {
  await pool().query("delete from job");
  await pool().query("delete from pgboss.job");
  [ada, ben] = [await createUser(), await createUser()];
});

const claim = (worker = "wrk_a", leaseMs = LEASE_MS) => claimChunk("batch", worker, leaseMs);
const claimed = async (worker?: string, leaseMs?: number): Promise<LeasedChunk> => {
  const chunk = await claim(worker, leaseMs);
  if (!chunk) throw new Error("no chunk to claim");
  return chunk;
};
const cancel = (id: string) => db().transaction((tx) => requestCancel(tx, id));
const retry = (id: string) => db().transaction((tx) => requestRetry(tx, id));
/** Lets a lease run out without waiting for it. */
const expire = ({ jobId, index }: LeasedChunk) =>
  pool().query("update chunk set lease_until = now() - interval '1 second' where job_id = $1 and index = $2", [jobId, index]);
const planningItems = async () => (await pool().query("select name, data from pgboss.job where name like 'plan-%'")).rows;
const eventTypes = async (id: string) => (await pool().query("select type from job_event where job_id = $1 order by id", [id])).rows.map((row) => row.type);
const chunkStates = async (id: string) => (await pool().query("select status from chunk where job_id = $1 order by index", [id])).rows.map((row) => row.status);

describe("submitting", () => {
  it("leaves neither job nor planning item when the transaction rolls back, and one of each when it commits", async () => {
    const id = await submit(ada, SPEC);
    expect(await planningItems()).toEqual([{ name: "plan-interactive", data: { jobId: id } }]);
    await expect(db().transaction(async (tx) => {
      await tx.execute(sql`update job set title = 'changed' where id = ${id}`);
      await enqueueJob(tx, id);
      throw new Error("the request failed later");
    })).rejects.toThrow("failed later");
    expect(await planningItems()).toHaveLength(1);
    expect((await readJob(id)).title).toBe("Beck round");
  });
});

describe("planning", () => {
  it("stores columns, chunks and water ids and sets the job running, once however often it runs", async () => {
    const id = await submit(ada, LARGE);
    await Promise.all([planJob(id, async () => planOf(LARGE)), planJob(id, async () => planOf(LARGE))]);
    await planJob(id, async () => planOf(LARGE));
    const row = await readJob(id);
    expect(row).toMatchObject({ status: "running", chunkCount: LARGE_CHUNKS, rowCount: 20_000, caseNames: ["case a", "case b"] });
    expect(row.columns?.map((column) => column.name)).toEqual(["water", "case", "axis0", "status", "message", "warnings", "iterations", "residual", "pH", "conc:Ca^2+", "v2"]);
    expect((await pool().query("select sum(jsonb_array_length(ids))::int as n from job_water where job_id = $1", [id])).rows[0].n).toBe(2000);
    expect(await eventTypes(id)).toEqual(["job-queued", "job-started"]);
  });

  it("ends a job that cannot be compiled as failed, with the reason", async () => {
    const id = await submit(ada, SPEC);
    await planJob(id, async () => { throw new Error("facts contradict"); });
    expect(await readJob(id)).toMatchObject({ status: "failed", error: "The job could not be planned: facts contradict" });
    expect(await eventTypes(id)).toEqual(["job-queued", "job-failed"]);
  });

  it("leaves the job queued for another try when the database was away", async () => {
    const id = await submit(ada, SPEC);
    await expect(planJob(id, async () => { throw new SolverError("terminating connection", true); })).rejects.toThrow("terminating");
    expect((await readJob(id)).status).toBe("queued");
  });

  it("leaves nothing behind when the job is cancelled meanwhile", async () => {
    const id = await submit(ada, LARGE);
    await planJob(id, async () => { await cancel(id); return planOf(LARGE); });
    expect(await readJob(id)).toMatchObject({ status: "cancelled", chunkCount: 0 });
    expect(await chunkStates(id)).toEqual([]);
  });
});

describe("leases", () => {
  it("hand out each chunk once, in order, until none is left", async () => {
    await submitPlanned(ada, LARGE);
    const chunks = await Promise.all(Array.from({ length: LARGE_CHUNKS }, () => claimed()));
    expect(chunks.map((chunk) => chunk.index).sort()).toEqual([0, 1, 2, 3, 4, 5, 6]);
    expect(await claim()).toBeNull();
  });

  it("that ran out are taken up again, and the first holder's write is refused", async () => {
    const id = await submitPlanned(ada, LARGE);
    const lost = await claimed("wrk_a");
    await expire(lost);
    const again = await claimed("wrk_b");
    expect(again).toMatchObject({ index: lost.index, fence: lost.fence + 1, attempt: 2 });
    expect(await extendLeases([lost], LEASE_MS)).toEqual([]);
    expect(await store(lost, LARGE)).toBe(false);
    expect((await readJob(id)).doneCount).toBe(0);
    expect(await store(again, LARGE)).toBe(true);
    expect(await store(lost, LARGE)).toBe(false);
    expect(await store(again, LARGE)).toBe(false);
    expect((await readJob(id)).doneCount).toBe(512);
  });

  it("are not taken up while their heartbeat goes on", async () => {
    await submitPlanned(ada, SPEC, "batch");
    const chunk = await claimed();
    await expire(chunk);
    expect(await extendLeases([chunk], LEASE_MS)).toHaveLength(1);
    expect(await claim("wrk_b")).toBeNull();
  });

  it("given back do not count as attempts", async () => {
    await submitPlanned(ada, SPEC, "batch");
    await releaseChunks([await claimed()]);
    expect((await claimed()).attempt).toBe(1);
  });

  it("go first to whoever holds fewest, and all to one who is alone", async () => {
    const first = await submitPlanned(ada, LARGE);
    expect((await claimed()).jobId).toBe(first);
    expect((await claimed()).jobId).toBe(first);
    const second = await submitPlanned(ben, LARGE);
    const next = [await claimed(), await claimed(), await claimed(), await claimed()].map((chunk) => chunk.jobId);
    expect(next.slice(0, 2)).toEqual([second, second]);
    expect([...next.slice(2)].sort()).toEqual([first, second].sort());
  });
});

describe("storing", () => {
  it("counts rows by status and ends the job with its last chunk", async () => {
    const id = await submitPlanned(ada, LARGE);
    expect(await solveChunks("batch", LARGE)).toBe(LARGE_CHUNKS);
    const row = await readJob(id);
    expect(row).toMatchObject({ status: "done", doneCount: 20_000, failedCount: 0, invalidCount: Math.ceil(20_000 / 13), notConvergedCount: 0, warningCount: Math.ceil(20_000 / 7) });
    expect(row.okCount + row.invalidCount).toBe(20_000);
    expect(row.finishedAt).not.toBeNull();
    expect(await eventTypes(id)).toEqual(["job-queued", "job-started", ...Array.from({ length: LARGE_CHUNKS - 1 }, () => "chunk-done"), "job-done"]);
  });

  it("ends the job once when its chunks are stored at the same time", async () => {
    const id = await submitPlanned(ada, LARGE);
    const chunks = await Promise.all(Array.from({ length: LARGE_CHUNKS }, () => claimed()));
    expect(await Promise.all(chunks.map((chunk) => store(chunk, LARGE)))).toEqual(chunks.map(() => true));
    expect(await readJob(id)).toMatchObject({ status: "done", doneCount: 20_000 });
    expect((await eventTypes(id)).filter((type) => type === "job-done")).toHaveLength(1);
  });
});

describe("a chunk that cannot be solved", () => {
  it("fails after three attempts, and its job once the others are complete, with the reason", async () => {
    const id = await submitPlanned(ada, LARGE);
    for (let attempt = 1; attempt <= MAX_ATTEMPTS; attempt++) {
      const chunk = await claimed();
      expect(chunk).toMatchObject({ index: 0, attempt });
      await failAttempt(chunk, "row 3 is poison");
    }
    expect(await readJob(id)).toMatchObject({ status: "running", failedCount: 512 });
    expect(await solveChunks("batch", LARGE)).toBe(LARGE_CHUNKS - 1);
    expect(await chunkStates(id)).toEqual(["failed", ...Array.from({ length: LARGE_CHUNKS - 1 }, () => "done")]);
    expect(await readJob(id)).toMatchObject({
      status: "failed", doneCount: 20_000 - 512, failedCount: 512, error: "rows 0 to 511 could not be solved: row 3 is poison",
    });
    expect((await eventTypes(id)).at(-1)).toBe("job-failed");
  });

  it("ends the job as failed also when it is the last", async () => {
    const id = await submitPlanned(ada, SPEC, "batch");
    for (let attempt = 1; attempt <= MAX_ATTEMPTS; attempt++) await failAttempt(await claimed(), "out of memory");
    expect(await readJob(id)).toMatchObject({ status: "failed", doneCount: 0, failedCount: 100 });
    expect(await eventTypes(id)).toEqual(["job-queued", "job-started", "job-failed"]);
  });

  it("is given up when its workers died over it again and again, and is not claimed any more", async () => {
    const id = await submitPlanned(ada, SPEC, "batch");
    for (let lost = 1; lost <= MAX_LOST_LEASES; lost++) await expire(await claimed());
    expect(await claim()).toBeNull();
    await failLostChunks("batch");
    const row = await readJob(id);
    expect(row.status).toBe("failed");
    expect(row.error).toContain("stopped answering");
  });

  it("does not fail by the word of a worker whose lease was taken over", async () => {
    const id = await submitPlanned(ada, SPEC, "batch");
    const lost = { ...(await claimed()), attempt: MAX_ATTEMPTS };
    await expire(lost);
    const again = await claimed("wrk_b");
    await failAttempt(lost, "late");
    expect(await store(again, SPEC)).toBe(true);
    expect((await readJob(id)).status).toBe("done");
  });
});

describe("cancelling", () => {
  it("keeps finished rows, refuses chunks under way and leaves nothing to claim", async () => {
    const id = await submitPlanned(ada, LARGE);
    await solveChunks("batch", LARGE, 2);
    const underWay = await claimed();
    expect(await cancel(id)).toBe(true);
    expect(await store(underWay, LARGE)).toBe(false);
    expect(await extendLeases([underWay], LEASE_MS)).toEqual([]);
    expect(await claim()).toBeNull();
    expect(await readJob(id)).toMatchObject({ status: "cancelled", doneCount: 1024 });
    expect(await chunkStates(id)).toEqual(["done", "done", ...Array.from({ length: LARGE_CHUNKS - 2 }, () => "cancelled")]);
    expect((await eventTypes(id)).at(-1)).toBe("job-cancelled");
  });

  it("says when there is nothing to cancel", async () => {
    const id = await submitPlanned(ada, SPEC, "batch");
    await solveChunks("batch", SPEC);
    expect(await cancel(id)).toBe(false);
    expect((await readJob(id)).status).toBe("done");
  });

  it("and storing at once neither deadlock nor lose a row", async () => {
    for (let round = 0; round < 10; round++) {
      const id = await submitPlanned(ada, LARGE);
      const chunks = await Promise.all([claimed(), claimed(), claimed(), claimed()]);
      const [, ...stored] = await Promise.all([cancel(id), ...chunks.map((chunk) => store(chunk, LARGE))]);
      const row = await readJob(id);
      expect(row.status).toBe("cancelled");
      expect(row.doneCount).toBe(512 * stored.filter(Boolean).length);
      expect((await chunkStates(id)).filter((state) => state === "done")).toHaveLength(stored.filter(Boolean).length);
    }
  });
});

describe("taking up again", () => {
  it("finishes what was cancelled and keeps what was done", async () => {
    const id = await submitPlanned(ada, LARGE);
    await solveChunks("batch", LARGE, 2);
    await cancel(id);
    expect(await retry(id)).toBe(true);
    expect(await solveChunks("batch", LARGE)).toBe(LARGE_CHUNKS - 2);
    expect(await readJob(id)).toMatchObject({ status: "done", doneCount: 20_000, error: null, cancelRequestedAt: null });
  });

  it("queues a job again that was never planned", async () => {
    const id = await submit(ada, SPEC);
    await cancel(id);
    expect(await retry(id)).toBe(true);
    expect(await planningItems()).toHaveLength(2);
    await planJob(id, async () => planOf(SPEC));
    expect((await readJob(id)).status).toBe("running");
  });

  it("gives failed rows another three attempts", async () => {
    const id = await submitPlanned(ada, SPEC, "batch");
    for (let attempt = 1; attempt <= MAX_ATTEMPTS; attempt++) await failAttempt(await claimed(), "out of memory");
    expect(await retry(id)).toBe(true);
    expect(await solveChunks("batch", SPEC)).toBe(1);
    expect(await readJob(id)).toMatchObject({ status: "done", failedCount: 0, error: null });
    expect(await retry(id)).toBe(false);
  });
});
