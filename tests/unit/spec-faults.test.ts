/** Faults of a document: each at its place, with the nearest name, all of them at once. */
import { describe, expect, it, test } from "vitest";
import { checkSpec, MOST_ISSUES, readStoredSpec } from "@/lib/chemistry/check-spec";
import { faultsOf, issuesOf, onlyIssue, outcomes, type Parts, type Plain, ROW, specOf } from "./spec-fixtures";

describe("an unknown key", () => {
  test.each<[Parts, string, string]>([
    [{ more: { tittle: "x" } }, "/tittle", "title"], [{ more: { solvr: {} } }, "/solvr", "solver"], [{ waters: { unit: {} } }, "/waters/unit", "units"], [{ row: { Calcium: 1 } }, "/waters/rows/0/Calcium", ""],
    [{ row: { alkalinty: 1 } }, "/waters/rows/0/alkalinty", "alkalinity"], [{ row: { ph: 7 } }, "/waters/rows/0/ph", "pH"], [{ row: { "a/b~c": null } }, "/waters/rows/0/a~1b~0c", ""], [{ kase: { actvity: "davies" } }, "/cases/0/actvity", "activity"],
    [{ kase: { conductivity: 300 } }, "/cases/0/conductivity", ""], [{ kase: { constants: { calcit: { logK: 1 } } } }, "/cases/0/constants/calcit", "calcite"], [{ kase: { constants: { calcite: { logk: 1 } } } }, "/cases/0/constants/calcite/logk", "logK"],
    [{ kase: { organic: { modle: "none" } } }, "/cases/0/organic/modle", "model"], [{ vary: [{ feild: "pH", values: [7] }] }, "/vary/0/feild", "field"], [{ more: { solver: { tolerence: 1e-10 } } }, "/solver/tolerence", "tolerance"],
  ])("in %j is named at its place with the nearest one", (parts, pointer, nearest) => {
    const issue = issuesOf(parts).find((each) => each.pointer === pointer);
    expect(issue, JSON.stringify(issuesOf(parts))).toMatchObject({ code: "unknown-key" });
    expect(issue!.remedy).toContain(nearest ? `Did you mean “${nearest}”?` : "");
  });

  test.each<[Parts, string]>([
    [{ more: { infer: {} } }, "/infer"], [{ more: { draws: { n: 10 } } }, "/draws"], [{ more: { judge: {} } }, "/judge"], [{ kase: { steps: [] } }, "/cases/0/steps"], [{ kase: { keep: "last" } }, "/cases/0/keep"],
    [{ kase: { alkalinityBasis: "titrated" } }, "/cases/0/alkalinityBasis"], [{ row: { titration: {} } }, "/waters/rows/0/titration"], [{ report: ["pH~sd"] }, "/report/0"],
  ])("of a later version, %j, is refused by name as not available yet", (parts, pointer) => {
    expect(onlyIssue(parts)).toMatchObject({ pointer, code: "not-available-yet", message: expect.stringContaining("not available yet") as string });
  });
});

