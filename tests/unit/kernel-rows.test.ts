import { describe, expect, it } from "vitest";
import { compileJob } from "@/lib/chemistry/compile-job";
import { BECK, closing, makeAxis, makeCase, makeJob, makeWater, meeting, readRows, solveAll, solveOne } from "@/tests/unit/kernel-fixtures";

describe("what a row is given", () => {
  it("axis wins over case, case over row", () => {
    const water = makeWater({ ...BECK, temperature: 5 });
    const plain = makeCase({ name: "row's" });
    const given = makeCase({ name: "case's", given: { temperature: 15 } });
    const [own, kase] = solveAll(makeJob([water], [plain, given], { report: ["pH"] }));
    const [axis] = solveAll(makeJob([water], [given], { report: ["pH"], axes: [makeAxis("temperature", [5])] }));
    expect(own.values.pH).not.toBeCloseTo(kase.values.pH, 2);
    expect(axis.values.pH).toBe(own.values.pH);
  });
  it("totals too", () => {
    const rows = solveAll(makeJob([makeWater(BECK)], [makeCase({ given: { totals: { Na: 2e-3 } } })], { report: ["dissolved:Na"], axes: [makeAxis("Na", [3e-3, 4e-3])] }));
    expect(rows.map((r) => r.values["dissolved:Na"])).toEqual([3e-3, 4e-3].map((v) => expect.closeTo(v, 12)));
  });
  it("constants override, at the water's temperature", () => {
    const row = solveOne({ ...BECK }, { constants: { calcite: { logK: -9 } }, ...meeting("open", { calcite: "excess" }) }, ["SI:calcite", "lgActivity:Ca^2+", "lgActivity:CO3^2-"]);
    expect(row.values["lgActivity:Ca^2+"] + row.values["lgActivity:CO3^2-"]).toBeCloseTo(-9, 9);
    expect(row.values["SI:calcite"]).toBeCloseTo(0, 9);
  });
  it("organic sites along an axis lower the pH", () => {
    const organic = { model: "hruska-2003" as const, pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 };
    const rows = solveAll(makeJob([makeWater({ ...BECK, DOC: 20 })], [makeCase({ organic })], { report: ["pH"], axes: [makeAxis("organic/sites", [0, 1e-5])] }));
    expect(rows[1].values.pH).toBeLessThan(rows[0].values.pH);
  });
});

describe("rows that cannot be solved", () => {
  it("without a temperature", () => {
    expect(solveOne({ ...BECK, temperature: null }, {}, ["pH"])).toMatchObject({ status: "invalid", message: expect.stringContaining("temperature") });
  });
  it("without an ion that electroneutrality needs, unless missing is zero", () => {
    const water = { totals: { Ca: 1e-3, Na: 1e-4, SO4: 0 }, pCO2: { atm: 4e-4 } };
    const row = solveOne(water, {}, ["pH"], { missing: "refuse" });
    expect(row.status).toBe("invalid");
    expect(row.message).toContain("Mg, Cl");
    expect(row.message).not.toContain("SO4");
    expect(solveOne(water, {}, ["pH"], { missing: "zero" }).status).toBe("ok");
    expect(solveOne({ ...water, ANC: 1e-4 }, closing("ANC", "pCO2"), ["pH"], { missing: "refuse" }).status).toBe("ok");
  });
  it("without the value of a fact it closes on", () => {
    for (const [a, b] of [["pH", "pCO2"], ["ANC", "pCO2"], ["alkalinity", "pCO2"], ["charge", "DIC"]] as const) {
      const row = solveOne({ ...BECK }, closing(a, b), ["pH"]);
      expect([a, row.status]).toEqual([a, "invalid"]);
      expect(row.message).toContain(`no ${b === "DIC" ? "total inorganic carbon" : a}`);
    }
    expect(solveOne({ ...BECK, pCO2: null }, {}, ["pH"]).message).toContain("no pCO2");
  });
  it("with a fault of its own, said in its own words, while the others go on", () => {
    const bad = makeWater({ ...BECK, id: "bad", faults: [{ code: "value", column: "Ca", message: "Ca: negative" }] });
    const rows = solveAll(makeJob([makeWater(BECK), bad, makeWater(BECK)], [makeCase()]));
    expect(rows.map((r) => r.status)).toEqual(["ok", "invalid", "ok"]);
    expect(rows[1].message).toBe("Ca: negative");
  });
  it("beyond the ranges allowed", () => {
    expect(solveOne({ ...BECK, temperature: 120 }, {}, ["pH"]).message).toContain("outside 0 to 90");
    expect(solveOne({ ...BECK, pH: 17 }, closing("pH", "pCO2"), ["pH"]).message).toContain("outside -2 to 16");
    expect(solveOne({ ...BECK, totals: { Ca: -1 } }, {}, ["pH"]).message).toContain("negative");
  });
  it("with too few iterations allowed: not-converged, never a rough answer", () => {
    const row = solveOne(BECK, {}, ["pH"], { solver: { tolerance: 1e-10, maxIterations: 1 } });
    expect(row.status).toBe("not-converged");
    expect(row.values.pH).toBeNaN();
  });
});

