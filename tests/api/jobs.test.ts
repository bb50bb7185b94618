import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { closeDb, db, pool } from "@/db/client";
import { chunk, idempotencyKey, job, jobEvent } from "@/db/schema";
import type { Job, JobDryRun, Problem } from "@/lib/schemas/api";
import { log } from "@/lib/http/log";
import { ROLE_LIMITS } from "@/lib/services/access";
import { closeEventHub } from "@/lib/services/events/subscribe-job-events";
import { preferredWait } from "@/lib/services/jobs/wait";
import { api, jsonOf, makePerson, type Person, sampleSpec } from "./support";

let modeller: Person;
let analyst: Person;
let token: string;
let analystToken: string;
beforeAll(async () => {
  [modeller, analyst] = await Promise.all([makePerson("modeller"), makePerson("analyst")]);
  [token, analystToken] = await Promise.all([modeller.token(), analyst.token()]);
});
afterAll(async () => {
  await closeEventHub();
  await closeDb();
});

const submit = (body: unknown, headers: Record<string, string> = {}, as = token, query = "") => api("POST", `/jobs${query}`, { token: as, body, headers });
const submitted = async (body: unknown = sampleSpec(), as = token, query = ""): Promise<Job> => jsonOf<Job>(await submit(body, {}, as, query), 201);
const planItems = async (jobId: string): Promise<number> =>
  (await db().execute<{ n: number }>(sql`select count(*)::int as n from pgboss.job where data->>'jobId' = ${jobId}`)).rows[0].n;

describe("POST /jobs", () => {
  test("answers 201 with Location; row, planning item and event exist together", async () => {
    const response = await submit(sampleSpec(3, { title: "Marl Spring, March" }));
    const made = await jsonOf<Job>(response, 201);
    expect(response.headers.get("location")).toBe(`/api/v1/jobs/${made.id}`);
    expect(made).toMatchObject({ title: "Marl Spring, March", status: "queued", lane: "interactive", visibility: "team", cases: ["as measured"], error: null });
    expect(made.counts).toEqual({ rows: 3, done: 0, ok: 0, invalid: 0, notConverged: 0, warned: 0 });
    expect(made.queue?.rowsAhead).toBeGreaterThanOrEqual(0);
    expect(await planItems(made.id)).toBe(1);
    expect((await db().select().from(jobEvent).where(eq(jobEvent.jobId, made.id))).map((each) => each.type)).toEqual(["job-queued"]);
    const spec = await api("GET", `/jobs/${made.id}/spec`, { token });
    expect(await spec.text()).toBe(JSON.stringify(sampleSpec(3, { title: "Marl Spring, March" })));
    expect(spec.headers.get("tufa-spec-hash")).toBe(made.specHash);
  });

  test("the same spec with its keys in another order has the same hash", async () => {
    const spec = sampleSpec();
    const turned = Object.fromEntries(Object.entries(spec).reverse());
    expect((await submitted(turned)).specHash).toBe((await submitted(spec)).specHash);
  });

  test("more than 2,000 rows go to the batch lane", async () => {
    expect((await submitted(sampleSpec(2001))).lane).toBe("batch");
    expect((await submitted(sampleSpec(2000))).lane).toBe("interactive");
  });

  test("an analyst submits up to 10,000 rows; beyond it the spec is refused with a remedy, before anything is expanded", async () => {
    const axis = (points: number) => sampleSpec(1, { vary: [{ field: "temperature", from: 1, to: 30, points }] });
    expect((await submit(axis(10_000), {}, analystToken)).status).toBe(201);
    const problem = await jsonOf<Problem>(await submit(axis(10_001), {}, analystToken), 422);
    expect(problem.errors).toEqual([expect.objectContaining({ pointer: "/vary", code: "too-many-rows", value: "10001" })]);
    const huge = sampleSpec(1, { vary: ["temperature", "Na", "K"].map((field) => ({ field, from: 1, to: 2, points: 100_000 })) });
    expect((await submit(huge)).status).toBe(422);
  });

  test("a full backlog is 429 with Retry-After and leaves nothing behind", async () => {
    const busy = await makePerson("analyst");
    const own = await busy.token();
    const first = await submitted(sampleSpec(), own);
    await db().update(job).set({ rowCount: ROLE_LIMITS.analyst.backlogRows - 1 }).where(eq(job.id, first.id));
    const response = await submit(sampleSpec(2), { "idempotency-key": "full" }, own);
    const problem = await jsonOf<Problem>(response, 429);
    expect(problem.type).toBe("/docs/errors#backlog-full");
    expect(response.headers.get("retry-after")).toBe("30");
    expect(await db().select().from(job).where(eq(job.ownerId, busy.actor.userId))).toHaveLength(1);
    expect((await submit(sampleSpec(1), {}, own)).status).toBe(201);
    await db().update(job).set({ status: "done" }).where(eq(job.ownerId, busy.actor.userId));
    expect((await submit(sampleSpec(2), { "idempotency-key": "full" }, own)).status).toBe(201);
  });

  test("somebody else's private sample set is as unknown as one that does not exist", async () => {
    const other = await makePerson("analyst");
    const set = await jsonOf<{ id: string }>(await api("POST", "/sample-sets", {
      token: await other.token(), body: { name: "private", visibility: "private", rows: [{ id: "a", temperature: 10, pH: 7, alkalinity: "1 meq/L" }] },
    }), 201);
    for (const name of [set.id, "set_00000000000000000000", `${set.id}@9`, "nonsense"]) {
      const problem = await jsonOf<Problem>(await submit(sampleSpec(0, { waters: { set: name } })), 422);
      expect(problem.errors?.[0].pointer).toBe("/waters/set");
    }
  });

  test("a set's version is pinned at submission, and reading it needs samples:read", async () => {
    const rows = [{ id: "a", temperature: 10, pH: 7, alkalinity: "1 meq/L" }];
    const set = await jsonOf<{ id: string }>(await api("POST", "/sample-sets", { token, body: { name: "Tarnhead", rows } }), 201);
    const spec = sampleSpec(0, { waters: { set: set.id } });
    const made = await submitted(spec);
    expect(made.sampleSet).toEqual({ id: set.id, version: 1, name: "Tarnhead" });
    await jsonOf(await api("POST", `/sample-sets/${set.id}/versions`, { token, body: { rows: [...rows, { ...rows[0], id: "b", pH: 7.5 }] } }), 201);
    expect((await submitted(spec)).counts.rows).toBe(2);
    expect((await submitted(sampleSpec(0, { waters: { set: `${set.id}@1` } }))).counts.rows).toBe(1);
    expect((await submit(spec, {}, await modeller.token(["jobs:write"]))).status).toBe(403);
  });
});

