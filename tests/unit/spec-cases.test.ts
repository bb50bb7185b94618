/** Cases: what wins over what, what a case is like, and what holds where nothing is said. */
import { describe, expect, it, test } from "vitest";
import { faultsOf, onlyIssue, outcomes, type Plain, resolved } from "./spec-fixtures";

const first = (kase: Plain, row: Plain = {}) => resolved({ kase, row }).cases[0];

describe("precedence", () => {
  const temperatureOf = (row: Plain, kase: Plain, vary?: unknown[]): number => {
    // The temperature that a row was solved at, read back from the constant of water.
    const { values } = outcomes({ row, kase: { close: ["pH", "DIC"], activity: "ideal", ...kase }, vary, report: ["lgActivity:OH^-", "lgActivity:H^+"] })[0];
    return -values["lgActivity:OH^-"] - values["lgActivity:H^+"];
  };
  const PKW = { 0: 14.942, 10: 14.534, 25: 14.0 };

  it("is axis over case over row for a condition", () => {
    const row = { temperature: 0, DIC: 2 };
    expect(temperatureOf(row, {})).toBeCloseTo(PKW[0], 2);
    expect(temperatureOf(row, { temperature: 10 })).toBeCloseTo(PKW[10], 2);
    expect(temperatureOf(row, { temperature: 10 }, [{ field: "temperature", values: [25] }])).toBeCloseTo(PKW[25], 2);
  });

  test.each<[string, unknown, unknown, unknown[], string, number[]]>([
    ["an analyte", "1 mmol/L", "2 mmol/L", ["3 mmol/L"], "dissolved:Na", [1e-3, 2e-3, 3e-3]],
    ["total inorganic carbon", 1, 2, [3], "DIC", [1e-3, 2e-3, 3e-3]],
    ["pH", 7, 8, [9], "pH", [7, 8, 9]],
  ])("is axis over case over row for %s", (_name, row, kase, values, column, expected) => {
    const field = { "dissolved:Na": "Na", DIC: "DIC", pH: "pH" }[column]!;
    const run = (own: Plain, vary?: unknown[]): number => outcomes({ row: { pH: 7, DIC: 1, [field]: row }, kase: { close: ["pH", "DIC"], ...own }, vary, report: [column] })[0].values[column];
    [run({}), run({ [field]: kase }), run({ [field]: kase }, [{ field, values }])].forEach((found, k) => expect(found).toBeCloseTo(expected[k], 9));
  });

  it("lets an axis over a constant win over the case's own, and that over the constants set", () => {
    const run = (kase: Plain, vary?: unknown[]): number => outcomes({ kase, vary, report: ["SI:calcite"] })[0].values["SI:calcite"];
    const usual = run({ constants: { calcite: { logK: -8 } } });
    expect(run({ constants: { calcite: { logK: -9 } } }) - usual).toBeCloseTo(1, 9);
    expect(run({ constants: { calcite: { logK: -9 } } }, [{ field: "constants/calcite/logK", values: [-10] }]) - usual).toBeCloseTo(2, 9);
    expect(run({}) - usual).toBeCloseTo(0.41, 2);
  });
});

