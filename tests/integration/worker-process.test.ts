import type { ChildProcess } from "node:child_process";
import { createHash } from "node:crypto";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { db, pool } from "@/db/client";
import { requestCancel } from "@/jobs/queue";
import { encodeBlock } from "@/lib/results/block";
import { planChunks } from "@/lib/results/chunk-plan";
import { openQueueDatabase } from "../helpers/queue-database";
import { createUser, readJob, rowsOf, submit, until } from "../helpers/queue-jobs";
import { openWorkerBench, type WorkerBench } from "../helpers/queue-workers";
import { standInJob, type StandInSpec } from "../helpers/stand-in/compile-stored-job";

const LEASE_MS = 1000;
/** 60,000 rows in 12 chunks; about 0.25 s for a large one. */
const LARGE: StandInSpec = { waters: 600, cases: 2, axes: [50], valueColumns: 4, microsecondsPerRow: 30 };
const SMALL: StandInSpec = { waters: 2, cases: 1, axes: [], valueColumns: 4 };

let database: Awaited<ReturnType<typeof openQueueDatabase>>;
let bench: WorkerBench;
let user: string;
const workers: ChildProcess[] = [];

beforeAll(async () => {
  database = await openQueueDatabase();
  bench = await openWorkerBench(database.url, LEASE_MS);
  user = await createUser();
});
afterEach(async () => { await Promise.all(workers.splice(0).map((worker) => bench.end(worker, "SIGKILL"))); });
afterAll(async () => {
  await bench.close();
  await database.drop();
});

const start = async (lane: "interactive" | "batch", threads = 1) => {
  const worker = await bench.start(lane, threads);
  workers.push(worker);
  return worker;
};
const ended = (id: string) => until(`end of ${id}`, async () => {
  const row = await readJob(id);
  return row.status !== "queued" && row.status !== "running" && row;
}, 40_000);
const rowsDone = (id: string, least: number) => until(`${least} rows of ${id}`, async () => (await readJob(id)).doneCount >= least);
const storedHashes = async (id: string) =>
  (await pool().query<{ hash: string }>("select encode(sha256(bytes), 'hex') as hash from result_block where job_id = $1 order by index", [id])).rows.map((row) => row.hash);

/** Hashes of the blocks as one undisturbed run makes them. */
function expectedHashes(spec: StandInSpec): string[] {
  const job = standInJob({ ...spec, microsecondsPerRow: 0 });
  return planChunks(rowsOf(spec), spec.valueColumns).map((chunk) =>
    createHash("sha256").update(encodeBlock(job.solve(chunk.firstRow, chunk.firstRow + chunk.rowCount)).bytes).digest("hex"));
}