describe("warnings", () => {
  const brown = { ...BECK, DOC: 12, aluminiumFractionGiven: false };
  it("aluminium of unsaid fraction in brown water", () => {
    expect(solveOne(brown, {}, ["pH"]).warnings).toContain("aluminium-fraction: Al is taken as inorganic monomeric");
    expect(solveOne({ ...brown, aluminiumFractionGiven: true }, {}, ["pH"]).warnings).toBe("");
    expect(solveOne({ ...brown, DOC: 5 }, {}, ["pH"]).warnings).toBe("");
  });
  it("ionic strength beyond the model's range", () => {
    const brine = { totals: { Na: 0.3, Cl: 0.3 }, pCO2: { atm: 4e-4 } };
    expect(solveOne(brine, { activity: "davies" }, ["pH"]).warnings).toBe("");
    expect(solveOne(brine, { activity: "debye-huckel" }, ["pH"]).warnings).toContain("activity-range: ionic strength is beyond the range of the debye-huckel model");
  });
});

describe("warnings of range", () => {
  it("concentrated water, where a litre is no kilogram", () => {
    const brine = (Na: number) => solveOne({ totals: { Na, Cl: Na }, pCO2: { atm: 4e-4 } }, {}, ["pH"]).warnings;
    expect(brine(0.6)).toContain("non-dilute: ");
    expect(brine(0.1)).toBe("");
  });
  it("hot water, where constants rest on an enthalpy", () => {
    expect(solveOne({ ...BECK, temperature: 60 }, {}, ["pH"]).warnings).toContain("temperature-range: ");
    expect(solveOne({ ...BECK, temperature: 40 }, {}, ["pH"]).warnings).toBe("");
    expect(solveOne({ temperature: 60, totals: { Na: 1e-3 }, pCO2: { atm: 4e-4 } }, { complexes: "none" }, ["pH"]).warnings).toBe("");
  });
});

describe("columns", () => {
  it("default to the main state and all saturation indices", () => {
    const compiled = compileJob(makeJob([makeWater(BECK)], [makeCase()], { report: [] }));
    expect(compiled.columns.slice(0, 8).map((c) => c.name)).toEqual(["pH", "ANC", "alkalinity", "DIC", "pCO2", "ionicStrength", "balanceError", "conductivity"]);
    expect(compiled.columns.slice(8).every((c) => c.group === "SI")).toBe(true);
  });
  it("say nothing of absent components but a concentration of 0", () => {
    const row = solveOne({ totals: { Na: 1e-3, Cl: 1e-3 }, DIC: 0 }, closing("charge", "DIC"), ["pH", "conc:Ca^2+", "lgActivity:Ca^2+", "SI:calcite", "conc:HCO3^-", "pCO2"]);
    expect(row.values).toMatchObject({ "conc:Ca^2+": 0, "lgActivity:Ca^2+": NaN, "SI:calcite": NaN, "conc:HCO3^-": 0, pCO2: NaN });
    expect(row.values.pH).toBeCloseTo(7, 1);
  });
  it("ANC is the strong ions' sum less the charge of all species, whatever settles the water", () => {
    const row = solveOne({ ...BECK, pH: 7.5 }, closing("pH", "pCO2"), ["ANC", "ANCions", "chargeError"]);
    expect(row.values.ANC).toBeCloseTo(row.values.ANCions - row.values.chargeError, 6);
    expect(Math.abs(row.values.chargeError)).toBeGreaterThan(1);
  });
  it("a case that leaves complexes out reports none of them", () => {
    const [all, none] = solveAll(makeJob([makeWater(BECK)], [makeCase(), makeCase({ complexes: "none" })], { report: ["conc:CaHCO3^+", "lgActivity:CaHCO3^+", "conc:CaOH^+"] }));
    expect(all.values["conc:CaHCO3^+"]).toBeGreaterThan(1e-6);
    expect(none.values).toMatchObject({ "conc:CaHCO3^+": 0, "lgActivity:CaHCO3^+": NaN });
    expect(none.values["conc:CaOH^+"]).toBeGreaterThan(0);
  });
});

describe("the order of rows", () => {
  const job = makeJob([makeWater(BECK), makeWater({ ...BECK, id: "v", temperature: 20 })], [makeCase(), makeCase({ ...meeting("open", { calcite: "excess" }) })], {
    report: ["pH", "dissolved:Na", "pCO2"], axes: [makeAxis("pCO2", [1e-4, 1e-3, 1e-2]), makeAxis("Na", [1e-4, 2e-4])],
  });
  it("is water, case, first axis outermost", () => {
    const rows = solveAll(job);
    expect(rows).toHaveLength(24);
    expect(rows[1].values["dissolved:Na"]).toBeCloseTo(2e-4, 12);
    expect(rows[2].values.pCO2).toBeCloseTo(1e-3, 12);
    const second = solveAll(makeJob([job.waters[1]], job.cases, { ...job, waters: [job.waters[1]] }));
    expect(rows.slice(12).map((r) => r.values)).toEqual(second.map((r) => r.values));
  });
  it("gives the same bytes however it is cut", () => {
    const compiled = compileJob(job);
    const names = compiled.columns.map((c) => c.name);
    const whole = readRows(compiled.solve(0, 24), names);
    const cut = [0, 5, 6, 17].flatMap((from, k) => readRows(compileJob(job).solve(from, [5, 6, 17, 24][k]), names));
    expect(cut).toEqual(whole);
  });
  it("refuses rows that are not there", () => {
    expect(() => compileJob(job).solve(0, 25)).toThrow(RangeError);
  });
});