describe("like", () => {
  const chain = [
    { name: "c", like: "b", temperature: 3, react: { solids: { calcite: {} } } }, { name: "b", like: "a", temperature: 2, Ca: "2 mmol/L", react: { gas: "open" } },
    { name: "a", close: ["charge", "pCO2"], pCO2: "420 ppm", temperature: 1, Ca: "1 mmol/L", Mg: "1 mmol/L", activity: "ideal", organic: { model: "oliver-1983" }, complexes: "none" },
  ];

  it("starts from the other case, in any order and through any number of them, then overrides key by key", () => {
    const [c, b, a] = resolved({ cases: chain }).cases;
    expect(c).toMatchObject({ name: "c", activity: "ideal", complexes: "none", organic: { model: "oliver-1983" }, close: { facts: ["charge", "pCO2"] } });
    expect([c, b, a].map(({ given }) => [given.temperature, given.totals])).toEqual([[3, { Ca: 2e-3, Mg: 1e-3 }], [2, { Ca: 2e-3, Mg: 1e-3 }], [1, { Ca: 1e-3, Mg: 1e-3 }]]);
    expect(c.react).toMatchObject({ gas: "open", solids: [{ name: "calcite" }] });
    expect(b.react).toEqual({ gas: "open", solids: [] });
    expect(a.react).toBeNull();
  });

  it("takes a close over, and checks it where it stands", () => {
    expect(onlyIssue({ cases: [{ name: "a", close: ["ANC", "alkalinity"] }, { name: "b", like: "a" }] }).pointer).toBe("/cases/0/close");
    expect(onlyIssue({ cases: [{ name: "a", close: ["pH", "DIC"] }, { name: "b", like: "a", close: ["pH", "pH"] }] }).pointer).toBe("/cases/1/close");
  });

  it("may not lead nowhere, round in a circle, or to the case itself", () => {
    const base = { name: "base case", close: ["pH", "alkalinity"] };
    expect(onlyIssue({ cases: [base, { name: "b", like: "bse case", close: ["pH", "DIC"] }] })).toMatchObject({ pointer: "/cases/1/like", code: "unknown-case", remedy: "Did you mean “base case”?" });
    expect(onlyIssue({ cases: [{ ...base, like: "base case" }] })).toMatchObject({ pointer: "/cases/0/like", code: "circular" });
    const round = [{ ...base, name: "x", like: "y" }, { ...base, name: "y", like: "z" }, { ...base, name: "z", like: "x" }];
    expect(faultsOf({ cases: round })).toEqual(["/cases/0/like circular", "/cases/1/like circular", "/cases/2/like circular"]);
  });
});

describe("what holds where a case says nothing", () => {
  it("is Davies, no organic acids, all complexes, the constants set and no reaction", () => {
    expect(first({})).toMatchObject({ activity: "davies", organic: { model: "none", sitesPerMgC: 0 }, complexes: "all", constants: {}, react: null, given: {} });
  });

  it("is a missing analyte refused, below limit half, tolerance 1e-10, 100 iterations, the usual report", () => {
    expect(resolved({})).toMatchObject({ missing: "refuse", solver: { tolerance: 1e-10, maxIterations: 100 }, report: ["pH", "ANC", "alkalinity", "DIC", "pCO2", "ionicStrength", "balanceError", "conductivity", "SI"] });
  });

  test.each<[unknown[], unknown, unknown]>([
    [["charge", "pCO2"], undefined, "open"], [["DIC", "pCO2"], undefined, "open"], [["pH", "alkalinity"], undefined, "closed"], [["charge", { saturated: "calcite" }], undefined, "closed"],
    [["charge", "pCO2"], "closed", "closed"], [["pH", "DIC"], "open", "open"], [["pH", "DIC"], "420 ppm", { dryFraction: 420 * 1e-6 }], [["pH", "DIC"], 0.01, { atm: 0.01 }], [["pH", "DIC"], { log10: -2 }, { atm: 0.01 }],
  ])("is the gas of a reaction after %j, said %j: %j", (close, gas, expected) => {
    expect(first({ close, react: gas === undefined ? {} : { gas } }).react!.gas).toEqual(expected);
  });

  it("is a solid that may form at saturation 0 with the set's constant, and that is not there", () => {
    expect(first({ react: { solids: { calcite: {} } } }).react!.solids).toEqual([{ name: "calcite", supply: "may-form", saturation: 0, logK: null }]);
  });

  it("is a saturation index of 0 for a saturated fact", () => {
    expect(first({ close: ["charge", { saturated: "calcite" }] }).close).toEqual({ facts: ["charge", "saturated"], saturated: { solid: "calcite", SI: 0 } });
  });

  it("is W1, W2 … for waters without an id", () => {
    expect(resolved({ rows: [{}, { id: null }, { id: "" }, { id: 7 }, { id: "B-03" }] }).waters.map(({ id }) => id)).toEqual(["W1", "W2", "W3", "7", "B-03"]);
  });
});