describe("the document", () => {
  test.each<[string, Parts, string, string]>([
    ["another version", { more: { spec: 2 } }, "/spec", "unknown-value"], ["a title that is no text", { more: { title: 7 } }, "/title", "wrong-type"], ["a set and rows", { waters: { set: "set_abc" } }, "/waters", "contradiction"],
    ["neither a set nor rows", { waters: { rows: undefined } }, "/waters", "missing"], ["no row", { rows: [] }, "/waters/rows", "out-of-range"], ["rows that are no list", { waters: { rows: {} } }, "/waters/rows", "wrong-type"], ["a row that is none", { rows: [7] }, "/waters/rows/0", "wrong-type"],
    ["a set that names none", { waters: { rows: undefined, set: "my set" } }, "/waters/set", "unreadable-reference"], ["another way to count limits", { waters: { belowLimit: "third" } }, "/waters/belowLimit", "unknown-value"],
    ["another way with missing values", { waters: { missing: "guess" } }, "/waters/missing", "unknown-value"], ["no case", { cases: [] }, "/cases", "out-of-range"], ["cases that are no list", { cases: {} as never }, "/cases", "wrong-type"],
    ["a case without a name", { cases: [{ close: ["pH", "DIC"] }] }, "/cases/0/name", "missing"], ["two cases of one name", { cases: [{ name: "a", close: ["pH", "DIC"] }, { name: "a", close: ["pH", "DIC"] }] }, "/cases/1/name", "duplicate"],
    ["another activity model", { kase: { activity: "davis" } }, "/cases/0/activity", "unknown-value"], ["a complex that is none", { kase: { complexes: ["CaHCO3+"] } }, "/cases/0/complexes/0", "unknown-value"], ["an id that is a list", { row: { id: [1] } }, "/waters/rows/0/id", "wrong-type"],
    ["a date of a page's length", { row: { date: "x".repeat(41) } }, "/waters/rows/0/date", "out-of-range"], ["a constant without a value", { kase: { constants: { calcite: {} } } }, "/cases/0/constants/calcite/logK", "missing"],
    ["a tolerance above 1e-9", { more: { solver: { tolerance: 1.1e-9 } } }, "/solver/tolerance", "out-of-range"], ["a tolerance no number reaches", { more: { solver: { tolerance: 1e-17 } } }, "/solver/tolerance", "out-of-range"],
    ["no iterations", { more: { solver: { maxIterations: 0 } } }, "/solver/maxIterations", "out-of-range"], ["half an iteration", { more: { solver: { maxIterations: 1.5 } } }, "/solver/maxIterations", "wrong-type"],
  ])("with %s is refused at its place", (_name, parts, pointer, code) => {
    const document = JSON.parse(JSON.stringify(specOf(parts))) as unknown;
    const { issues } = checkSpec(document);
    expect(issues, JSON.stringify(issues)).toMatchObject([{ pointer, code }]);
  });

  it("may hold what is at the edge of what is allowed", () => {
    for (const solver of [{ tolerance: 1e-9 }, { tolerance: 1e-15 }, { maxIterations: 1 }, {}]) expect(issuesOf({ more: { solver } })).toEqual([]);
    for (const set of ["set_abc", "set_abc@3"]) expect(checkSpec({ ...specOf(), waters: { set } }).issues).toEqual([]);
  });

  test.each<[unknown]>([[null], [7], ["spec"], [[]], [{}], [{ spec: 99 }], [{ spec: 1, waters: null, cases: null }], [{ spec: 1, waters: [], cases: {} }], [JSON.parse('{"__proto__": {"spec": 1}, "constructor": 1}')], [undefined]])("%j is refused, not stumbled over", (document) => {
    const { spec, issues } = checkSpec(document);
    expect(spec).toBeNull();
    expect(issues.length).toBeGreaterThan(0);
  });
});

describe("faults", () => {
  it("of every part come at once, though another part is no good", () => {
    expect(faultsOf({
      row: { Ca: "x", Zz: 1 }, waters: { units: { Mg: "parsec" }, belowLimit: "third" }, kase: { close: ["pH", "pH"], activity: "davies", temperature: 300, react: { solids: { calcite: { supply: "?" } } } },
      vary: [{ field: "mood", values: [1] }], report: ["pHH"], more: { tittle: 1, solver: { tolerance: 1 } },
    }).sort()).toEqual([
      "/cases/0/close no-pair", "/cases/0/react/solids/calcite/supply unreadable-quantity", "/cases/0/temperature out-of-range", "/report/0 unknown-column", "/solver/tolerance out-of-range", "/tittle unknown-key", "/vary/0/field unknown-field",
      "/waters/belowLimit unknown-value", "/waters/rows/0/Ca unreadable-quantity", "/waters/rows/0/Zz unknown-key", "/waters/units/Mg unknown-unit",
    ]);
  });

  it("are a hundred at most, of any one kind or of all", () => {
    const many = (make: (k: number) => [string, unknown]): Plain => Object.fromEntries(Array.from({ length: 5000 }, (_, k) => make(k)));
    expect(MOST_ISSUES).toBe(100);
    for (const parts of [
      { rows: Array.from({ length: 5000 }, () => ({ Ca: "x", Zz: 1 })) }, { row: many((k) => [`key${k}`, k]) }, { more: many((k) => [`key${k}`, k]) }, { kase: many((k) => [`key${k}`, k]) }, { waters: { units: many((k) => [`key${k}`, "mg/L"]) } },
      { vary: [{ field: "pH", values: Array.from({ length: 5000 }, () => "x") }], rows: Array.from({ length: 99 }, () => ({ Ca: "x" })) }, { report: Array.from({ length: 500 }, (_, k) => `x${k}`) },
    ] as Parts[]) expect(issuesOf(parts)).toHaveLength(MOST_ISSUES);
  });

  it("carry the value in at most 80 characters", () => {
    for (const parts of [{ row: { Ca: "x".repeat(5000) } }, { kase: { activity: "x".repeat(5000) } }, { report: ["x".repeat(150)] }, { more: { ["x".repeat(5000)]: 1 } }]) expect(onlyIssue(parts).value!.length).toBeLessThanOrEqual(80);
  });
});

