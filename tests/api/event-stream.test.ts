import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { closeDb } from "@/db/client";
import { eventStream, lastEventIdOf } from "@/lib/http/event-stream";
import type { Actor } from "@/lib/schemas/actor";
import type { JobEvent } from "@/lib/schemas/api";
import { revokeToken } from "@/lib/services/tokens/revoke";
import { findTokenActor } from "@/lib/services/tokens/find-token-actor";
import { makePerson, type Person } from "./support";

let person: Person;
beforeAll(async () => { person = await makePerson("modeller"); });
afterAll(closeDb);

const event = (n: number): JobEvent => ({
  type: "chunk-done", jobId: "job_x", at: "2026-10-14T08:00:00.000Z", status: "running",
  counts: { rows: 10, done: n, ok: n, invalid: 0, notConverged: 0, warned: 0 }, rowsPerSecond: null, secondsLeft: null,
});
const address = "http://127.0.0.1:3000/api/v1/events";
const untilAborted = (signal: AbortSignal) => new Promise<void>((resolve) => {
  if (signal.aborted) resolve();
  else signal.addEventListener("abort", () => resolve(), { once: true });
});

async function tokenActor(): Promise<Actor> {
  const actor = await findTokenActor(await person.token(), "req_test");
  if (!actor) throw new Error("the token does not work");
  return actor;
}

describe("an event stream", () => {
  test("sends one JSON line an event with its id, unbuffered, and ends with its subscription", async () => {
    const response = eventStream(new Request(address), await tokenActor(), async function* () {
      yield { id: 7, event: event(1) };
      yield { id: 8, event: event(2) };
    });
    expect(response.headers.get("content-type")).toBe("text/event-stream; charset=utf-8");
    expect(response.headers.get("cache-control")).toContain("no-transform");
    const blocks = (await response.text()).split("\n\n").filter((each) => each.startsWith("id:"));
    expect(blocks).toEqual([7, 8].map((id) => `id: ${id}\ndata: ${JSON.stringify(event(id - 6))}`));
  });

  test("ends its subscription and its timers when the client goes away", async () => {
    const end = new AbortController();
    let ended = false;
    const cleared = vi.spyOn(globalThis, "clearInterval");
    const response = eventStream(new Request(address, { signal: end.signal }), await tokenActor(), async function* (signal) {
      try {
        yield { id: 1, event: event(1) };
        await untilAborted(signal);
      } finally { ended = true; }
    });
    const reader = response.body!.getReader();
    await reader.read();
    end.abort();
    while (!(await reader.read()).done) { /* drain */ }
    await vi.waitFor(() => expect(ended).toBe(true));
    expect(cleared).toHaveBeenCalledTimes(2);
    cleared.mockRestore();
  });

  test("closes within 5 s of its token being revoked", async () => {
    const actor = await tokenActor();
    const response = eventStream(new Request(address), actor, async function* (signal) {
      yield { id: 1, event: event(1) };
      await untilAborted(signal);
    });
    const reader = response.body!.getReader();
    await reader.read();
    await revokeToken(person.actor, actor.tokenId!);
    const started = performance.now();
    while (!(await reader.read()).done) { /* drain */ }
    expect(performance.now() - started).toBeLessThan(5000);
  }, 10_000);

  test("stays open while its token holds", async () => {
    vi.useFakeTimers({ toFake: ["setInterval", "clearInterval"] });
    const end = new AbortController();
    const response = eventStream(new Request(address, { signal: end.signal }), await tokenActor(), async function* (signal) { await untilAborted(signal); });
    const reader = response.body!.getReader();
    const seen: string[] = [];
    const reading = (async () => { for (let part = await reader.read(); !part.done; part = await reader.read()) seen.push(new TextDecoder().decode(part.value)); })();
    await vi.advanceTimersByTimeAsync(31_000);
    vi.useRealTimers();
    await vi.waitFor(() => expect(seen.join("").match(/: still here/g)).toHaveLength(2));
    end.abort();
    await reading;
  });
});

test("thirty streams of one person may be open; the next is refused, and one closed makes room", async () => {
  const actor = await tokenActor();
  const ends = Array.from({ length: 30 }, () => new AbortController());
  const open = (end: AbortController) => eventStream(new Request(address, { signal: end.signal }), actor, async function* (signal) { await untilAborted(signal); });
  const responses = ends.map(open);
  expect(() => open(new AbortController())).toThrow(/30 event streams/);
  ends[0].abort();
  await responses[0].text();
  ends.push(new AbortController());
  responses.push(open(ends[30]));
  for (const end of ends) end.abort();
  await Promise.all(responses.slice(1).map((each) => each.text()));
});

test("Last-Event-ID is read from its header or the address; nonsense starts afresh", () => {
  const ask = (header: string | null, query = "") => lastEventIdOf(new Request(address + query, header === null ? {} : { headers: { "last-event-id": header } }));
  expect(ask("42")).toBe(42);
  expect(ask(null, "?lastEventId=9")).toBe(9);
  expect(ask(null)).toBeNull();
  expect(ask("1; drop table")).toBeNull();
});
