import { describe, expect, it } from "vitest";
import { BECK, closing, isClose, makeAxis, makeCase, makeJob, makeWater, meeting, solveAll, solveOne } from "@/tests/unit/kernel-fixtures";

const REPORT = ["pH", "ANC", "ANCions", "conservedANC", "DIC", "pCO2", "chargeError", "SI", "solids", "gas:CO2", "dissolved", "conc:Ca^2+"];
const gypsumWater = { temperature: 25, totals: { Ca: 0.02, SO4: 0.02, Na: 1e-3, Cl: 1e-3 }, pCO2: { atm: 4e-4 } };

describe("solids in excess", () => {
  it("bring the water to their saturation and keep the rest of it", () => {
    const before = solveOne(BECK, {}, REPORT);
    const row = solveOne(BECK, meeting("closed", { calcite: "excess" }), REPORT);
    expect(row.message).toBe("");
    expect(row.values["SI:calcite"]).toBeCloseTo(0, 9);
    const formed = -row.values["solid:calcite"] / 1e3;
    expect(isClose(before.values["dissolved:Ca"] - row.values["dissolved:Ca"], formed, 1e-9)).toBe(true);
    expect(isClose(before.values.DIC - row.values.DIC, formed, 1e-9)).toBe(true);
    expect(row.values["gas:CO2"]).toBe(0);
    expect(isClose(before.values["dissolved:Mg"], row.values["dissolved:Mg"], 1e-12)).toBe(true);
  });
  it("reach the saturation asked for", () => {
    const kase = { react: { gas: "open" as const, solids: [{ name: "calcite", supply: "excess" as const, saturation: 0.3, logK: null }] } };
    expect(solveOne(BECK, kase, REPORT).values["SI:calcite"]).toBeCloseTo(0.3, 9);
  });
  it("leave conservedANC as it was while only carbonate reacts", () => {
    const before = solveOne(BECK, {}, REPORT);
    const row = solveOne(BECK, meeting("open", { calcite: "excess" }), REPORT);
    expect(isClose(row.values.conservedANC, before.values.ANC - 2e6 * before.values["dissolved:Ca"], 1e-9)).toBe(true);
    expect(Math.abs(row.values.ANC - before.values.ANC)).toBeGreaterThan(100);
  });
  it("supply components that the water lacks", () => {
    const row = solveOne({ DIC: 0 }, { ...closing("charge", "DIC"), ...meeting("closed", { gypsum: "excess", calcite: "excess" }) }, REPORT);
    expect(row.message).toBe("");
    expect(row.values["SI:gypsum"]).toBeCloseTo(0, 9);
    expect(row.values["SI:calcite"]).toBeCloseTo(0, 9);
    expect(isClose(row.values["dissolved:SO4"] * 1e3, row.values["solid:gypsum"], 1e-9)).toBe(true);
  });
});

describe("solids that may form", () => {
  it("form when their saturation would be passed, and not before", () => {
    const over = solveOne({ ...BECK, pCO2: { atm: 4e-4 } }, meeting("open", { calcite: "may-form" }), REPORT);
    expect(over.values["solid:calcite"]).toBeLessThan(-0.1);
    expect(over.values["SI:calcite"]).toBeCloseTo(0, 9);
    const under = solveOne({ ...BECK, pCO2: { atm: 0.1 } }, meeting("open", { calcite: "may-form" }), REPORT);
    expect(under.values["solid:calcite"]).toBe(0);
    expect(under.values["SI:calcite"]).toBeLessThan(0);
  });
  it("of one composition: only the least soluble forms", () => {
    const row = solveOne({ ...BECK, pCO2: { atm: 4e-4 } }, meeting("open", { aragonite: "may-form", calcite: "may-form", vaterite: "may-form" }), REPORT);
    expect(row.values["solid:calcite"]).toBeLessThan(0);
    expect([row.values["solid:aragonite"], row.values["solid:vaterite"]]).toEqual([0, 0]);
    expect(row.values["SI:aragonite"]).toBeLessThan(0);
  });
  it("several at once, each with its own verdict", () => {
    const row = solveOne({ ...BECK, pCO2: { atm: 4e-4 } }, meeting("open", { calcite: "may-form", gibbsite: "may-form", gypsum: "may-form", barite: "may-form" }), REPORT);
    expect(row.message).toBe("");
    for (const solid of ["calcite", "gibbsite", "gypsum", "barite"]) {
      const amount = -row.values[`solid:${solid}`];
      const SI = row.values[`SI:${solid}`];
      expect(amount).toBeGreaterThanOrEqual(0);
      expect(SI).toBeLessThan(1e-9);
      expect(amount === 0 || Math.abs(SI) < 1e-9, solid).toBe(true);
    }
  });
});