describe("worker processes", () => {
  it("carry a job from its planning item to its last row", async () => {
    await start("interactive");
    const id = await submit(user, SMALL);
    expect(await ended(id)).toMatchObject({ status: "done", doneCount: 2, okCount: 1, invalidCount: 1 });
    expect(await storedHashes(id)).toEqual(expectedHashes(SMALL));
    const items = await until("completed planning item", async () => {
      const { rows } = await pool().query("select state from pgboss.job where name = 'plan-interactive' and data->>'jobId' = $1 and state = 'completed'", [id]);
      return rows.length > 0 && rows;
    });
    expect(items).toHaveLength(1);
  });

  it("killed with SIGKILL in mid-job, five times at random, leave the same bytes, no row lost or double", async () => {
    let worker = await start("batch", 2);
    const id = await submit(user, LARGE);
    const hashes = expectedHashes(LARGE);
    let seed = 20261014;
    for (let kill = 1; kill <= 5; kill++) {
      seed = (Math.imul(seed, 1103515245) + 12345) >>> 0;
      await rowsDone(id, Math.min(50_000, kill * 8000 + (seed % 4000)));
      await bench.end(worker, "SIGKILL");
      worker = await start("batch", 2);
    }
    expect(await ended(id)).toMatchObject({ status: "done", doneCount: 60_000, failedCount: 0, invalidCount: Math.ceil(60_000 / 13), warningCount: Math.ceil(60_000 / 7) });
    expect(await storedHashes(id)).toEqual(hashes);
  }, 90_000);

  it("take up chunks of a worker that was killed within 15 s", async () => {
    const [first] = [await start("batch", 2)];
    const id = await submit(user, LARGE);
    await rowsDone(id, 1000);
    await bench.end(first, "SIGKILL");
    const killed = Date.now();
    await start("batch", 2);
    const held = await until("no lease of the killed worker", async () => {
      const { rows } = await pool().query("select count(*)::int as n from chunk where job_id = $1 and status = 'leased' and lease_until < now()", [id]);
      const row = await readJob(id);
      return rows[0].n === 0 && row.status === "done" && row;
    }, 40_000);
    expect(held.doneCount).toBe(60_000);
    expect(Date.now() - killed).toBeLessThan(15_000);
  }, 60_000);

  it("stop a cancelled job within 2 s, keep its finished rows and go on with others", async () => {
    await start("batch", 2);
    const id = await submit(user, { ...LARGE, microsecondsPerRow: 200 });
    await rowsDone(id, 512);
    const asked = Date.now();
    await db().transaction((tx) => requestCancel(tx, id));
    const row = await readJob(id);
    expect(row.status).toBe("cancelled");
    const next = await submit(user, { ...SMALL, waters: 3000 });
    expect((await ended(next)).status).toBe("done");
    expect(Date.now() - asked).toBeLessThan(2000);
    expect(await readJob(id)).toMatchObject({ status: "cancelled", doneCount: row.doneCount });
    expect((await storedHashes(id)).length).toBeGreaterThan(0);
  });

  it("fail a job whose rows cannot be solved and complete its other chunks", async () => {
    await start("batch", 1);
    const id = await submit(user, { ...SMALL, waters: 5000, poisonRow: 700 });
    const row = await ended(id);
    expect(row).toMatchObject({ status: "failed", doneCount: 5000 - 512, failedCount: 512, error: "rows 512 to 1023 could not be solved: row 700 is poison" });
    const bad = await submit(user, { ...SMALL, waters: 5000, compileError: "no such solid" });
    expect(await ended(bad)).toMatchObject({ status: "failed", error: "The job could not be planned: no such solid" });
  });

  it("answer SIGTERM within 10 s, finish the chunk in hand and leave the rest to others", async () => {
    const worker = await start("batch", 1);
    const id = await submit(user, LARGE);
    await rowsDone(id, 512);
    const asked = Date.now();
    expect(await bench.end(worker, "SIGTERM")).toBe(0);
    expect(Date.now() - asked).toBeLessThan(10_000);
    const { rows } = await pool().query("select count(*)::int as n from chunk where job_id = $1 and status = 'leased'", [id]);
    expect(rows[0].n).toBe(0);
    await start("batch", 2);
    expect(await ended(id)).toMatchObject({ status: "done", doneCount: 60_000 });
    expect(await storedHashes(id)).toEqual(expectedHashes(LARGE));
  }, 60_000);

  it("survive the loss of every database connection in mid-job, without crash, and store the same bytes", async () => {
    const worker = await start("batch", 2);
    const id = await submit(user, LARGE);
    for (const least of [1000, 20_000, 40_000]) {
      await rowsDone(id, least);
      await pool().query("select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and pid <> pg_backend_pid()");
    }
    expect(await ended(id)).toMatchObject({ status: "done", doneCount: 60_000, failedCount: 0 });
    expect(await storedHashes(id)).toEqual(expectedHashes(LARGE));
    expect(worker.exitCode).toBeNull();
    const next = await submit(user, { ...SMALL, waters: 3000 });
    expect((await ended(next)).status).toBe("done");
  }, 60_000);

  it("plan a job whose planner died, without waiting for pg-boss to notice", async () => {
    const id = await submit(user, { ...SMALL, waters: 3000 });
    await pool().query("update pgboss.job set state = 'active', started_on = now() where data->>'jobId' = $1", [id]);
    const submitted = Date.now();
    await start("batch", 1);
    expect((await ended(id)).status).toBe("done");
    expect(Date.now() - submitted).toBeLessThan(15_000);
  });

  it("answer a single row of one user while another's large job runs", async () => {
    await Promise.all([start("batch", 2), start("interactive")]);
    const other = await createUser();
    const large = await submit(other, { ...LARGE, waters: 6000 });
    await rowsDone(large, 512);
    const times: number[] = [];
    for (let round = 0; round < 10; round++) {
      const asked = performance.now();
      const id = await submit(user, SMALL);
      expect((await ended(id)).status).toBe("done");
      times.push(performance.now() - asked);
    }
    expect((await readJob(large)).status).toBe("running");
    // Generous for a shared machine: the wait would be tens of seconds if small jobs stood behind the large one.
    expect(times.sort((a, b) => a - b)[8]).toBeLessThan(2000);
    await db().transaction((tx) => requestCancel(tx, large));
  });
});
