/**
 * Scope × route, generated from the handlers themselves: each is asked without a credential, and with a token of every
 * single scope. Handlers that a token gets past answer something else than 401 and 403; what exactly is other tests' matter.
 */
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb } from "@/db/client";
import { ROLES } from "@/db/schema";
import { SCOPES, type Scope } from "@/lib/schemas/actor";
import type { Problem } from "@/lib/schemas/api";
import { ROLE_SCOPES } from "@/lib/services/access";
import { OPERATIONS } from "@/openapi/document";
import { api, jsonOf, makePerson, routeFiles, SAME_ORIGIN } from "./support";

const tokens = new Map<Scope, string>();
let cookieOfAnalyst = "";
beforeAll(async () => {
  const admin = await makePerson("administrator");
  for (const scope of SCOPES) tokens.set(scope, await admin.token([scope]));
  cookieOfAnalyst = (await (await makePerson("analyst")).cookie()).header;
});
afterAll(closeDb);

const METHODS = ["GET", "POST", "PUT", "PATCH", "DELETE"];
const loaded = await Promise.all(routeFiles.map(async ({ pattern, load }) => ({ pattern, module: await load() })));
const routes = loaded.flatMap(({ pattern, module }) => METHODS.flatMap((method) => {
  const scope = module[method]?.scope;
  return scope ? [{ method, pattern, scope, path: pattern.replaceAll(/\{\w+\}/g, "none") }] : [];
}));
const bodyFor = (method: string) => (method === "POST" || method === "PATCH" ? { nonsense: true } : undefined);
// Event streams stay open; an aborted request still shows whether it was let in.
const isStream = (pattern: string) => pattern.endsWith("events");

async function ask(method: string, path: string, pattern: string, options: { token?: string; cookie?: string; headers?: Record<string, string> }) {
  const end = new AbortController();
  const response = await api(method, path, { ...options, body: bodyFor(method), signal: isStream(pattern) ? end.signal : undefined });
  if (isStream(pattern)) end.abort();
  return response;
}

test("there are as many handlers as operations in the OpenAPI document, with the same methods, addresses and scopes", () => {
  const handled = routes.map((each) => `${each.method} ${each.pattern} ${each.scope}`).sort();
  expect(handled).toEqual(OPERATIONS.map((each) => `${each.method.toUpperCase()} ${each.path} ${each.scope}`).sort());
  expect(handled.length).toBeGreaterThan(25);
});

describe.each(routes)("$method $pattern ($scope)", ({ method, pattern, path, scope }) => {
  test(scope === "public" ? "lets anybody in" : "is 401 without a credential and with a wrong token", async () => {
    const bare = await ask(method, path, pattern, {});
    if (scope === "public") {
      expect([401, 403]).not.toContain(bare.status);
      return;
    }
    expect(bare.status).toBe(401);
    expect(bare.headers.get("content-type")).toBe("application/problem+json");
    expect(bare.headers.get("www-authenticate")).toContain("Bearer");
    expect((await ask(method, path, pattern, { token: `tufa_${"0".repeat(36)}` })).status).toBe(401);
  });

  test.each(SCOPES)("with a token of the scope %s alone", async (held) => {
    const response = await ask(method, path, pattern, { token: tokens.get(held) });
    if (scope === "public" || scope === "signed-in" || scope === held) expect([401, 403]).not.toContain(response.status);
    else expect(response.status).toBe(403);
  });

  if (scope === "admin") {
    test("is 403 for an analyst's session", async () => {
      expect((await ask(method, path, pattern, { cookie: cookieOfAnalyst, headers: SAME_ORIGIN })).status).toBe(403);
    });
  }

  if (method !== "GET" && scope !== "public") {
    test("refuses a cookie's write from another site or without Origin", async () => {
      for (const headers of [{ ...SAME_ORIGIN, origin: "https://elsewhere.example" }, { host: SAME_ORIGIN.host }, { ...SAME_ORIGIN, origin: "null" }]) {
        const problem = await jsonOf<Problem>(await ask(method, path, pattern, { cookie: cookieOfAnalyst, headers }), 403);
        expect(problem.type).toBe("/docs/errors#forbidden");
      }
    });
  }
});

describe.each(loaded)("$pattern", ({ pattern, module }) => {
  test("answers 405 as a problem, naming what it takes, to every method it has not", async () => {
    for (const method of METHODS.filter((each) => !module[each]?.scope)) {
      const response = await api(method, pattern.replaceAll(/\{\w+\}/g, "none"), { token: tokens.get("admin") });
      expect(response.status, method).toBe(405);
      expect(response.headers.get("allow")).toBeTruthy();
      expect(((await response.json()) as Problem).type).toBe("/docs/errors#method-not-allowed");
    }
  });
});

test.each(ROLES)("every scope of the role %s is one that exists, and only administrators hold admin", (role) => {
  for (const scope of ROLE_SCOPES[role]) expect(SCOPES).toContain(scope);
  expect(ROLE_SCOPES[role].includes("admin")).toBe(role === "administrator");
});
