import { describe, expect, it } from "vitest";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { makeCaseSolver } from "@/lib/chemistry/case-solver";
import { compileJob } from "@/lib/chemistry/compile-job";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import { makeSeed } from "@/lib/chemistry/sensitivity-seeds";
import { recordStages } from "@/lib/chemistry/sensitivity-stages";
import { debyeSizeFactor, debyeSlope, debyeTemperatureSlopes, fractionSlopes, logKAt, logKSlope, pressureOfFraction } from "@/lib/chemistry/temperature";
import { SOLIDS, SPECIES } from "@/lib/chemistry/data";
import { linearise, makeLinearisation, makeTangent, solveTangent } from "@/lib/kernel/derivative";
import { BECK, closing, makeAxis, makeCase, makeJob, makeWater, meeting, solveAll, solveOne } from "./kernel-fixtures";

const central = (f: (x: number) => number, x: number, h: number) => (f(x - 2 * h) - 8 * f(x - h) + 8 * f(x + h) - f(x + 2 * h)) / (12 * h);
const near = (found: number, wanted: number, relative: number) => expect(Math.abs(found - wanted), `${found}, not ${wanted}`).toBeLessThanOrEqual(relative * Math.abs(wanted));

describe("slopes over temperature", () => {
  it("of every log K, of A and B equal differences of the formulas themselves", () => {
    for (const t of [2, 25, 60, 88]) {
      for (const { name, logK } of [...SPECIES, ...SOLIDS]) {
        if (logK) expect(Math.abs(logKSlope(logK, t) - central((x) => logKAt(logK, x), t, 0.1)), name).toBeLessThan(1e-9);
      }
      near(debyeTemperatureSlopes(t).a, central(debyeSlope, t, 0.1), 1e-7);
      near(debyeTemperatureSlopes(t).b, central(debyeSizeFactor, t, 0.1), 1e-6);
    }
  });
  it("of the pressure of a dry fraction, over altitude and air pressure too", () => {
    const slopes = fractionSlopes(4e-4, 15, 700, null);
    near(slopes.temperature, central((t) => pressureOfFraction(4e-4, t, 700, null), 15, 0.1), 1e-7);
    near(slopes.altitude, central((h) => pressureOfFraction(4e-4, 15, h, null), 700, 5), 1e-7);
    near(fractionSlopes(4e-4, 15, 700, 0.9).pressure, 4e-4, 1e-12);
    expect(fractionSlopes(4e-4, 15, null, null)).toEqual({ temperature: 0, altitude: 0, pressure: 0 });
  });
});

