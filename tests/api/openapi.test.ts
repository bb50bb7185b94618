import { Validator } from "@seriousme/openapi-schema-validator";
import { describe, expect, test } from "vitest";
import { ERRORS } from "@/lib/errors";
import { buildDocument, OPERATIONS } from "@/openapi/document";
import { api, routeFiles } from "./support";

const document = JSON.parse(JSON.stringify(buildDocument())) as {
  paths: Record<string, Record<string, { operationId: string; responses: Record<string, { content?: Record<string, unknown> }>; security: unknown[] }>>;
  components: { schemas: Record<string, unknown> };
};

test("the document is valid OpenAPI 3.1", async () => {
  const validator = new Validator();
  const result = await validator.validate(JSON.parse(JSON.stringify(document)) as Record<string, unknown>);
  expect(result.errors ?? []).toEqual([]);
  expect(result.valid).toBe(true);
  expect(validator.version).toBe("3.1");
});

test("every reference inside it leads somewhere", () => {
  const targets = [...JSON.stringify(document).matchAll(/"\$ref":"([^"]+)"/g)].map((match) => match[1]);
  expect(targets.length).toBeGreaterThan(100);
  for (const target of new Set(targets)) {
    const found = target.slice(2).split("/").reduce<unknown>((at, part) => (at as Record<string, unknown> | undefined)?.[part.replaceAll("~1", "/").replaceAll("~0", "~")], document);
    expect(found, target).toBeDefined();
  }
});

test("it has every route, and no operation twice", async () => {
  expect(Object.keys(document.paths).sort()).toEqual(routeFiles.map((each) => each.pattern).sort());
  expect(new Set(OPERATIONS.map((each) => each.id)).size).toBe(OPERATIONS.length);
});

describe.each(OPERATIONS.map((each) => ({ ...each, name: `${each.method} ${each.path}` })))("$name", ({ method, path, scope }) => {
  const operation = document.paths[path][method];
  test("answers every error as a problem document, 401 and 403 unless it is public", () => {
    const statuses = Object.keys(operation.responses).map(Number);
    for (const status of statuses.filter((each) => each >= 400 && !(path === "/health" && each === 503))) {
      expect(Object.keys(operation.responses[status].content ?? {}), String(status)).toEqual(["application/problem+json"]);
    }
    expect(statuses).toEqual(expect.arrayContaining(scope === "public" ? [429, 500] : [401, 403, 429, 500, 503]));
  });
});

test("every code of the error table is documented at some operation", () => {
  const documented = JSON.stringify(document.paths);
  // Sent by every address for methods it has not, so it belongs to none.
  for (const code of Object.keys(ERRORS).filter((each) => each !== "method-not-allowed")) expect(documented).toContain(`${code}: `);
});

test("GET /openapi.json serves it to anybody", async () => {
  const response = await api("GET", "/openapi.json");
  expect(response.status).toBe(200);
  expect(response.headers.get("content-type")).toBe("application/openapi+json;version=3.1");
  expect(await response.json()).toEqual(document);
});
