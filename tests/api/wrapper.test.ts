import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { z } from "zod";
import { closeDb } from "@/db/client";
import { AppError, ERRORS, type ErrorCode } from "@/lib/errors";
import { env } from "@/lib/env";
import { log } from "@/lib/http/log";
import { resultFormat } from "@/lib/http/negotiate";
import { consumeRequest } from "@/lib/http/rate-limit";
import { BODY_LIMIT } from "@/lib/http/read-body";
import { route } from "@/lib/http/route";
import type { Problem } from "@/lib/schemas/api";
import { api, jsonOf, makePerson, type Person } from "./support";

let person: Person;
let token: string;
beforeAll(async () => {
  person = await makePerson("modeller");
  token = await person.token();
});
afterAll(closeDb);

const address = "http://127.0.0.1:3000/api/v1/anything";
const throwing = (error: unknown) => route({ scope: "public" }, async () => { throw error; });

describe("every error of the table", () => {
  test.each(Object.keys(ERRORS) as ErrorCode[])("%s comes out as a problem document of its status", async (code) => {
    const response = await throwing(new AppError(code, "what happened"))(new Request(address));
    expect(response.status).toBe(ERRORS[code].status);
    expect(response.headers.get("content-type")).toBe("application/problem+json");
    const problem = (await response.json()) as Problem;
    expect(problem).toMatchObject({ type: `/docs/errors#${code}`, title: ERRORS[code].title, status: ERRORS[code].status, detail: "what happened" });
    expect(problem.requestId).toBe(response.headers.get("request-id"));
  });

  test("a throw that nobody foresaw is opaque outside and whole in the log, with the same request id", async () => {
    const logged = vi.spyOn(log(), "error").mockImplementation(() => {});
    const response = await throwing(new Error("password of the database is hunter2"))(new Request(address, { headers: { "request-id": "my-request-0001" } }));
    const text = await response.text();
    expect(response.status).toBe(500);
    expect(text).not.toContain("hunter2");
    expect(JSON.parse(text)).toMatchObject({ requestId: "my-request-0001" });
    const [details] = logged.mock.calls[0] as unknown as [{ requestId: string; err: Error }];
    expect(details.requestId).toBe("my-request-0001");
    expect(details.err.message).toContain("hunter2");
    logged.mockRestore();
  });

  test("a lost database is 503 with Retry-After", async () => {
    const logged = vi.spyOn(log(), "error").mockImplementation(() => {});
    const response = await throwing(Object.assign(new Error("connect"), { code: "ECONNREFUSED" }))(new Request(address));
    expect(response.status).toBe(503);
    expect(response.headers.get("retry-after")).toBe("5");
    logged.mockRestore();
  });
});

describe("request ids", () => {
  test("a harmless one is kept, anything else is replaced", async () => {
    expect((await api("GET", "/me", { token, headers: { "request-id": "run-2026-10-14" } })).headers.get("request-id")).toBe("run-2026-10-14");
    for (const bad of ["short", "with space inside", "x".repeat(65), `tufa_${"a".repeat(36)}`]) {
      expect((await api("GET", "/me", { token, headers: { "request-id": bad } })).headers.get("request-id")).toMatch(/^req_[0-9A-Za-z]{20}$/);
    }
  });
});

describe("limits", () => {
  test("RateLimit headers count down, and the minute's last request is followed by 429 with Retry-After", async () => {
    const eager = await makePerson("analyst");
    const own = await eager.token();
    const first = await api("GET", "/me", { token: own });
    const limit = env().TUFA_REQUESTS_PER_MINUTE;
    expect(first.headers.get("ratelimit-policy")).toBe(`"requests";q=${limit};w=60`);
    expect(first.headers.get("ratelimit")).toMatch(new RegExp(`^"requests";r=${limit - 1};t=\\d+$`));
    for (let i = 1; i < limit - 1; i++) consumeRequest(eager.actor.userId);
    expect((await api("GET", "/me", { token: own })).status).toBe(200);
    const refused = await api("GET", "/me", { token: own });
    const problem = await jsonOf<Problem>(refused, 429);
    expect(problem.type).toBe("/docs/errors#rate-limited");
    expect(Number(refused.headers.get("retry-after"))).toBeGreaterThan(0);
    expect((await api("GET", "/me", { token })).status).toBe(200);
  });

  test("a body beyond the limit is 413, announced or not", async () => {
    const echo = route({ scope: "public", body: z.object({ text: z.string() }) }, async ({ body }) => ({ length: body.text.length }));
    const send = (length: number, headers: Record<string, string> = {}) => echo(new Request(address, {
      method: "POST", headers: { "content-type": "application/json", ...headers }, body: JSON.stringify({ text: "x".repeat(length) }),
    }));
    expect((await send(BODY_LIMIT - 11)).status).toBe(200);
    expect((await send(BODY_LIMIT - 10)).status).toBe(413);
    expect((await send(10, { "content-length": String(BODY_LIMIT + 1) })).status).toBe(413);
  });

  test("other content types and compressed bodies are 415, broken UTF-8 and nests of brackets 400", async () => {
    const echo = route({ scope: "public", body: z.unknown() }, async () => ({}));
    const send = (body: BodyInit, headers: Record<string, string>) => echo(new Request(address, { method: "POST", headers, body }));
    const type = { "content-type": "application/json; charset=utf-8" };
    expect((await send("{}", type)).status).toBe(200);
    expect((await send("{}", { "content-type": "application/xml" })).status).toBe(415);
    expect((await send("{}", { ...type, "content-encoding": "gzip" })).status).toBe(415);
    expect((await send(new Uint8Array([0x22, 0xff, 0x22]), type)).status).toBe(400);
    expect((await send("[".repeat(100_000), type)).status).toBe(400);
    expect((await send("[".repeat(64) + "]".repeat(64), type)).status).toBe(200);
  });
});

test("an address that does not exist is 404 as a problem, for every method", async () => {
  for (const method of ["GET", "POST", "DELETE"]) {
    const problem = await jsonOf<Problem>(await api(method, "/nowhere/at/all", {}), 404);
    expect(problem.type).toBe("/docs/errors#not-found");
  }
});

test("the format asked for in the address wins over Accept, weights decide among types, and unknown types are 406", () => {
  expect(resultFormat("csv", "application/json")).toBe("csv");
  expect(resultFormat(undefined, null)).toBe("json");
  expect(resultFormat(undefined, "text/html;q=0.9, application/x-ndjson;q=0.5, text/csv;q=0.7")).toBe("csv");
  expect(resultFormat(undefined, "application/vnd.apache.arrow.stream")).toBe("arrow");
  expect(() => resultFormat(undefined, "image/png")).toThrow(/offered/);
});