describe("Idempotency-Key", () => {
  test("a replay gets the first answer and makes no second job", async () => {
    const key = { "idempotency-key": "round-7" };
    const first = await submit(sampleSpec(), key);
    const body = await jsonOf<Job>(first, 201);
    expect(first.headers.get("idempotency-replayed")).toBeNull();
    await db().update(job).set({ title: "renamed since" }).where(eq(job.id, body.id));
    const again = await submit(sampleSpec(), key);
    expect(again.headers.get("idempotency-replayed")).toBe("true");
    expect(again.headers.get("location")).toBe(first.headers.get("location"));
    expect(await jsonOf<Job>(again, 201)).toEqual(body);
    const quoted = await submit(Object.fromEntries(Object.entries(sampleSpec()).reverse()), { "idempotency-key": '"round-7"' });
    expect((await jsonOf<Job>(quoted, 201)).id).toBe(body.id);
    expect(await planItems(body.id)).toBe(1);
  });

  test("the same key with another spec or visibility is 422; another person's same key is another key", async () => {
    const key = { "idempotency-key": "shared" };
    const made = await jsonOf<Job>(await submit(sampleSpec(), key), 201);
    for (const response of [await submit(sampleSpec(3), key), await submit(sampleSpec(), key, token, "?visibility=private")]) {
      expect((await jsonOf<Problem>(response, 422)).type).toBe("/docs/errors#idempotency-mismatch");
    }
    expect((await jsonOf<Job>(await submit(sampleSpec(), key, analystToken), 201)).id).not.toBe(made.id);
  });

  test("while the first request is under way the second is 409, and twenty at once make one job", async () => {
    const client = await pool().connect();
    try {
      await client.query("begin");
      await client.query("select pg_advisory_xact_lock(hashtextextended($1, 0))", [`idempotency ${modeller.actor.userId} in-flight`]);
      const response = await submit(sampleSpec(), { "idempotency-key": "in-flight" });
      expect((await jsonOf<Problem>(response, 409)).type).toBe("/docs/errors#conflict");
    } finally {
      await client.query("rollback");
      client.release();
    }
    const answers = await Promise.all(Array.from({ length: 20 }, () => submit(sampleSpec(), { "idempotency-key": "stampede" })));
    const ids = new Set<string>();
    for (const answer of answers) {
      expect([201, 409]).toContain(answer.status);
      if (answer.status === 201) ids.add(((await answer.json()) as Job).id);
    }
    expect(ids.size).toBe(1);
  });

  test("a refused spec leaves the key free, and after 24 hours it is forgotten", async () => {
    const key = { "idempotency-key": "mended" };
    expect((await submit({ spec: 2 }, key)).status).toBe(422);
    const first = await jsonOf<Job>(await submit(sampleSpec(), key), 201);
    await db().update(idempotencyKey).set({ createdAt: new Date(Date.now() - 25 * 3_600_000) }).where(eq(idempotencyKey.key, "mended"));
    expect((await jsonOf<Job>(await submit(sampleSpec(4), key), 201)).id).not.toBe(first.id);
  });

  test("keys that are empty, too long or no plain ASCII are 400", async () => {
    for (const key of ["", "x".repeat(256), "k\u00e4se"]) expect((await submit(sampleSpec(), { "idempotency-key": key })).status).toBe(400);
    expect((await submit(sampleSpec(), { "idempotency-key": "x".repeat(255) })).status).toBe(201);
  });

  test("when the planning item cannot be queued, neither job nor key remains", async () => {
    const before = await db().select({ id: job.id }).from(job).where(eq(job.ownerId, modeller.actor.userId));
    // Breaks the last write of the transaction, for this title alone.
    await db().execute(sql`
      create or replace function refuse_ghost() returns trigger language plpgsql as $$
      begin
        if (select title from job where id = new.job_id) = 'Ghost' then raise exception 'refused'; end if;
        return new;
      end $$`);
    await db().execute(sql`create or replace trigger refuse_ghost before insert on job_event for each row execute function refuse_ghost()`);
    const logged = vi.spyOn(log(), "error").mockImplementation(() => {});
    try {
      expect((await submit(sampleSpec(2, { title: "Ghost" }), { "idempotency-key": "ghost" })).status).toBe(500);
    } finally {
      await db().execute(sql`drop trigger refuse_ghost on job_event`);
      logged.mockRestore();
    }
    expect(await db().select({ id: job.id }).from(job).where(eq(job.ownerId, modeller.actor.userId))).toHaveLength(before.length);
    expect((await submit(sampleSpec(5), { "idempotency-key": "ghost" })).status).toBe(201);
  });
});