describe("supply, sites and models", () => {
  test.each<[unknown, unknown]>([["excess", "excess"], ["may-form", "may-form"], ["0.2 mmol/L", 0.2e-3], [0.2, 0.2e-3], ["100.086 mg/L", 1e-3], [{ value: 200, unit: "umol/L" }, 200e-6], [0, 0]])("a supply of %j is %j mol/kg", (supply, expected) => {
    const [solid] = first({ react: { solids: { calcite: { supply, saturation: 0.3, logK: -8.4 } } } }).react!.solids;
    expect(solid).toMatchObject({ saturation: 0.3, logK: -8.4 });
    if (typeof expected === "number") expect(solid.supply).toBeCloseTo(expected, 9);
    else expect(solid.supply).toBe(expected);
  });

  test.each<[unknown, string, number[], number]>([
    [{ model: "none" }, "none", [], 0], [{ model: "oliver-1983" }, "oliver-1983", [], 10e-6], [{ model: "hruska-2003" }, "hruska-2003", [3.04, 4.51, 6.46], 8.6e-6], [{ model: "driscoll-1994" }, "driscoll-1994", [2.62, 5.66, 5.94], 0.055e-3 / 12.011],
    [{ model: "hruska-2003", sites: "9 ueq/mg" }, "hruska-2003", [3.04, 4.51, 6.46], 9e-6], [{ pKa: [3.5, 5], sites: 8 }, "own", [3.5, 5], 8e-6], [{ pKa: [4], sites: "8 meq/g" }, "own", [4], 8e-6],
  ])("organic %j is %s", (organic, model, pKa, sites) => {
    const found = first({ organic }).organic;
    expect(found).toMatchObject({ model, pKa });
    expect(found.sitesPerMgC).toBeCloseTo(sites, 12);
  });

  test.each<[unknown, string, string]>([
    [{ pKa: [4] }, "/cases/0/organic/sites", "missing"], [{ pKa: [4], sites: 8, model: "oliver-1983" }, "/cases/0/organic", "contradiction"], [{}, "/cases/0/organic", "missing"], [{ sites: 8 }, "/cases/0/organic", "missing"],
    [{ model: "oliver" }, "/cases/0/organic/model", "unknown-value"], [{ pKa: [4], sites: "8 mg/L" }, "/cases/0/organic/sites", "unknown-unit"], [{ pKa: [4], sites: -1 }, "/cases/0/organic/sites", "out-of-range"], [{ pKa: [], sites: 1 }, "/cases/0/organic/pKa", "out-of-range"],
  ])("organic %j is refused", (organic, pointer, code) => expect(onlyIssue({ kase: { organic } })).toMatchObject({ pointer, code }));

  test.each<[unknown, string, string]>([
    [{ gas: "shut" }, "gas", "unreadable-quantity"], [{ gas: 0 }, "gas", "out-of-range"], [{ gas: "420 mg/L" }, "gas", "unknown-unit"], [{ gass: "open" }, "gass", "unknown-key"], [{ solids: { calcit: {} } }, "solids/calcit", "unknown-key"],
    [{ solids: { calcite: { supply: "plenty" } } }, "solids/calcite/supply", "unreadable-quantity"], [{ solids: { calcite: { supply: -1 } } }, "solids/calcite/supply", "out-of-range"], [{ solids: { calcite: { saturation: 1e9 } } }, "solids/calcite/saturation", "out-of-range"],
    [{ solids: { calcite: { suply: "excess" } } }, "solids/calcite/suply", "unknown-key"], [{ solids: { calcite: { logK: 1e9 } } }, "solids/calcite/logK", "out-of-range"],
  ])("react %j is refused at its place", (react, place, code) => {
    const issue = onlyIssue({ kase: { react } });
    expect(issue).toMatchObject({ pointer: `/cases/0/react/${place}`, code });
    expect(issue.remedy ?? "").not.toBe("");
  });
});
