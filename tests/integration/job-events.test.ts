import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { db, pool } from "@/db/client";
import { requestCancel, requestRetry } from "@/jobs/queue";
import { planJob } from "@/jobs/handlers/plan-job";
import { jobEvent as eventSchema } from "@/lib/schemas/api";
import { type EventSubject, type StreamedEvent, subscribeJobEvents } from "@/lib/services/events/subscribe-job-events";
import { openQueueDatabase } from "../helpers/queue-database";
import { createUser, planOf, SPEC, solveChunks, submit, submitPlanned, until } from "../helpers/queue-jobs";

/** 20,000 rows in seven chunks. */
const LARGE = { ...SPEC, waters: 2000 };
let database: Awaited<ReturnType<typeof openQueueDatabase>>;
let user: string;
beforeAll(async () => { database = await openQueueDatabase(); });
afterAll(() => database.drop());
beforeEach(async () => { await pool().query("delete from job"); user = await createUser(); });

/** Follows a stream in the background; every event must fit the contract. */
function follow(subject: EventSubject, lastEventId: number | null = null) {
  const abort = new AbortController();
  const events: StreamedEvent[] = [];
  const times: number[] = [];
  const finished = (async () => {
    for await (const item of subscribeJobEvents(subject, lastEventId, abort.signal)) {
      eventSchema.parse(item.event);
      events.push(item);
      times.push(performance.now());
    }
  })();
  const types = () => events.map((item) => item.event.type);
  return {
    events, times, types, finished,
    seen: (type: string) => until(`${type} in ${types().join(", ")}`, async () => types().includes(type as never)),
    stop: async () => { abort.abort(); await finished; },
  };
}

describe("events of a job", () => {
  it("come as they happen, with ids that grow, and end with the job", async () => {
    const id = await submit(user, LARGE);
    const stream = follow({ jobIds: [id] });
    await stream.seen("job-queued");
    await planJob(id, async () => planOf(LARGE));
    await stream.seen("job-started");
    await solveChunks("batch", LARGE);
    await stream.finished;
    expect(stream.types()[0]).toBe("job-queued");
    expect(stream.types().at(-1)).toBe("job-done");
    const ids = stream.events.map((item) => item.id);
    expect(ids).toEqual([...new Set(ids)].sort((a, b) => a - b));
    const last = stream.events.at(-1)!.event;
    expect(last).toMatchObject({ jobId: id, status: "done", secondsLeft: 0, counts: { rows: 20_000, done: 20_000, invalid: Math.ceil(20_000 / 13), notConverged: 0, warned: Math.ceil(20_000 / 7) } });
    expect(last.rowsPerSecond).toBeGreaterThan(0);
  });

  it("begin with the latest one for who comes late, and with all since Last-Event-ID for who comes back", async () => {
    const id = await submitPlanned(user, LARGE);
    await solveChunks("batch", LARGE, 3);
    const late = follow({ jobIds: [id] });
    await late.seen("chunk-done");
    expect(late.events[0].event.counts.done).toBe(3 * 512);
    await late.stop();
    await solveChunks("batch", LARGE);
    const back = follow({ jobIds: [id] }, late.events[0].id);
    await back.finished;
    expect(back.types()).toEqual(["job-done"]);
    const first = follow({ jobIds: [id] }, 0);
    await first.finished;
    expect(first.types()).toEqual(["job-queued", "job-started", "job-done"]);
    const nothing = follow({ jobIds: [id] }, back.events[0].id);
    await nothing.finished;
    expect(nothing.events).toEqual([]);
  });

  it("hold back progress to about five a second without losing the newest", async () => {
    const id = await submitPlanned(user, LARGE);
    const stream = follow({ jobIds: [id] });
    await stream.seen("job-started");
    await solveChunks("batch", LARGE, 6);
    await until("the newest progress", async () => stream.events.at(-1)?.event.counts.done === 20_000 - 1568);
    const progress = stream.times.filter((_, index) => stream.types()[index] === "chunk-done");
    progress.slice(1).forEach((time, index) => expect(time - progress[index]).toBeGreaterThan(150));
    await stream.stop();
  });

  it("tell of cancelling and taking up again", async () => {
    const id = await submitPlanned(user, LARGE);
    const stream = follow({ jobIds: [id] });
    await stream.seen("job-started");
    await db().transaction((tx) => requestCancel(tx, id));
    await stream.finished;
    expect(stream.types()).toEqual(["job-started", "job-cancelled"]);
    await db().transaction((tx) => requestRetry(tx, id));
    const again = follow({ jobIds: [id] }, stream.events[1].id);
    await again.seen("job-started");
    await solveChunks("batch", LARGE);
    await again.finished;
    expect(again.types().at(-1)).toBe("job-done");
  });

  it("survive a lost connection: what happened meanwhile is made up for", async () => {
    const id = await submit(user, LARGE);
    const stream = follow({ jobIds: [id] });
    await stream.seen("job-queued");
    // The listener's connection goes, and the job is planned before it is back.
    await pool().query("select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and application_name = 'tufa-listen-tufa_event'");
    await planJob(id, async () => planOf(LARGE));
    await solveChunks("batch", LARGE);
    await stream.finished;
    expect(stream.types().at(-1)).toBe("job-done");
  });

  it("of an owner concern all of the owner's jobs and nobody else's", async () => {
    const other = await createUser();
    const before = await submitPlanned(user, SPEC, "batch");
    await solveChunks("batch", SPEC);
    const open = await submit(user, SPEC);
    const stream = follow({ ownerId: user });
    await stream.seen("job-queued");
    const [foreign, own] = [await submit(other, SPEC), await submit(user, SPEC)];
    await until("the new job's event", async () => stream.events.some((item) => item.event.jobId === own));
    await stream.stop();
    const jobs = new Set(stream.events.map((item) => item.event.jobId));
    expect([...jobs].sort()).toEqual([open, own].sort());
    expect(jobs.has(before) || jobs.has(foreign)).toBe(false);
  });

  it("end when the caller goes away", async () => {
    const id = await submit(user, SPEC);
    const stream = follow({ jobIds: [id] });
    await stream.seen("job-queued");
    await stream.stop();
    expect(stream.types()).toEqual(["job-queued"]);
  });
});
