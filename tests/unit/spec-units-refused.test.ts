/** Quantities that cannot be read refuse the document, with the place and what to write instead. */
import { describe, expect, it, test } from "vitest";
import { issuesOf, onlyIssue } from "./spec-fixtures";

describe("a quantity of a row", () => {
  test.each<[string, unknown, string]>([
    ["Ca", "plenty", "unreadable-quantity"], ["Ca", "", "unreadable-quantity"], ["Ca", "mg/L", "unreadable-quantity"], ["Ca", true, "unreadable-quantity"], ["Ca", [62], "wrong-type"], ["Ca", { value: "62" }, "wrong-type"], ["Ca", {}, "missing"],
    ["Ca", "62 mg/furlong", "unknown-unit"], ["Ca", "62 mg", "unknown-unit"], ["Ca", "62 mg/L as N", "unknown-unit"], ["Ca", "62 mg/L as Unobtainium", "unknown-unit"], ["Ca", "62 °C", "unknown-unit"], ["Ca", "62,1 mg/L", "unreadable-quantity"],
    ["Si", "1 meq/L", "unknown-unit"], ["Na", "1 °dH", "unknown-unit"], ["alkalinity", "135 mg/L", "unknown-unit"], ["alkalinity", "1 meq/L as CaCO3", "unknown-unit"], ["alkalinity", { value: 1, unit: "mg/L", as: "constructor" }, "unknown-unit"],
    ["DOC", "1 meq/L", "unknown-unit"], ["DOC", "4 mg/L as N", "unknown-unit"], ["temperature", "8 mg/L", "unknown-unit"], ["temperature", "47 °F", "unknown-unit"], ["pH", "7.9 mg/L", "unknown-unit"],
    ["conductivity", { value: 1, unit: "toString" }, "unknown-unit"], ["pCO2", "420 mg/L", "unknown-unit"], ["pCO2", { log10: "x" }, "wrong-type"], ["pressure", "1000 ppm", "unknown-unit"], ["Ca", Infinity, "not-a-number"], ["Ca", "1e999 mg/L", "not-a-number"],
    ["pCO2", { log10: 400 }, "not-a-number"], ["Ca", `1${" ".repeat(300)}mg/L`, "unreadable-quantity"],
  ])("%s of %j is refused at its place", (key, raw, code) => {
    const issue = onlyIssue({ row: { [key]: raw } });
    expect(issue.code).toBe(code);
    expect(issue.pointer.startsWith(`/waters/rows/0/${key}`)).toBe(true);
  });

  it("names the units the column takes", () => {
    expect(onlyIssue({ row: { Ca: "62 mg/furlong" } }).remedy).toContain("mg/L, ug/L");
    expect(onlyIssue({ row: { alkalinity: "135 mg/L" } }).remedy).toContain("mg/L as CaCO3");
    expect(onlyIssue({ row: { Ca: "plenty" } })).toMatchObject({ value: "plenty", remedy: expect.stringContaining("62.1 mg/L") as string });
  });

  it("may not carry keys that a quantity has not", () => {
    expect(onlyIssue({ row: { Ca: { value: 62, units: "mg/L" } } })).toMatchObject({ pointer: "/waters/rows/0/Ca/units", code: "unknown-key", remedy: "Did you mean “unit”?" });
    expect(onlyIssue({ row: { Ca: { value: 62, sd: -1 } } })).toMatchObject({ pointer: "/waters/rows/0/Ca/sd", code: "out-of-range" });
  });
});

describe("a default unit", () => {
  it("of a column that is not there is refused with the nearest one", () => {
    expect(onlyIssue({ waters: { units: { alkalinty: "meq/L" } } })).toMatchObject({ pointer: "/waters/units/alkalinty", code: "unknown-column", remedy: "Did you mean “alkalinity”?" });
  });

  it("that its column does not take is one fault, not one for each row", () => {
    const rows = Array.from({ length: 50 }, () => ({ temperature: 8, Ca: 60 }));
    expect(issuesOf({ rows, waters: { units: { Ca: "parsec" } } })).toMatchObject([{ pointer: "/waters/units/Ca", code: "unknown-unit", value: "parsec" }]);
  });
});

describe("a value of a case", () => {
  test.each<[string, unknown, string]>([
    ["temperature", 300, "out-of-range"], ["temperature", -1, "out-of-range"], ["pH", 17, "out-of-range"], ["Ca", -1, "out-of-range"], ["Ca", "-1 mg/L", "out-of-range"], ["DIC", -1, "out-of-range"], ["pCO2", 0, "out-of-range"],
    ["pCO2", "-400 ppm", "out-of-range"], ["pressure", 0, "out-of-range"], ["altitude", 99999, "out-of-range"], ["Ca", "x", "unreadable-quantity"], ["Ca", "1 mg/furlong", "unknown-unit"],
  ])("%s of %j is the document's own fault", (key, raw, code) => {
    expect(onlyIssue({ kase: { [key]: raw } })).toMatchObject({ pointer: `/cases/0/${key}`, code });
  });

  it("may be negative for ANC and alkalinity alone", () => expect(issuesOf({ kase: { ANC: -50, alkalinity: "-0.1 meq/L" } })).toEqual([]));

  it("may sit at both ends of what is allowed", () => {
    for (const kase of [{ temperature: 0 }, { temperature: 90 }, { pH: -2 }, { pH: 16 }, { Ca: 0 }, { pCO2: 1e-12 }]) expect(issuesOf({ kase })).toEqual([]);
  });
});
