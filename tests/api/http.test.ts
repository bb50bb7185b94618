/** What only a real server shows: next-auth's cookies, bodies and streams over a socket, the thread that reads large bodies. */
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb, db } from "@/db/client";
import type { Job, JobEvent, Problem } from "@/lib/schemas/api";
import { SIGN_IN_LIMITS } from "@/lib/services/users/sign-in";
import { setPassword } from "@/lib/services/users/password-link";
import { serverAddress } from "@/tests/helpers/running-server";
import { makePerson, type Person, sampleSpec } from "./support";

const PASSWORD = "kiln quern osier tarn";
let person: Person;
let token: string;
beforeAll(async () => {
  person = await makePerson("modeller");
  await db().transaction((tx) => setPassword(tx, { id: person.actor.userId, email: person.actor.email }, PASSWORD));
  token = await person.token();
});
afterAll(closeDb);

const call = (method: string, path: string, init: { body?: BodyInit; headers?: Record<string, string>; token?: string; signal?: AbortSignal } = {}) =>
  fetch(`${serverAddress()}/api/v1${path}`, {
    method, body: init.body, signal: init.signal,
    headers: { authorization: `Bearer ${init.token ?? token}`, ...(init.body === undefined ? {} : { "content-type": "application/json" }), ...init.headers },
  });

/** A browser's cookies in small. */
class Browser {
  private readonly jar = new Map<string, string>();

  async fetch(path: string, init: RequestInit = {}): Promise<Response> {
    const cookie = [...this.jar].map(([name, value]) => `${name}=${value}`).join("; ");
    const response = await fetch(serverAddress() + path, { ...init, redirect: "manual", headers: { ...init.headers, cookie } });
    for (const line of response.headers.getSetCookie()) {
      const [, name, value] = /^([^=]+)=([^;]*)/.exec(line) ?? [];
      if (value) this.jar.set(name, value);
      else this.jar.delete(name);
    }
    return response;
  }

  async post(path: string, fields: Record<string, string>): Promise<Response> {
    const { csrfToken } = (await (await this.fetch("/api/auth/csrf")).json()) as { csrfToken: string };
    return this.fetch(path, { method: "POST", headers: { origin: serverAddress() }, body: new URLSearchParams({ ...fields, csrfToken, json: "true" }) });
  }

  signIn(email: string, password: string): Promise<Response> {
    return this.post("/api/auth/callback/credentials", { email, password });
  }

  copy(): Browser {
    const other = new Browser();
    for (const [name, value] of this.jar) other.jar.set(name, value);
    return other;
  }
}

describe("signing in with a browser", () => {
  test("gives a session that works for the API, and signing out ends it, kept copies of the cookie included", async () => {
    const browser = new Browser();
    expect((await browser.signIn(person.actor.email, "something else")).status).toBe(401);
    expect((await browser.fetch("/api/v1/me")).status).toBe(401);
    expect((await browser.signIn(person.actor.email, PASSWORD)).status).toBe(200);
    expect(await (await browser.fetch("/api/v1/me")).json()).toMatchObject({ id: person.actor.userId, via: "session" });
    expect(await (await browser.fetch("/api/auth/session")).json()).toMatchObject({ user: { id: person.actor.userId, role: "modeller" } });
    const thief = browser.copy();
    expect((await thief.fetch("/api/v1/me")).status).toBe(200);
    await browser.post("/api/auth/signout", {});
    expect((await browser.fetch("/api/v1/me")).status).toBe(401);
    expect((await thief.fetch("/api/v1/me")).status).toBe(401);
    expect(((await (await thief.fetch("/api/auth/session")).json()) as { user?: unknown }).user).toBeUndefined();
  });

  test("a sign-in without the page's own CSRF token opens no session", async () => {
    const browser = new Browser();
    await browser.fetch("/api/auth/callback/credentials", {
      method: "POST", body: new URLSearchParams({ email: person.actor.email, password: PASSWORD, csrfToken: "made up", json: "true" }),
    });
    expect((await browser.fetch("/api/v1/me")).status).toBe(401);
  });

  test("too many attempts are 429 with Retry-After, and a huge form is 413", async () => {
    const browser = new Browser();
    const email = `nobody-${person.actor.userId}@sallowmere.example`;
    for (let i = 0; i < SIGN_IN_LIMITS.perAccount; i++) expect((await browser.signIn(email, "x")).status).toBe(401);
    const refused = await browser.signIn(email, "x");
    expect(refused.status).toBe(429);
    expect(Number(refused.headers.get("retry-after"))).toBeGreaterThan(0);
    expect(((await refused.json()) as { url: string }).url).toContain("error=rate-limited");
    expect((await browser.fetch("/api/auth/callback/credentials", { method: "POST", body: "x".repeat(100_000) })).status).toBe(413);
  });
});

