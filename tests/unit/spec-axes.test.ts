/** Axes of a grid and names in a report. */
import { describe, expect, it, test } from "vitest";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { countRows } from "@/lib/chemistry/resolve-job";
import { faultsOf, issuesOf, onlyIssue, outcomes, type Parts, type Plain, resolved, specOf } from "./spec-fixtures";

const OPEN = { close: ["charge", "pCO2"], pCO2: "420 ppm" };
const axisOf = (axis: object, parts: Parts = { kase: OPEN }) => resolved({ ...parts, vary: [axis] }).axes[0];

describe("an axis", () => {
  it("from one end to the other holds both exactly as written, evenly spaced", () => {
    const { shown, base, unit } = axisOf({ field: "Na", from: 0.1, to: 0.7, points: 4, unit: "mmol/L" });
    expect([shown[0], shown[3], unit]).toEqual([0.1, 0.7, "mmol/L"]);
    expect(shown[1]).toBeCloseTo(0.3, 12);
    expect([base[0], base[3]]).toEqual([0.1e-3, 0.7 * 1e-3]);
  });

  it("on a log scale holds both ends exactly and the same ratio between neighbours", () => {
    const { shown, base, unit, isDryFraction } = axisOf({ field: "pCO2", from: "200 ppm", to: "20000 ppm", points: 41, scale: "log" });
    expect([shown[0], shown[40], unit, isDryFraction, shown.length]).toEqual([200, 20000, "ppm", true, 41]);
    expect([base[0], base[40]]).toEqual([200 * 1e-6, 20000 * 1e-6]);
    for (let k = 1; k < 41; k++) expect(shown[k] / shown[k - 1]).toBeCloseTo(100 ** (1 / 40), 12);
  });

  it("with values holds them as they are, in any order, in its unit or their own", () => {
    expect([...axisOf({ field: "Na", values: [0.1, 10, 1], unit: "mmol/L" }).shown]).toEqual([0.1, 10, 1]);
    const mixed = axisOf({ field: "Na", values: ["22.99 mg/L", "2 mmol/L"], unit: "mmol/L" });
    expect(mixed.shown[0]).toBeCloseTo(1, 12);
    expect(mixed.shown[1]).toBe(2);
  });

  it("is shown in its unit, else that of its first value with one, else the column's default", () => {
    expect(axisOf({ field: "Na", values: [1], unit: "meq/L" }).unit).toBe("meq/L");
    expect(axisOf({ field: "Na", values: ["1 mmol/L", "1 mg/L"] }).unit).toBe("mmol/L");
    expect(axisOf({ field: "NO3", values: ["1 mg/L as N"] }).unit).toBe("mg/L as N");
    expect(axisOf({ field: "Na", values: [1] }).unit).toBe("mg/L");
    expect(axisOf({ field: "Na", values: [1] }, { kase: OPEN, waters: { units: { Na: "ueq/L" } } }).unit).toBe("µeq/L");
    expect(axisOf({ field: "pH", values: [7] }, { kase: { close: ["pH", "DIC"] } }).unit).toBe("");
    expect(axisOf({ field: "temperature", from: 0, to: 30, points: 2 }).unit).toBe("°C");
  });

  it("over temperature in kelvin is 273.15 less in °C", () => {
    expect([...axisOf({ field: "temperature", values: ["273.15 K", "283.15 K"] }).base]).toEqual([0, 10]);
  });

  it("over a pressure takes { log10 }, and atm where a number is bare", () => {
    expect([...axisOf({ field: "pCO2", values: [{ log10: -3 }, 0.01] }).base]).toEqual([0.001, 0.01]);
  });

  test.each([
    "pCO2", "ANC", "pH", "temperature", "DIC", "alkalinity", "Ca", "DOC", "pHTemperature", "altitude", "pressure", "react/gas", "react/solids/calcite/saturation", "react/solids/calcite/supply", "react/solids/calcite/logK", "close/SI", "organic/sites", "constants/calcite/logK", "constants/HCO3^-/logK",
  ])("may vary %s", (field) => {
    const cases = [["charge", "pCO2"], ["pH", "DIC"], ["ANC", "pCO2"], ["alkalinity", { saturated: "calcite" }]].map((close, k) => ({ name: `${k}`, close, pCO2: "420 ppm", organic: { model: "oliver-1983" }, react: { solids: { calcite: {} } } }));
    expect(issuesOf({ cases, vary: [{ field, values: [1] }] })).toEqual([]);
  });

  test.each<[string, object, string, string]>([
    ["a field that is not there", { field: "mood", values: [1] }, "/vary/0/field", "unknown-field"], ["a field nearly right", { field: "react/solids/calcit/saturation", values: [1] }, "/vary/0/field", "unknown-field"], ["the conductivity", { field: "conductivity", values: [1] }, "/vary/0/field", "unknown-field"],
    ["a constant that is not there", { field: "constants/unobtainium/logK", values: [1] }, "/vary/0/field", "unknown-field"], ["a constant of a component", { field: "constants/Ca^2+/logK", values: [1] }, "/vary/0/field", "unknown-field"],
    ["no values", { field: "Na" }, "/vary/0", "missing"], ["an empty list", { field: "Na", values: [] }, "/vary/0/values", "out-of-range"], ["one end", { field: "Na", from: 1, points: 3 }, "/vary/0/to", "missing"], ["no count", { field: "Na", from: 1, to: 2 }, "/vary/0/points", "missing"],
    ["a single point", { field: "Na", from: 1, to: 2, points: 1 }, "/vary/0/points", "out-of-range"], ["half a point", { field: "Na", from: 1, to: 2, points: 2.5 }, "/vary/0/points", "wrong-type"], ["values and ends", { field: "Na", values: [1], from: 1 }, "/vary/0", "contradiction"],
    ["another scale", { field: "Na", from: 1, to: 2, points: 3, scale: "cubic" }, "/vary/0/scale", "unknown-value"], ["a log scale from zero", { field: "Na", from: 0, to: 2, points: 3, scale: "log" }, "/vary/0", "out-of-range"], ["a log scale from below zero", { field: "temperature", from: "10 °C", to: "-5 °C", points: 3, scale: "log" }, "/vary/0", "out-of-range"],
    ["ppm and atm", { field: "pCO2", values: ["420 ppm", "1 Pa"] }, "/vary/0/values/1", "mixed-units"], ["atm and ppm at its ends", { field: "pCO2", from: "0.001 atm", to: "20000 ppm", points: 3 }, "/vary/0/to", "mixed-units"],
    ["a value below a limit", { field: "Na", values: ["<1 mg/L"] }, "/vary/0/values/0", "unreadable-quantity"], ["a text", { field: "Na", values: [1, "x"] }, "/vary/0/values/1", "unreadable-quantity"], ["another unit", { field: "Na", values: [1], unit: "parsec" }, "/vary/0/unit", "unknown-unit"],
    ["a value's own wrong unit", { field: "Na", values: [1, "1 parsec"] }, "/vary/0/values/1", "unknown-unit"], ["a negative amount", { field: "Na", values: [1, -1] }, "/vary/0/values/1", "out-of-range"], ["an absurd end", { field: "temperature", from: 0, to: 300, points: 3 }, "/vary/0/to", "out-of-range"],
  ])("with %s is refused at its place", (_name, axis, pointer, code) => {
    expect(onlyIssue({ kase: OPEN, vary: [axis] })).toMatchObject({ pointer, code });
  });

  it("tells the nearest field", () => {
    expect(onlyIssue({ kase: OPEN, vary: [{ field: "temprature", values: [1] }] }).remedy).toContain("“temperature”");
    expect(onlyIssue({ kase: { ...OPEN, react: { solids: { calcite: {} } } }, vary: [{ field: "react/solids/calcite/saturaton", values: [1] }] }).remedy).toContain("“react/solids/calcite/saturation”");
  });

  it("may not come twice", () => {
    expect(faultsOf({ kase: OPEN, vary: [{ field: "Na", values: [1] }, { field: "Na", values: [2] }] })).toEqual(["/vary/1/field duplicate"]);
  });

  test.each<[string, Plain]>([
    ["pCO2", {}], ["pCO2", { react: {} }], ["pCO2", { react: { gas: "420 ppm" } }], ["ANC", {}], ["DIC", {}], ["close/SI", {}], ["react/gas", {}], ["react/solids/calcite/saturation", { react: { solids: { gypsum: {} } } }], ["organic/sites", {}], ["DOC", { organic: { model: "none" } }],
  ])("over %s that no case of %j would notice is refused", (field, kase) => {
    expect(onlyIssue({ kase, vary: [{ field, values: [1] }] })).toMatchObject({ pointer: "/vary/0/field", code: "idle-axis" });
  });

  it("over pCO2 is noticed by a case that is open to it", () => {
    expect(issuesOf({ kase: { react: { gas: "open" } }, vary: [{ field: "pCO2", values: ["420 ppm"] }] })).toEqual([]);
  });
});