describe("a finite supply", () => {
  it("dissolves until gone where the water takes more", () => {
    const row = solveOne({ pCO2: { atm: 4e-4 } }, meeting("open", { calcite: 1e-4 }), REPORT);
    expect(row.values["solid:calcite"]).toBeCloseTo(0.1, 12);
    expect(row.values["SI:calcite"]).toBeLessThan(0);
  });
  it("stops at saturation where there is more than the water takes", () => {
    const all = solveOne({ pCO2: { atm: 4e-4 } }, meeting("open", { calcite: "excess" }), REPORT);
    const row = solveOne({ pCO2: { atm: 4e-4 } }, meeting("open", { calcite: 0.01 }), REPORT);
    expect(isClose(row.values["solid:calcite"], all.values["solid:calcite"], 1e-8)).toBe(true);
  });
  it("of a soluble form feeds the growth of the stable one", () => {
    const row = solveOne({ pCO2: { atm: 4e-4 } }, meeting("open", { aragonite: 0.01, calcite: "may-form" }), REPORT);
    expect(row.values["solid:aragonite"]).toBeCloseTo(10, 9);
    expect(row.values["SI:calcite"]).toBeCloseTo(0, 9);
    expect(row.values["solid:calcite"]).toBeLessThan(-9);
  });
});

describe("sets that cannot be", () => {
  it("a soluble form in excess beside a stable one is called a contradiction", () => {
    const row = solveOne(BECK, meeting("open", { aragonite: "excess", calcite: "excess" }), REPORT);
    expect([row.status, row.message]).toEqual(["invalid", expect.stringContaining("solids contradict: calcite and aragonite")]);
  });
  it("dependent compositions in excess whose targets do not agree are refused with the combination that proves it", () => {
    const row = solveOne(BECK, meeting("closed", { calcite: "excess", celestite: "excess", gypsum: "excess", strontianite: "excess" }), REPORT);
    expect(row.status).toBe("invalid");
    expect(row.message).toMatch(/^solids contradict: /);
    for (const name of ["calcite", "celestite", "gypsum", "strontianite"]) expect(row.message).toContain(name);
  });
  it("dependent compositions in excess whose targets agree share the amounts", () => {
    const constants = { calcite: { logK: -8.5 }, celestite: { logK: -6.6 }, anhydrite: { logK: -4.35 }, strontianite: { logK: -10.75 } };
    const set = { calcite: "excess", celestite: "excess", anhydrite: "excess", strontianite: "excess" } as const;
    const row = solveOne(BECK, { ...meeting("closed", set), constants }, REPORT);
    expect([row.status, row.warnings]).toEqual(["ok", expect.stringContaining("dependent-solids:")]);
    for (const name of Object.keys(set)) expect(row.values[`SI:${name}`]).toBeCloseTo(0, 9);
    // the least-norm share has no part along calcite + celestite - anhydrite - strontianite
    const of = (name: string) => row.values[`solid:${name}`];
    expect(of("calcite") + of("celestite") - of("anhydrite") - of("strontianite")).toBeCloseTo(0, 9);
    // the state is the one that any three of them give
    const three = solveOne(BECK, { ...meeting("closed", { calcite: "excess", celestite: "excess", strontianite: "excess" }), constants }, REPORT);
    expect(isClose(row.values.pH, three.values.pH, 1e-9)).toBe(true);
  });
  it("forms of one composition at one target share the amount, as far as there is something to share", () => {
    const constants = { aragonite: { logK: -8.5 }, calcite: { logK: -8.5 } };
    const one = solveOne(BECK, { ...meeting("open", { calcite: "excess" }), constants }, REPORT);
    const both = solveOne(BECK, { ...meeting("open", { calcite: "excess", aragonite: "excess" }), constants }, REPORT);
    expect(both.warnings).toContain("dependent-solids:");
    expect(isClose(both.values["solid:calcite"], one.values["solid:calcite"] / 2, 1e-8)).toBe(true);
    expect(isClose(both.values["solid:aragonite"], both.values["solid:calcite"], 1e-8)).toBe(true);
    const little = Math.abs(one.values["solid:calcite"]) / 1e4;
    const supplied = solveOne({ pCO2: { atm: 4e-4 } }, { ...meeting("open", { calcite: "excess", aragonite: little }), constants }, REPORT);
    expect(supplied.values["solid:aragonite"]).toBeCloseTo(little * 1e3, 12);
  });
  it("gypsum and anhydrite in excess contradict: no activity of water suits both", () => {
    const row = solveOne(BECK, meeting("closed", { gypsum: "excess", anhydrite: "excess" }), REPORT);
    expect([row.status, row.message]).toEqual(["invalid", expect.stringMatching(/^solids contradict: .*(gypsum|anhydrite)/)]);
  });
  it("gypsum that may form beside anhydrite takes its place where the water allows", () => {
    const row = solveOne({ temperature: 25, pCO2: { atm: 4e-4 } }, meeting("closed", { anhydrite: 0.1, gypsum: "may-form" }), REPORT);
    expect(row.message).toBe("");
    expect(row.values["SI:gypsum"]).toBeCloseTo(0, 9);
    expect(row.values["solid:anhydrite"]).toBeCloseTo(100, 6);
  });
  it("dependent compositions that may form are answered: one of them gives way", () => {
    const water = { temperature: 25, totals: { Ca: 0.05, Sr: 0.03, SO4: 0.06, Na: 0.05, Cl: 0.02 }, pCO2: { atm: 4e-4 } };
    const row = solveOne(water, meeting("open", { calcite: "may-form", celestite: "may-form", gypsum: "may-form", strontianite: "may-form" }), REPORT);
    expect(row.message).toBe("");
    const held = ["calcite", "celestite", "gypsum", "strontianite"].filter((s) => row.values[`solid:${s}`] !== 0);
    expect(held.length).toBeLessThan(4);
    for (const solid of ["calcite", "celestite", "gypsum", "strontianite"]) expect(row.values[`SI:${solid}`]).toBeLessThan(1e-9);
  });
});

