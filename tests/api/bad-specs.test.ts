/** Faulty documents come back as problems that point at the place, by every door that takes a spec. */
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb } from "@/db/client";
import type { Issue } from "@/lib/errors";
import type { Problem } from "@/lib/schemas/api";
import { api, jsonOf, makePerson, sampleSpec } from "./support";

let token: string;
beforeAll(async () => { token = await (await makePerson("modeller")).token(); });
afterAll(closeDb);

type Rows = { waters: { rows: Record<string, unknown>[]; units?: Record<string, string> }; cases: Record<string, unknown>[] } & Record<string, unknown>;
const bent = (bend: (spec: Rows) => void): Rows => {
  const spec = structuredClone(sampleSpec(2)) as Rows;
  bend(spec);
  return spec;
};
async function issuesOf(path: string, spec: unknown): Promise<Issue[]> {
  const problem = await jsonOf<Problem>(await api("POST", path, { token, body: JSON.stringify(spec), headers: { "content-type": "application/json" } }), 422);
  expect(problem.type).toBe("/docs/errors#invalid-spec");
  return problem.errors ?? [];
}

const FAULTS: [string, (spec: Rows) => void, string][] = [
  ["an unknown key", (s) => { s.watters = s.waters; }, "/watters"],
  ["an unknown key in a row", (s) => { s.waters.rows[1].Calcium = 3; }, "/waters/rows/1/Calcium"],
  ["a wrong unit", (s) => { s.waters.rows[0].Ca = "62 mg/furlong"; }, "/waters/rows/0/Ca"],
  ["a wrong default unit", (s) => { s.waters.units = { Mg: "parsec" }; }, "/waters/units/Mg"],
  ["a quantity that cannot be read", (s) => { s.waters.rows[1].Na = "plenty"; }, "/waters/rows/1/Na"],
  ["no waters", (s) => { delete (s as Record<string, unknown>).waters; }, "/waters"],
  ["both a set and rows", (s) => { (s.waters as Record<string, unknown>).set = "set_x"; }, "/waters"],
  ["no cases", (s) => { s.cases = []; }, "/cases"],
  ["two proton facts", (s) => { s.cases[0].close = ["ANC", "alkalinity"]; }, "/cases/0/close"],
  ["two carbon facts that are not allowed together", (s) => { s.cases[0].close = ["pCO2", { saturated: "calcite" }]; }, "/cases/0/close"],
  ["an unknown solid", (s) => { s.cases[0].react = { solids: { unobtainium: { supply: "excess" } } }; }, "/cases/0/react/solids/unobtainium"],
  ["an unknown activity model", (s) => { s.cases[0].activity = "guesswork"; }, "/cases/0/activity"],
  ["a case like one that is not there", (s) => { s.cases.push({ name: "b", like: "zzz" }); }, "/cases/1/like"],
  ["an axis over nothing known", (s) => { s.vary = [{ field: "mood", values: [1] }]; }, "/vary/0/field"],
  ["a logarithmic axis from zero", (s) => { s.vary = [{ field: "Na", from: 0, to: 1, points: 5, scale: "log", unit: "mmol/L" }]; }, "/vary/0"],
  ["an unknown column", (s) => { s.report = ["pH", "pHH"]; }, "/report/1"],
  ["a tolerance that would certify nothing", (s) => { s.solver = { tolerance: 1e-3 }; }, "/solver/tolerance"],
];

describe.each(["/solve", "/jobs"])("POST %s", (path) => {
  test.each(FAULTS)("%s is pointed at", async (_name, bend, pointer) => {
    const issues = await issuesOf(path, bent(bend));
    expect(issues.map((each) => each.pointer).some((each) => each === pointer || each.startsWith(pointer + "/")), JSON.stringify(issues)).toBe(true);
    for (const issue of issues) expect(issue.message.length).toBeGreaterThan(5);
  });

  test("all faults come at once", async () => {
    const issues = await issuesOf(path, bent((spec) => { for (const [, bend] of [FAULTS[1], FAULTS[2], FAULTS[11], FAULTS[15]]) bend(spec); }));
    expect(new Set(issues.map((each) => each.pointer)).size).toBeGreaterThanOrEqual(4);
  });

  test("an unknown key is told its nearest known name", async () => {
    const [issue] = await issuesOf(path, bent((spec) => { spec.tittle = "x"; }));
    expect(`${issue.message} ${issue.remedy}`).toContain("title");
  });

  const documents: [unknown][] = [[null], [7], ["spec"], [[]], [{}], [{ spec: 99 }], [{ spec: 1, waters: null, cases: null }], [{ spec: 1, waters: [], cases: {} }], [{ constructor: 1 }]];
  test.each(documents)("%j is refused, not stumbled over", async (body) => {
    expect((await issuesOf(path, body)).length).toBeGreaterThan(0);
  });

  test.each([["1e999", "an infinite number"], ["-1e999", "a negative infinite number"], ["1e-999", "a number too small to be one"]])("absurd numbers: %s", async (number) => {
    const text = JSON.stringify(bent((spec) => { spec.waters.rows[0].Ca = "NUMBER"; })).replace('"NUMBER"', number);
    const response = await api("POST", path, { token, body: text, headers: { "content-type": "application/json" } });
    expect([200, 201, 422]).toContain(response.status);
  });

  test("a fault of one row's values refuses nothing: the row will be invalid", async () => {
    const response = await api("POST", path, { token, body: bent((spec) => { spec.waters.rows[0].Ca = -62; spec.waters.rows[1].temperature = 300; }) });
    expect([200, 201]).toContain(response.status);
  });

  test("broken JSON is 400 with line, column and pointer", async () => {
    const problem = await jsonOf<Problem>(await api("POST", path, { token, body: '{\n "spec": 1,\n "cases": [ {"name": "a", } ]\n}', headers: { "content-type": "application/json" } }), 400);
    expect(problem.errors?.[0]).toMatchObject({ pointer: "/cases/0", code: "json-syntax" });
    expect(problem.detail).toContain("line 3, column 27");
  });

  const MEGABYTES = 20 * 1024 * 1024;
  test.each([
    ["one letter", () => "x".repeat(MEGABYTES), 400],
    ["opening brackets", () => "[".repeat(MEGABYTES), 400],
    ["opening braces and keys", () => '{"a":'.repeat(MEGABYTES / 5), 400],
    ["one text that never closes", () => `{"spec": "${"y".repeat(MEGABYTES)}`, 400],
    ["numbers", () => `[${"1,".repeat(MEGABYTES / 2)}1]`, 422],
    ["unknown keys", () => `{${Array.from({ length: 800_000 }, (_, i) => `"key${i}":${i % 10}`).join(",")}}`, 422],
    ["rows of nonsense", () => JSON.stringify({ ...sampleSpec(1), waters: { rows: Array.from({ length: 400_000 }, (_, i) => ({ id: i, Zz: "what", Ca: "?" })) } }), 422],
    ["control bytes", () => "\u0001".repeat(MEGABYTES), 400],
  ])("20 MB of %s are refused with a short answer", async (_name, make, status) => {
    const response = await api("POST", path, { token, body: make(), headers: { "content-type": "application/json" } });
    const text = await response.text();
    expect(response.status, text.slice(0, 500)).toBe(status);
    expect(text.length).toBeLessThan(200_000);
    expect((JSON.parse(text) as Problem).errors?.length).toBeGreaterThan(0);
  }, 60_000);
});