describe("the rows of a grid", () => {
  it("are waters × cases × points, the first axis outermost", () => {
    const parts: Parts = { rows: [{ temperature: 5, pH: 7, DIC: 1 }, { temperature: 5, pH: 8, DIC: 1 }], cases: [{ name: "a", close: ["pH", "DIC"] }, { name: "b", close: ["pH", "DIC"], pH: 9 }], vary: [{ field: "DIC", values: [1, 2, 3] }, { field: "Na", values: [0, 1] }], report: ["pH", "DIC", "dissolved:Na"] };
    const { spec } = checkSpec(specOf(parts));
    expect([countRows(spec!, 2), countRows({ ...spec!, vary: undefined }, 2)]).toEqual([24, 4]);
    const rows = outcomes(parts);
    expect(rows).toHaveLength(24);
    expect([0, 6, 12, 18].map((at) => Math.round(rows[at].values.pH * 1e6) / 1e6)).toEqual([7, 9, 8, 9]);
    expect([0, 1, 2, 4].map((at) => [Math.round(rows[at].values.DIC * 1e9) / 1e6, rows[at].values["dissolved:Na"] > 0])).toEqual([[1, false], [1, true], [2, false], [3, false]]);
  });
});

describe("a report", () => {
  test.each(["pH", "ANC", "ANCions", "conservedANC", "alkalinity", "chargeError", "balanceError", "DIC", "ionicStrength", "pCO2", "conductivity", "species", "activities", "SI", "solids", "dissolved", "gas:CO2", "conc:CaHCO3^+", "conc:CO2(aq)", "lgActivity:H^+", "SI:Al(OH)3 (amorphous)", "solid:calcite", "dissolved:Ca", "dissolved:DIC"])("may name %s", (name) => {
    expect(issuesOf({ report: [name] })).toEqual([]);
  });

  it("may name the organic species of its cases, and of no other", () => {
    const organic = { pKa: [4, 5], sites: 8 };
    for (const name of ["conc:H2Org", "conc:HOrg^-", "lgActivity:Org^2-"]) {
      expect(issuesOf({ kase: { organic }, report: [name] })).toEqual([]);
      expect(onlyIssue({ report: [name] })).toMatchObject({ pointer: "/report/0", code: "unknown-column" });
    }
    expect(issuesOf({ cases: [{ name: "b", like: "a" }, { name: "a", close: ["pH", "alkalinity"], organic }], report: ["conc:H2Org"] })).toEqual([]);
  });

  test.each(["pHH", "ph", "conc:Xx", "conc:CO2(g)", "conc:CaHCO3+", "SI:calcit", "solid:", "dissolved:alkalinity", "toString", "gas:O2", ""])("may not name %j", (name) => {
    expect(onlyIssue({ report: ["pH", name] })).toMatchObject({ pointer: "/report/1", code: "unknown-column" });
  });

  it("tells the nearest column", () => expect(onlyIssue({ report: ["SI:calcit"] }).remedy).toBe("Did you mean “SI:calcite”?"));

  it("expands its groups, each column once, in its order; an empty one is the usual", () => {
    expect(Object.keys(outcomes({ report: ["SI:gypsum", "pH", "SI", "pH"] })[0].values).slice(0, 4)).toEqual(["SI:gypsum", "pH", "SI:calcite", "SI:aragonite"]);
    expect(resolved({ report: [] }).report).toEqual(resolved({}).report);
    expect(Object.keys(outcomes({ report: ["solids"], kase: { react: { solids: { calcite: {}, gypsum: {} } } } })[0].values)).toEqual(["solid:calcite", "solid:gypsum"]);
  });
});