describe("a derivative", () => {
  const difference = (field: string, base: number, h: number, kase: Parameters<typeof makeCase>[0], water = BECK, isDryFraction = false) => {
    const rows = solveAll(makeJob([makeWater(water)], [makeCase(kase)], { axes: [makeAxis(field, [-2, -1, 1, 2].map((k) => base + k * h), isDryFraction)], report: ["pH"] }));
    const [a, b, c, d] = rows.map((row) => row.values.pH);
    return (a - 8 * b + 8 * c - d) / (12 * h);
  };
  it("by an analyte the water has none of is the one that a trace of it gives", () => {
    for (const [pair, key] of [[["charge", "pCO2"], "Al"], [["charge", "DIC"], "F"], [["alkalinity", "DIC"], "Mg"], [["alkalinity", "pCO2"], "Al"]] as const) {
      const totals = { ...BECK.totals };
      delete totals[key];
      const water = { ...BECK, totals, alkalinity: 2.2e-3, DIC: 2.4e-3 };
      const kase = closing(pair[0], pair[1]);
      const exact = solveOne(water, kase, [`d:pH/${key}`], { units: { [key]: "mol/L" } }).values[`d:pH/${key}`];
      const at = (total: number) => solveOne({ ...water, totals: { ...totals, [key]: total } }, kase, ["pH"]).values.pH;
      const h = key === "Al" ? 1e-9 : 1e-7;
      near((-3 * at(0) + 4 * at(h) - at(2 * h)) / (2 * h), exact, 2e-3);
    }
  });
  it("by carbon or organic acid that is not there is finite too", () => {
    const row = solveOne({ ...BECK, DIC: 0, DOC: 0 }, { ...closing("charge", "DIC"), organic: { model: "oliver-1983", pKa: [], sitesPerMgC: 1e-5 } }, ["d:pH/DIC", "d:pH/DOC", "d:lgActivity:HCO3^-/DIC"]);
    expect(row.values["d:pH/DIC"]).toBeLessThan(0);
    expect(row.values["d:pH/DOC"]).toBeLessThan(0);
    expect(row.values["d:lgActivity:HCO3^-/DIC"]).toBeNaN();
  });
  it("by what the row does not use is zero, and by a fact of itself one", () => {
    const { values } = solveOne({ ...BECK, alkalinity: 2e-3, pH: 7.5 }, closing("pH", "alkalinity"), ["d:pH/pH", "d:pH/pCO2", "d:alkalinity/alkalinity", "d:pH/Ca", "d:pH/react/solids/calcite/supply"]);
    expect(values["d:pH/pH"]).toBeCloseTo(1, 12);
    expect(values["d:alkalinity/alkalinity"]).toBeCloseTo(1000, 6); // µeq/L per meq/L
    for (const name of ["d:pH/pCO2", "d:pH/Ca", "d:pH/react/solids/calcite/supply"]) expect(Math.abs(values[name])).toBeLessThan(1e-12);
  });
  it("by a mole fraction, an altitude and a pressure goes by way of the moist air", () => {
    const water = { ...BECK, altitude: 650, pCO2: { dryFraction: 9e-4 } };
    const columns = ["d:pH/pCO2", "d:pH/altitude", "d:pH/temperature"];
    const { values } = solveOne(water, {}, columns, { units: { pCO2: "ppm" } });
    near(values["d:pH/pCO2"], difference("pCO2", 9e-4, 1e-6, {}, water, true) * 1e-6, 1e-6);
    near(values["d:pH/altitude"], difference("altitude", 650, 5, {}, water), 1e-6);
    near(values["d:pH/temperature"], difference("temperature", 12, 0.05, {}, water), 1e-6);
  });
  it("by temperature leaves an overridden constant where it was put", () => {
    const kase = { ...meeting("open", { calcite: "excess" as const }), constants: { calcite: { logK: -8.3 } } };
    const { values } = solveOne(BECK, kase, ["d:pH/temperature"]);
    near(values["d:pH/temperature"], difference("temperature", 12, 0.05, kase), 1e-6);
  });
  it("by a temperature of measurement equal to the water's own moves that temperature alone", () => {
    const water = { ...BECK, pH: 7.6, alkalinity: 2e-3, pHTemperature: 12 };
    const { values } = solveOne(water, closing("pH", "alkalinity"), ["d:pH/temperature", "d:pH/pHTemperature"]);
    near(values["d:pH/temperature"], difference("temperature", 12, 0.05, closing("pH", "alkalinity"), water), 1e-5);
    near(values["d:pH/pHTemperature"], difference("pHTemperature", 12, 0.05, closing("pH", "alkalinity"), water), 1e-5);
    expect(values["d:pH/temperature"] * values["d:pH/pHTemperature"]).toBeLessThan(0);
  });
});

describe("phases that depend on each other", () => {
  it("leave every derivative as it is but that of their amounts, and none by what parts them", () => {
    const kase = makeCase(meeting("closed", { calcite: "excess" }));
    const solver = makeCaseSolver(makeJob([], [kase]), kase);
    const stages = recordStages(solver);
    solver.solve(makeWater(BECK), 0);
    const { state, celsius, kind } = stages()[1];
    expect([celsius, kind]).toEqual([12, "reacted"]);
    const seed = makeSeed(solver, 4);
    const tangentOf = (ties: typeof state.ties) => {
      const lin = makeLinearisation(solver.model.tableau, 4);
      const tangent = makeTangent(solver.model.tableau, 4);
      linearise(lin, { ...state, ties });
      return { isSolved: solveTangent(lin, seed, tangent), ...tangent };
    };
    seed.totals[0] = 1;
    const once = tangentOf(state.ties);
    const twice = tangentOf([...state.ties, ...state.ties]);
    expect(twice.isSolved).toBe(true);
    expect(twice.x).toEqual(once.x);
    expect(once.amounts[0]).not.toBeNaN();
    expect([twice.amounts[0], twice.amounts[1]]).toEqual([NaN, NaN]);
    seed.targets[1] = 1;
    expect(tangentOf([...state.ties, ...state.ties]).isSolved).toBe(false);
    seed.targets[0] = 1;
    expect(tangentOf([...state.ties, ...state.ties]).isSolved).toBe(true);
  });
});