describe("reading jobs", () => {
  test("GET /jobs/{id} has an ETag that answers 304 until something changes", async () => {
    const made = await submitted();
    const first = await api("GET", `/jobs/${made.id}`, { token });
    const etag = first.headers.get("etag") ?? "";
    expect(await jsonOf<Job>(first, 200)).toMatchObject({ id: made.id, specHash: made.specHash });
    expect((await api("GET", `/jobs/${made.id}`, { token, headers: { "if-none-match": etag } })).status).toBe(304);
    await db().update(job).set({ doneCount: 1, okCount: 1 }).where(eq(job.id, made.id));
    expect((await api("GET", `/jobs/${made.id}`, { token, headers: { "if-none-match": `"x", ${etag}` } })).status).toBe(200);
  });

  test("a private job is 404 for the team, in every sub-resource, and absent from lists; administrators see it", async () => {
    const made = await submitted(sampleSpec(1, { title: "hush" }), token, "?visibility=private");
    for (const [method, path] of [["GET", ""], ["GET", "/spec"], ["GET", "/results"], ["GET", "/events"], ["POST", "/cancel"], ["POST", "/retry"]]) {
      expect((await api(method, `/jobs/${made.id}${path}`, { token: analystToken })).status, path).toBe(404);
    }
    const { jobs } = await jsonOf<{ jobs: Job[] }>(await api("GET", "/jobs?q=hush", { token: analystToken }), 200);
    expect(jobs).toEqual([]);
    const admin = await (await makePerson("administrator")).token();
    expect((await api("GET", `/jobs/${made.id}`, { token: admin })).status).toBe(200);
  });

  test("lists filter by owner, status and words, and page without gap or double", async () => {
    const person = await makePerson("modeller");
    const own = await person.token();
    const made: string[] = [];
    for (let i = 0; i < 5; i++) made.unshift((await submitted(sampleSpec(1, { title: `Osier Beck ${i}` }), own)).id);
    const seen: string[] = [];
    let path: string | null = "/jobs?owner=me&limit=2";
    while (path) {
      const response: Response = await api("GET", path, { token: own });
      seen.push(...(await jsonOf<{ jobs: Job[] }>(response, 200)).jobs.map((each) => each.id));
      path = /<\/api\/v1([^>]+)>; rel="next"/.exec(response.headers.get("link") ?? "")?.[1] ?? null;
      // A newcomer must not shift the pages to come.
      if (seen.length === 2) await submitted(sampleSpec(1), own);
    }
    expect(seen).toEqual(made);
    const { jobs } = await jsonOf<{ jobs: Job[] }>(await api("GET", "/jobs?owner=me&q=BECK%203&status=queued", { token: own }), 200);
    expect(jobs.map((each) => each.title)).toEqual(["Osier Beck 3"]);
    expect((await api("GET", "/jobs?status=lost", { token: own })).status).toBe(400);
    expect((await api("GET", "/jobs?cursor=abc", { token: own })).status).toBe(400);
  });

  test("a missing job is 404", async () => {
    expect((await api("GET", "/jobs/job_none", { token })).status).toBe(404);
  });
});

