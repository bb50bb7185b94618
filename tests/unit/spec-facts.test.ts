/** Which two facts settle a water, and why the others do not. */
import { describe, expect, it, test } from "vitest";
import { onlyIssue, outcomes, type Plain, resolved } from "./spec-fixtures";

const FACTS: unknown[] = ["charge", "ANC", "alkalinity", "pH", "pCO2", "DIC", { saturated: "calcite" }];
const nameOf = (fact: unknown): string => (typeof fact === "string" ? fact : "saturated");
const ALLOWED = new Set([
  ...["charge", "ANC", "alkalinity", "pH"].flatMap((proton) => ["pCO2", "DIC", "saturated"].map((carbon) => `${proton} ${carbon}`)),
  "pH charge", "pH ANC", "pH alkalinity", "DIC pCO2",
]);
const isAllowed = (a: string, b: string): boolean => ALLOWED.has(`${a} ${b}`) || ALLOWED.has(`${b} ${a}`);
const PAIRS = FACTS.flatMap((a) => FACTS.map((b): [string, string, unknown[]] => [nameOf(a), nameOf(b), [a, b]]));
const FULL: Plain = { ANC: "3000 ueq/L", DIC: 3, pCO2: "0.01 atm" };

describe("the pairs of facts", () => {
  test.each(PAIRS.filter(([a, b]) => isAllowed(a, b)))("%s with %s settles a water", (_a, _b, close) => {
    const [row] = outcomes({ row: FULL, kase: { close } });
    expect(row.status, row.message).toBe("ok");
  });

  test.each(PAIRS.filter(([a, b]) => !isAllowed(a, b)))("%s with %s is refused with the reason and the pairs there are", (a, b, close) => {
    const issue = onlyIssue({ row: FULL, kase: { close } });
    expect(issue).toMatchObject({ pointer: "/cases/0/close", code: "no-pair" });
    expect(issue.message).toContain(a);
    expect(issue.message).toMatch(a === b ? /twice/ : /both fix/);
    expect(issue.remedy).toContain("DIC with pCO2");
    void b;
  });

  it("are 16 of 28, whichever way round they are written", () => {
    const unordered = PAIRS.filter(([a, b]) => FACTS.findIndex((each) => nameOf(each) === a) <= FACTS.findIndex((each) => nameOf(each) === b));
    expect([unordered.length, unordered.filter(([a, b]) => isAllowed(a, b)).length]).toEqual([28, 16]);
    for (const [, , close] of PAIRS.filter(([a, b]) => isAllowed(a, b))) {
      const [one, other] = [close, [...close].reverse()].map((each) => outcomes({ row: FULL, kase: { close: each } })[0].values.pH);
      expect(one).toBe(other);
    }
  });
});

describe("close", () => {
  test.each<[unknown, string, string]>([
    [["pH"], "/cases/0/close", "out-of-range"], [["pH", "DIC", "pCO2"], "/cases/0/close", "out-of-range"], ["pH", "/cases/0/close", "wrong-type"], [["pH", "alkalinty"], "/cases/0/close/1", "unknown-value"],
    [["pH", { saturated: "calcit" }], "/cases/0/close/1/saturated", "unknown-value"], [["pH", { saturated: "calcite", si: 0 }], "/cases/0/close/1/si", "unknown-key"], [["pH", { SI: 0 }], "/cases/0/close/1/saturated", "unknown-value"],
  ])("%j is refused at its place", (close, pointer, code) => expect(onlyIssue({ kase: { close } })).toMatchObject({ pointer, code }));

  it("is missing where neither the case nor what it is like gives it", () => {
    expect(onlyIssue({ cases: [{ name: "a", close: ["pH", "DIC"] }, { name: "b" }] })).toMatchObject({ pointer: "/cases/1/close", code: "missing" });
  });

  it("tells the nearest name of a fact", () => {
    expect(onlyIssue({ kase: { close: ["pH", "alkalinty"] } }).remedy).toContain("“alkalinity”");
    expect(onlyIssue({ kase: { close: ["pH", { saturated: "calcit" }] } }).remedy).toContain("“calcite”");
  });
});

describe("electroneutrality", () => {
  const without = (...keys: string[]): Plain => Object.fromEntries(keys.map((key) => [key, null]));
  const closed = { close: ["charge", "pCO2"], pCO2: "420 ppm" };

  it("refuses a row without Ca, Mg, Na, Cl or SO4 and says which is missing", () => {
    for (const key of ["Ca", "Mg", "Na", "Cl", "SO4"]) {
      const [row] = outcomes({ row: without(key), kase: closed });
      expect(row.status).toBe("invalid");
      expect(row.message).toContain(`missing for electroneutrality: ${key}`);
    }
    expect(outcomes({ row: without("Ca", "SO4"), kase: closed })[0].message).toContain("Ca, SO4");
    expect(outcomes({ row: without("K"), kase: closed })[0].status).toBe("ok");
  });

  it("takes a missing one for none with missing: zero, or from the case or an axis", () => {
    expect(outcomes({ row: without("Ca"), kase: closed, waters: { missing: "zero" } })[0].status).toBe("ok");
    expect(outcomes({ row: without("Ca"), kase: { ...closed, Ca: "60 mg/L" } })[0].status).toBe("ok");
    expect(outcomes({ row: without("Ca"), kase: closed, vary: [{ field: "Ca", values: [60] }] })[0].status).toBe("ok");
  });

  it("needs nothing of the kind for the other facts", () => {
    expect(outcomes({ row: without("Ca", "Mg", "Na", "Cl", "SO4") })[0].status).toBe("ok");
    expect(resolved({ row: without("Ca") }).waters[0].totals).not.toHaveProperty("Ca");
  });
});

describe("the temperature of the pH", () => {
  it("is where the facts settle the water, which is then brought closed to its own", () => {
    const report = ["pH", "DIC", "alkalinity"];
    const kase = { close: ["pH", "alkalinity"] };
    const [lab] = outcomes({ row: { temperature: 20.5 }, kase, report });
    const [field] = outcomes({ row: { temperature: 8.4, pHTemperature: 20.5 }, kase, report });
    expect(field.values.DIC).toBeCloseTo(lab.values.DIC, 10);
    expect(field.values.pH - lab.values.pH).toBeGreaterThan(0.05);
    expect(outcomes({ row: { temperature: 8.4, pHTemperature: 8.4 }, kase, report })[0].values.pH).toBeCloseTo(7.9, 9);
  });
});