describe("buffer intensity", () => {
  it("is dANC/dpH of the closed water, whatever settled it", () => {
    const first = solveOne(BECK, {}, ["pH", "ANC", "DIC", "bufferIntensity"]).values;
    const rows = solveAll(makeJob([makeWater({ ...BECK, DIC: first.DIC })], [makeCase(closing("ANC", "DIC"))], { axes: [makeAxis("ANC", [-2, -1, 1, 2].map((k) => first.ANC / 1e6 + k * 1e-6))], report: ["pH"] }));
    const [a, b, c, d] = rows.map((row) => row.values.pH);
    near(first.bufferIntensity, 12e-3 / (a - 8 * b + 8 * c - d), 1e-6);
  });
  it("of pure water at 25 °C without activity corrections is ln 10·([H+] + [OH−])", () => {
    const { values } = solveOne({ DIC: 0 }, { ...closing("charge", "DIC"), activity: "ideal" }, ["bufferIntensity", "conc:H^+", "conc:OH^-"]);
    near(values.bufferIntensity, 1e3 * Math.LN10 * (values["conc:H^+"] + values["conc:OH^-"]), 1e-10);
  });
  it("is larger open to the gas than closed, and larger still over calcite", () => {
    const of = (kase: Parameters<typeof solveOne>[1]) => solveOne(BECK, kase, ["bufferIntensity"]).values.bufferIntensity;
    const closed = of({});
    const open = of(meeting("open", {}));
    expect(open).toBeGreaterThan(closed);
    expect(of(meeting("open", { calcite: "excess" }))).toBeGreaterThan(of(meeting("closed", { calcite: "excess" })));
  });
});

describe("in a spec", () => {
  const spec = (report: string[], units: Record<string, string> = {}) => ({
    spec: 1, waters: { units, rows: [{ id: "a", temperature: 10, Ca: "60 mg/L", alkalinity: "3 meq/L", pH: 7.5 }] }, cases: [{ name: "c", close: ["pH", "alkalinity"] }], report,
  });
  it("columns are taken in the column's default unit, and their descriptors say so", () => {
    const document = checkSpec(spec(["d:pCO2/pH", "d:SI:calcite/Ca", "d:SI:calcite/constants/calcite/logK", "bufferIntensity"], { Ca: "mmol/L" })).spec!;
    const job = compileJob(resolveJob(document, document.waters.rows!));
    expect(job.columns.map(({ name, unit, group }) => [name, unit, group])).toEqual([
      ["d:pCO2/pH", "atm per pH unit", "main"], ["d:SI:calcite/Ca", "per mmol/L", "main"], ["d:SI:calcite/constants/calcite/logK", "per unit of log K", "main"],
      ["bufferIntensity", "meq/L per pH unit", "main"],
    ]);
    const rows = job.solve(0, 1);
    expect(rows.values[2][0]).toBeCloseTo(-1, 12);
    const perMass = compileJob(resolveJob(checkSpec(spec(["d:SI:calcite/Ca"])).spec!, document.waters.rows!)).solve(0, 1).values[0][0];
    near(rows.values[1][0] / perMass, 40.078, 1e-12);
  });
  it("names that are no column or no input are refused with the nearest, each at its place", () => {
    const { issues } = checkSpec(spec(["d:pH/Ca", "d:pH/Cax", "d:pHH/Ca", "d:pH", "d:SI/Ca", "d:bufferIntensity/Ca", "bufferIntensity", "pH~sd"]));
    expect(issues.map(({ pointer, code }) => [pointer, code])).toEqual([
      ["/report/1", "unknown-field"], ["/report/2", "unknown-column"], ["/report/3", "unknown-column"], ["/report/4", "unknown-column"], ["/report/5", "unknown-column"], ["/report/7", "not-available-yet"],
    ]);
    expect(issues[0].remedy).toContain("d:pH/Ca");
    expect(issues[1].remedy).toContain("d:pH/Ca");
  });
});