describe("bodies over a socket", () => {
  test("20 MB of nonsense get a problem, the server stays up, and 51 MB are refused", async () => {
    const nonsense = await call("POST", "/jobs", { body: "[".repeat(20 << 20) });
    expect(nonsense.status).toBe(400);
    expect(((await nonsense.json()) as Problem).errors?.[0].code).toBe("too-deep");
    expect((await call("POST", "/jobs", { body: "x".repeat(51 << 20) })).status).toBe(413);
    expect((await call("GET", "/me")).status).toBe(200);
  }, 30_000);

  test("a spec of several megabytes is read in a thread with the same outcome, and its hash does not depend on that", async () => {
    const spec = sampleSpec(20_000);
    const text = JSON.stringify(spec);
    expect(text.length).toBeGreaterThan(2 << 20);
    const made = (await (await call("POST", "/jobs?visibility=private", { body: text })).json()) as Job;
    expect(made.counts.rows).toBe(20_000);
    expect(await (await call("GET", `/jobs/${made.id}/spec`)).json()).toEqual(spec);
    await call("POST", `/jobs/${made.id}/cancel`);
    const faulty = await call("POST", "/jobs", { body: text.replace('"spec":1', '"spec":7') });
    expect(faulty.status).toBe(422);
    expect(((await faulty.json()) as Problem).type).toBe("/docs/errors#invalid-spec");
  }, 30_000);
});

/** Events of a stream until `enough` says so or the stream ends; `ended` tells which. */
async function readEvents(response: Response, enough: (event: JobEvent) => boolean): Promise<{ events: { id: number; event: JobEvent }[]; ended: boolean }> {
  const events: { id: number; event: JobEvent }[] = [];
  let rest = "";
  const reader = response.body!.pipeThrough(new TextDecoderStream()).getReader();
  for (;;) {
    const { done, value } = await reader.read();
    if (done) return { events, ended: true };
    const blocks = (rest + value).split("\n\n");
    rest = blocks.pop() ?? "";
    for (const block of blocks) {
      const match = /^id: (\d+)\ndata: (.*)$/.exec(block);
      if (!match) continue;
      const event = JSON.parse(match[2]) as JobEvent;
      events.push({ id: Number(match[1]), event });
      if (enough(event)) {
        await reader.cancel();
        return { events, ended: false };
      }
    }
  }
}

describe("events over a socket", () => {
  test("tell a job's course within a second, end with it, and resume after Last-Event-ID", async () => {
    const made = (await (await call("POST", "/jobs", { body: JSON.stringify(sampleSpec(3000)) })).json()) as Job;
    const started = performance.now();
    const response = await call("GET", `/jobs/${made.id}/events`);
    let firstMs = Infinity;
    const { events, ended } = await readEvents(response, () => { firstMs = Math.min(firstMs, performance.now() - started); return false; });
    expect(ended).toBe(true);
    expect(firstMs).toBeLessThan(1000);
    expect(events.at(-1)?.event).toMatchObject({ type: "job-done", status: "done", counts: { rows: 3000, done: 3000 } });
    // A small job may have ended before the stream was opened, so the resumed one starts just before the last event.
    const last = events[events.length - 1].id;
    const resumed = await readEvents(await call("GET", `/jobs/${made.id}/events`, { headers: { "last-event-id": String(last - 1) } }), () => false);
    expect(resumed.events.map(({ id, event }) => [id, event.type])).toEqual([[last, "job-done"]]);
    const nothingNew = await readEvents(await call("GET", `/jobs/${made.id}/events`, { headers: { "last-event-id": String(last) } }), () => false);
    expect(nothingNew).toEqual({ events: [], ended: true });
  }, 30_000);

  test("a revoked token's stream closes within 5 s and its next call is 401", async () => {
    const made = (await (await call("POST", "/tokens", { body: JSON.stringify({ name: "watcher", scopes: ["jobs:read"] }) })).json()) as { id: string; token: string };
    const response = await call("GET", "/events", { token: made.token });
    expect(response.status).toBe(200);
    expect((await call("DELETE", `/tokens/${made.id}`)).status).toBe(204);
    const started = performance.now();
    expect((await call("GET", "/me", { token: made.token })).status).toBe(401);
    expect((await readEvents(response, () => false)).ended).toBe(true);
    expect(performance.now() - started).toBeLessThan(5000);
  }, 15_000);
});

test("an unknown address and a method not taken are problem documents from the server itself", async () => {
  for (const [method, path, status] of [["GET", "/nowhere", 404], ["GET", "", 404], ["PUT", "/jobs", 405], ["PATCH", "/health", 405]] as const) {
    const response = await call(method, path);
    expect(response.status, `${method} ${path}`).toBe(status);
    expect(response.headers.get("content-type")).toBe("application/problem+json");
    expect(response.headers.get("request-id")).toMatch(/^req_/);
  }
});
