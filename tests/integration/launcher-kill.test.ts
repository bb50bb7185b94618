/** A worker of the running product is killed in mid-job: its launcher and the lease bring everything to a right end. */
import { execFileSync } from "node:child_process";
import os from "node:os";
import path from "node:path";
import pg from "pg";
import { afterAll, beforeAll, expect, it } from "vitest";
import { clusterUrl } from "@/jobs/launcher/cluster.mjs";
import { readJson } from "@/jobs/launcher/files.mjs";
import { commandLine } from "@/jobs/launcher/processes.mjs";
import type { Job } from "@/lib/schemas/api";
import { until } from "../helpers/queue-jobs";
import { makeDataDir, removeDataDir, startProduct } from "../helpers/start-product.mjs";
import { demoPerson, PROJECT_ROOT } from "../helpers/running-server";

const dataDir = makeDataDir();
const POINTS = 3000;
let product: Awaited<ReturnType<typeof startProduct>>;
let token: string;
let database: pg.Client;

beforeAll(async () => {
  product = await startProduct({ dataDir });
  token = execFileSync("npm", ["run", "token", "--", "--email", demoPerson("modeller").email, "--scopes", "all"], {
    cwd: PROJECT_ROOT, encoding: "utf8", stdio: ["ignore", "pipe", "ignore"], env: { ...process.env, DATABASE_URL: "", TUFA_DATA_DIR: dataDir },
  }).trim();
  database = new pg.Client(clusterUrl(dataDir));
  await database.connect();
}, 420_000);
afterAll(async () => {
  await database?.end();
  await product?.stop();
  removeDataDir(dataDir);
});

const batchWorkers = (): number[] => (readJson(path.join(dataDir, "running.json"))?.children ?? []).filter((pid: number) => commandLine(pid).includes("--lane batch"));

async function call<T>(method: string, at: string, body?: unknown): Promise<T> {
  const response = await fetch(`${product.address}/api/v1${at}`, { method, headers: { authorization: `Bearer ${token}`, "content-type": "application/json" }, body: body === undefined ? undefined : JSON.stringify(body) });
  if (!response.ok) throw new Error(`${method} ${at}: ${response.status} ${await response.text()}`);
  return (await response.json()) as T;
}

it("kill -9 of the batch worker in mid-job: another takes over within the lease, and the job ends whole, no row lost or double", async () => {
  expect(batchWorkers()).toHaveLength(1);
  const [worker] = batchWorkers();
  expect(os.getPriority(worker)).toBe(10);
  const { sampleSets } = await call<{ sampleSets: { id: string }[] }>("GET", "/sample-sets?q=becks");
  const made = await call<Job>("POST", "/jobs", {
    spec: 1, title: "Becks, finely", waters: { set: sampleSets[0].id },
    cases: [{ name: "open", close: ["charge", "pCO2"], activity: "davies" }],
    vary: [{ field: "pCO2", from: "200 ppm", to: "20000 ppm", points: POINTS, scale: "log" }], report: ["pH", "ANC"],
  });
  const read = () => call<Job>("GET", `/jobs/${made.id}`);
  await until("rows under way", async () => (await read()).counts.done > 0);
  // Between two chunks nothing is held for a moment; the kill has to hit one that is.
  const holders = await until("a chunk that is held", async () => {
    const found = (await database.query("select distinct leased_by from chunk where job_id = $1 and status = 'leased'", [made.id])).rows.map((row) => row.leased_by);
    return found.length === 1 && found;
  });
  process.kill(worker, "SIGKILL");
  const killed = Date.now();
  expect((await read()).status).toBe("running");
  await until("another batch worker", async () => batchWorkers().some((pid) => pid !== worker), 3000);
  expect(Date.now() - killed).toBeLessThan(2000);
  const ofTheDead = "select count(*)::int as n from chunk where job_id = $1 and status = 'leased' and leased_by = any($2)";
  await until("no chunk with the dead", async () => (await database.query(ofTheDead, [made.id, holders])).rows[0].n === 0, 15_000 - (Date.now() - killed));
  const ended = await until("end of the job", async () => { const job = await read(); return job.status !== "running" && job; }, 90_000);
  expect(ended).toMatchObject({ status: "done", counts: { done: ended.counts.rows, ok: ended.counts.rows - ended.counts.invalid, notConverged: 0 } });
  const { rows } = await database.query("select count(*)::int as blocks, sum(row_count)::int as rows, (select count(*)::int from chunk where job_id = $1) as chunks from result_block where job_id = $1", [made.id]);
  expect(rows[0]).toEqual({ blocks: rows[0].chunks, rows: ended.counts.rows, chunks: rows[0].chunks });
}, 150_000);