describe("a stored spec", () => {
  it("is read back as it was accepted, whether it has rows or names a set", () => {
    for (const document of [specOf(), { ...specOf(), waters: { set: "set_abc@3", units: { Ca: "mmol/L" } } }]) expect(readStoredSpec(document)).toEqual(checkSpec(document).spec);
  });

  it("that is none is thrown out", () => expect(() => readStoredSpec({ waters: { rows: [] } })).toThrow());
});

describe("a fault of one row's values", () => {
  test.each<[string, Plain, RegExp]>([
    ["a negative amount", { Ca: -62 }, /Ca is negative/], ["a negative amount with a unit", { SO4: "-1 mmol/L" }, /SO4 is negative/], ["a negative DIC", { DIC: -1 }, /DIC is negative/], ["a negative DOC", { DOC: -1 }, /DOC is negative/], ["a conductivity below zero", { conductivity: -3 }, /conductivity is negative/],
    ["an absurd temperature", { temperature: 300 }, /temperature 300 °C is outside 0 to 90/], ["no temperature", { temperature: null }, /no temperature/], ["an absurd pH", { pH: 40 }, /pH 40 is outside -2 to 16/], ["an absurd temperature of the pH", { pHTemperature: -5 }, /pHTemperature/],
    ["a missing value", { pH: null }, /no pH/], ["no pressure of CO2", { pCO2: 0 }, /pCO2 is not above 0/], ["a negative pressure of CO2", { pCO2: "-400 ppm" }, /pCO2 is not above 0/], ["a pressure of CO2 below a limit that counts as none", { pCO2: "<400 ppm" }, /pCO2 is not above 0/],
    ["an absurd pressure", { pressure: -1 }, /pressure is out of range/], ["an absurd altitude", { altitude: 1e6 }, /altitude is out of range/],
  ])("(%s) makes that row invalid with its reason, and the job goes on", (_name, row, message) => {
    const rows = outcomes({ rows: [{ ...ROW, ...row }, ROW], waters: { belowLimit: "zero" } });
    expect(rows.map(({ status }) => status)).toEqual(["invalid", "ok"]);
    expect(rows[0].message).toMatch(message);
    expect(Number.isNaN(rows[0].values.pH)).toBe(true);
  });

  it("is named for each of its values", () => {
    const [row] = outcomes({ row: { Ca: -1, Mg: -1 } });
    expect(row.message).toMatch(/Ca is negative.*Mg is negative/);
  });

  it("is none where alkalinity or ANC lies below zero", () => {
    expect(outcomes({ row: { alkalinity: -0.1, pH: null }, kase: { close: ["alkalinity", "pCO2"], pCO2: "420 ppm" } })[0].status).toBe("ok");
    expect(outcomes({ row: { ANC: -100 }, kase: { close: ["ANC", "pCO2"], pCO2: "420 ppm" } })[0].status).toBe("ok");
  });
});