describe("cancel and retry", () => {
  test("cancel answers at once; a second cancel is 409; retry queues the job again; a retry of a queued job is 409", async () => {
    const made = await submitted();
    expect((await jsonOf<Job>(await api("POST", `/jobs/${made.id}/cancel`, { token }), 200)).status).toBe("cancelled");
    expect((await api("POST", `/jobs/${made.id}/cancel`, { token })).status).toBe(409);
    expect((await jsonOf<Job>(await api("POST", `/jobs/${made.id}/retry`, { token }), 200)).status).toBe("queued");
    expect((await api("POST", `/jobs/${made.id}/retry`, { token })).status).toBe(409);
  });

  test("retry takes up failed chunks only", async () => {
    const made = await submitted();
    await db().update(job).set({ status: "failed", chunkCount: 2, doneCount: 1, error: "the worker gave up" }).where(eq(job.id, made.id));
    await db().insert(chunk).values([0, 1].map((index) => ({
      jobId: made.id, index, lane: "interactive" as const, ownerId: modeller.actor.userId, firstRow: index, rowCount: 1,
      status: index === 0 ? ("done" as const) : ("failed" as const), attempt: 3,
    })));
    const shown = await jsonOf<Job>(await api("POST", `/jobs/${made.id}/retry`, { token }), 200);
    expect(shown).toMatchObject({ status: "running", error: null });
    const rows = await db().select().from(chunk).where(eq(chunk.jobId, made.id)).orderBy(chunk.index);
    expect(rows.map((each) => each.status)).toEqual(["done", "waiting"]);
    await db().update(job).set({ status: "cancelled" }).where(eq(job.id, made.id));
  });

  test("an analyst is 403 on somebody's team job, a modeller is not", async () => {
    const made = await submitted();
    expect((await api("POST", `/jobs/${made.id}/cancel`, { token: analystToken })).status).toBe(403);
    const colleague = await (await makePerson("modeller")).token();
    expect((await api("POST", `/jobs/${made.id}/cancel`, { token: colleague })).status).toBe(200);
  });
});

describe("dry run", () => {
  test("counts, solves the first rows and stores nothing", async () => {
    const before = await db().select({ id: job.id }).from(job).where(eq(job.ownerId, modeller.actor.userId));
    const answer = await jsonOf<JobDryRun>(await submit(sampleSpec(50), {}, token, "?dry=true"), 200);
    expect(answer).toMatchObject({ rowCount: 50, waterCount: 50, issues: [], cases: ["as measured"] });
    expect(answer.rows).toHaveLength(20);
    expect(answer.rows[0]).toMatchObject({ water: "QB-1", status: "ok" });
    expect(await db().select({ id: job.id }).from(job).where(eq(job.ownerId, modeller.actor.userId))).toHaveLength(before.length);
  });

  test("gives the faults as data", async () => {
    const answer = await jsonOf<JobDryRun>(await submit({ spec: 1 }, {}, token, "?dry=true"), 200);
    expect(answer.issues.length).toBeGreaterThan(0);
    expect(answer.rows).toEqual([]);
  });
});

test("Prefer: wait answers with the job once it has ended", async () => {
  const waiting = submit(sampleSpec(1, { title: "waited for" }), { prefer: "wait=30" });
  const id = await vi.waitFor(async () => {
    const { jobs } = await jsonOf<{ jobs: Job[] }>(await api("GET", "/jobs?owner=me&q=waited%20for", { token }), 200);
    if (jobs.length === 0) throw new Error("not there yet");
    return jobs[0].id;
  }, 10_000);
  await api("POST", `/jobs/${id}/cancel`, { token });
  const response = await waiting;
  expect(response.headers.get("preference-applied")).toBe("wait=30");
  expect(await jsonOf<Job>(response, 201)).toMatchObject({ id, status: "cancelled", queue: null });
}, 15_000);

test("Prefer: wait gives up after its time and answers with the job as it stands", async () => {
  const made = await jsonOf<Job>(await submit(sampleSpec(), { prefer: "wait=1" }), 201);
  expect(made.status).toBe("queued");
});

test("Prefer: wait is read by its grammar and capped at 60 s", () => {
  expect(preferredWait(null)).toBeNull();
  expect(preferredWait("return=minimal")).toBeNull();
  expect(preferredWait("wait")).toBe(60);
  expect(preferredWait("respond-async, wait=5")).toBe(5);
  expect(preferredWait("wait=600")).toBe(60);
});
