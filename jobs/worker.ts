/**
 * Worker process: `worker.mjs --lane interactive|batch --threads N`. Plans jobs of its lane from pg-boss, solves their
 * chunks in threads and stores them. Needs DATABASE_URL alone, so workers may run on any host. SIGTERM and SIGINT drain.
 */
import os from "node:os";
import { parseArgs } from "node:util";
import PgBoss from "pg-boss";
import pino from "pino";
import { closeDb, pool } from "@/db/client";
import { isDatabaseAway } from "@/db/database-error";
import { Listener } from "@/db/listener";
import { env } from "@/lib/env";
import { newId } from "@/lib/ids";
import { LANES, type Lane, type PlanJobPayload, planQueue, WORK_CHANNEL } from "./definitions/plan-job";
import { planJob } from "./handlers/plan-job";
import { ChunkRunner } from "./handlers/solve-chunks";
import { prepareQueues } from "./queue";
import { SolverPool } from "./solver-pool";

/** With the time to close connections this stays under the 10 s that a supervisor waits. */
const DRAIN_MS = 8000;
/** A planning item older than this is taken up beside pg-boss: its holder died, and pg-boss would wait for its expiry. */
const STALE_PLAN_SECONDS = 3;

function readArguments(): { lane: Lane; threads: number } {
  const { values } = parseArgs({ options: { lane: { type: "string", default: "batch" }, threads: { type: "string" } } });
  const lane = LANES.find((name) => name === values.lane);
  if (!lane) throw new Error(`--lane ${values.lane}: write ${LANES.join(" or ")}`);
  const threads = Number(values.threads ?? (lane === "interactive" ? 1 : os.availableParallelism()));
  if (!Number.isInteger(threads) || threads < 1) throw new Error(`--threads ${values.threads}: write a whole number from 1`);
  return { lane, threads };
}

const { lane, threads } = readArguments();
const workerId = newId("wrk");
const log = pino({ level: env().TUFA_LOG, base: { worker: workerId, lane, pid: process.pid } });
const warn = (message: string, details: Record<string, unknown> = {}) => log.warn(details, message);

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

/** Starts pg-boss, waiting for a database that is not up yet. */
async function startBoss(): Promise<PgBoss> {
  for (;;) {
    try {
      await prepareQueues();
      const boss = new PgBoss({
        connectionString: env().DATABASE_URL, application_name: "tufa-boss", max: 3, schedule: false, migrate: false,
        deleteAfterDays: 7, archiveCompletedAfterSeconds: 3600,
      });
      boss.on("error", (error) => warn("pg-boss", { error: String(error?.message ?? error) }));
      return await boss.start();
    } catch (error) {
      warn("waiting for the database", { error: String(error) });
      await pause(500);
    }
  }
}

async function main(): Promise<void> {
  // pg-boss completes items without awaiting it; when the database is away that rejects. The item then runs again,
  // and finds its job planned.
  process.on("unhandledRejection", (error) => warn("unhandled rejection", { error: String(error) }));
  const solver = new SolverPool(new URL("./solver-thread.mjs", import.meta.url), threads);
  const boss = await startBoss();
  const plan = (jobId: string) => planJob(jobId, (id) => solver.run({ kind: "plan", jobId: id }));
  const runner = new ChunkRunner({ lane, workerId, leaseMs: env().TUFA_LEASE_MS, threads, solver, log: warn });

  const bossWorker = await boss.work<PlanJobPayload>(planQueue(lane), { batchSize: 1, pollingIntervalSeconds: 2 }, async ([item]) => {
    await plan(item.data.jobId);
    runner.wake();
    // Without this pg-boss would sleep out its polling interval before it looks for the next item.
    boss.notifyWorker(bossWorker);
  });
  const listener = new Listener(WORK_CHANNEL, (payload) => {
    const [what, which] = payload.split(" ");
    if (what === "cancel") runner.cancel(which);
    else if (which === lane && what === "plan") boss.notifyWorker(bossWorker);
    else if (which === lane && what === "chunks") runner.wake();
  }, () => { boss.notifyWorker(bossWorker); runner.wake(); });

  const sweeper = setInterval(() => void sweepStalePlans(plan).catch((error) => {
    if (!isDatabaseAway(error)) warn("sweep failed", { error: String(error) });
  }), 2000);
  log.info({ threads }, "worker ready");

  let leaving = false;
  const leave = async (signal: string) => {
    if (leaving) return;
    leaving = true;
    log.info({ signal }, "draining");
    clearInterval(sweeper);
    const ends = Promise.all([runner.drain(DRAIN_MS), boss.stop({ graceful: false }).catch(() => {}), listener.close()]);
    await Promise.race([ends, pause(DRAIN_MS + 1000)]);
    await solver.close();
    await Promise.race([closeDb().catch(() => {}), pause(500)]);
    process.exit(0);
  };
  process.on("SIGTERM", () => void leave("SIGTERM"));
  process.on("SIGINT", () => void leave("SIGINT"));
}

/** Plans jobs whose item lies with a dead planner. The planner's advisory lock keeps this off jobs being planned. */
async function sweepStalePlans(plan: (jobId: string) => Promise<void>): Promise<void> {
  const { rows } = await pool().query(
    `select id from job where status = 'queued' and lane = $1 and created_at < now() - interval '${STALE_PLAN_SECONDS} seconds' order by created_at limit 20`, [lane]);
  for (const { id } of rows) await plan(id);
}

void main();
