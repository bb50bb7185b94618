import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb } from "@/db/client";
import type { ConstantsTable, Health, Problem, SolveResponse } from "@/lib/schemas/api";
import { api, jsonOf, makePerson, type Person, sampleSpec } from "./support";

let modeller: Person;
let token: string;
beforeAll(async () => {
  modeller = await makePerson("modeller");
  token = await modeller.token();
});
afterAll(closeDb);

const solve = (body: unknown, as = token) => api("POST", "/solve", { token: as, body });

describe("POST /solve", () => {
  test("answers a small spec with rows keyed by column name, in the order of its waters", async () => {
    const answer = await jsonOf<SolveResponse>(await solve(sampleSpec(3)), 200);
    expect(answer.rows.map((row) => row.water)).toEqual(["QB-1", "QB-2", "QB-3"]);
    const names = answer.columns.map((column) => column.name);
    expect(names.slice(0, 7)).toEqual(["water", "case", "status", "message", "warnings", "iterations", "residual"]);
    for (const row of answer.rows) {
      expect(Object.keys(row)).toEqual(names);
      expect(row.status).toBe("ok");
      expect(row.residual).toBeLessThanOrEqual(1e-9);
    }
    // The pH given is one of the two facts, so it comes back.
    expect(answer.rows[1].pH).toBeCloseTo(7.7, 6);
    expect(answer.summary).toMatchObject({ rows: 3, ok: 3, invalid: 0, notConverged: 0 });
  });

  test("axis values stand between case and status, and rows that fail are data", async () => {
    const spec = sampleSpec(1, { vary: [{ field: "pH", values: [5, 7, 9] }] });
    const answer = await jsonOf<SolveResponse>(await solve(spec), 200);
    expect(answer.columns[2]).toMatchObject({ group: "axis" });
    expect(answer.rows.map((row) => row[answer.columns[2].name])).toEqual([5, 7, 9]);
    const faulty = sampleSpec(2) as { waters: { rows: Record<string, unknown>[] } };
    delete faulty.waters.rows[0].pH;
    const mixed = await jsonOf<SolveResponse>(await solve(faulty), 200);
    expect(mixed.rows.map((row) => row.status)).toEqual(["invalid", "ok"]);
    expect(mixed.rows[0].message).toContain("pH");
    expect(mixed.rows[0].ANC).toBeNull();
    expect(mixed.summary).toMatchObject({ rows: 2, ok: 1, invalid: 1 });
  });

  test("500 rows are answered; 501 are 422 naming the way out", async () => {
    expect((await jsonOf<SolveResponse>(await solve(sampleSpec(500)), 200)).rows).toHaveLength(500);
    const problem = await jsonOf<Problem>(await solve(sampleSpec(501)), 422);
    expect(problem.detail).toContain("POST /api/v1/jobs");
    expect(problem.errors?.[0]).toMatchObject({ code: "too-many-rows", value: "501" });
  });

  test("a stored set is read with its own units, under those of the spec", async () => {
    const row = { id: "a", temperature: 10, pH: 7.9, Ca: 62, alkalinity: 155 };
    const set = await jsonOf<{ id: string }>(await api("POST", "/sample-sets", { token, body: { name: "CaCO3 units", units: { alkalinity: "mg/L as CaCO3" }, rows: [row] } }), 201);
    const over = async (waters: object) => (await jsonOf<SolveResponse>(await solve(sampleSpec(0, { waters })), 200)).rows[0].ANC as number;
    const stored = await over({ set: set.id });
    expect(stored).toBeCloseTo(await over({ rows: [row], units: { alkalinity: "mg/L as CaCO3" } }), 9);
    expect(await over({ set: set.id, units: { alkalinity: "ueq/L" } })).toBeLessThan(stored / 5);
    expect((await solve(sampleSpec(0, { waters: { set: set.id } }), await modeller.token(["jobs:write"]))).status).toBe(403);
  });

  test("a typed water takes less than 50 ms of server time once warm", async () => {
    await solve(sampleSpec(1));
    const times: number[] = [];
    for (let i = 0; i < 20; i++) times.push((await jsonOf<SolveResponse>(await solve(sampleSpec(1, { title: `typed ${i}`, report: ["pH", "ANC", "SI", "species"] })), 200)).summary.milliseconds);
    expect(times.sort((a, b) => a - b)[18]).toBeLessThan(50);
  });
});

describe("GET /constants", () => {
  test("lists species and solids with log K at the temperature asked for, and a source each", async () => {
    const at = async (temperature: number) => (await jsonOf<ConstantsTable>(await api("GET", `/constants?temperature=${temperature}`, { token }), 200)).entries;
    const [warm, cold] = [await at(25), await at(5)];
    const calcite = (entries: ConstantsTable["entries"]) => entries.find((each) => each.name === "calcite");
    expect(calcite(warm)).toMatchObject({ kind: "solid", formula: "CaCO3" });
    // Plummer & Busenberg 1982: log K of calcite at 25 °C is −8.48.
    expect(calcite(warm)?.logK).toBeCloseTo(-8.48, 2);
    expect(calcite(cold)?.logK).toBeGreaterThan(calcite(warm)?.logK ?? 0);
    for (const entry of warm) if (entry.reaction) expect(entry.source, entry.name).toBeTruthy();
    expect(warm.filter((each) => each.kind === "species").length).toBeGreaterThan(30);
    expect((await api("GET", "/constants?temperature=95", { token })).status).toBe(400);
  });
});

test("GET /health answers without an account, with versions and the number of workers", async () => {
  const health = await jsonOf<Health>(await api("GET", "/health"), 200);
  expect(health).toMatchObject({ database: "ok", workers: expect.any(Number), engineVersion: expect.any(String), constantsVersion: expect.any(String) });
});