describe("gas", () => {
  it("open holds the case's pressure and books what came or went", () => {
    const water = { ...BECK, DIC: 2.9e-3, pCO2: { atm: 4e-4 } };
    const before = solveOne(water, closing("charge", "DIC"), REPORT);
    const row = solveOne(water, { ...closing("charge", "DIC"), ...meeting("open", {}) }, REPORT);
    expect(isClose(row.values.pCO2, 4e-4, 1e-9)).toBe(true);
    expect(isClose(row.values["gas:CO2"] / 1e3, row.values.DIC - before.values.DIC, 1e-6)).toBe(true);
  });
  it("at a pressure of its own, dry fractions shrinking with altitude", () => {
    const kase = { react: { gas: { dryFraction: 1e-3 }, solids: [] } };
    const low = solveOne(BECK, kase, REPORT);
    const high = solveOne({ ...BECK, altitude: 1500 }, kase, REPORT);
    expect(isClose(low.values.pCO2, 1e-3, 1e-9)).toBe(true);
    // ISO 2533: 0.8346 atm at 1500 m; Buck: 0.01384 atm of vapour at 12 °C
    expect(high.values.pCO2 / 1e-3).toBeCloseTo(0.8345 - 0.0138, 3);
  });
  it("closed leaves the sampled water as it was", () => {
    const before = solveOne(BECK, {}, REPORT);
    const row = solveOne(BECK, meeting("closed", {}), REPORT);
    expect(isClose(row.values.pH, before.values.pH, 1e-10)).toBe(true);
    expect(isClose(row.values.DIC, before.values.DIC, 1e-10)).toBe(true);
  });
});

describe("axes of a reaction", () => {
  it("vary saturation, supply, log K and gas", () => {
    const kase = makeCase(meeting("open", { calcite: "excess" }));
    for (const [field, values] of [["react/solids/calcite/saturation", [0, 0.5]], ["react/solids/calcite/logK", [-8.4, -8.2]], ["react/gas", [4e-4, 4e-2]], ["react/solids/calcite/supply", [1e-4, 2e-4]]] as const) {
      const water = makeWater({ pCO2: { atm: 4e-4 } });
      const rows = solveAll(makeJob([water], [kase], { axes: [makeAxis(field, [...values])], report: ["dissolved:Ca", "pH"] }));
      expect(rows.map((r) => r.status)).toEqual(["ok", "ok"]);
      expect(rows[1].values["dissolved:Ca"], field).toBeGreaterThan(rows[0].values["dissolved:Ca"] * 1.05);
    }
  });
});

describe("traces beside major ions", () => {
  it("a solid that takes nearly all of a trace leaves it exact", () => {
    const row = solveOne({ ...gypsumWater, totals: { ...gypsumWater.totals, Ba: 1e-7, Mg: 1e-9, F: 1e-12 } }, meeting("open", { barite: "may-form", calcite: "may-form" }), REPORT);
    expect(row.message).toBe("");
    expect(row.residual).toBeLessThan(1e-10);
    expect(isClose(row.values["dissolved:Ba"] + -row.values["solid:barite"] / 1e3, 1e-7, 1e-9)).toBe(true);
    expect(isClose(row.values["dissolved:F"], 1e-12, 1e-9)).toBe(true);
  });
});
