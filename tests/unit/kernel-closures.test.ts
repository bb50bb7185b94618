import { describe, expect, it } from "vitest";
import type { ActivityModel, ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";
import { BECK, closing, type Fact, isClose, solveOne } from "@/tests/unit/kernel-fixtures";

const PAIRS: [Fact, Fact][] = [
  ["charge", "pCO2"], ["ANC", "pCO2"], ["alkalinity", "pCO2"], ["charge", "DIC"], ["ANC", "DIC"], ["alkalinity", "DIC"], ["pH", "pCO2"], ["pH", "DIC"],
  ["pH", "charge"], ["pH", "ANC"], ["pH", "alkalinity"], ["DIC", "pCO2"], ["charge", "saturated"], ["ANC", "saturated"], ["alkalinity", "saturated"], ["pH", "saturated"],
];
const REPORT = ["pH", "ANC", "alkalinity", "DIC", "pCO2", "SI:calcite", "chargeError", "ionicStrength", "species"];
const MODELS: ActivityModel[] = ["ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones"];
const ORGANICS: Record<string, ResolvedCase["organic"]> = {
  none: { model: "none", pKa: [], sitesPerMgC: 0 },
  "oliver-1983": { model: "oliver-1983", pKa: [], sitesPerMgC: 1e-5 },
  "hruska-2003": { model: "hruska-2003", pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 },
  "driscoll-1994": { model: "driscoll-1994", pKa: [2.62, 5.66, 5.94], sitesPerMgC: 0.055 / 12011 },
  own: { model: "own", pKa: [3.5, 5.5], sitesPerMgC: 1e-5 },
};

/** The water with every fact as a first solution found it. */
function withFacts(values: Record<string, number>): Partial<ResolvedWater> {
  return {
    ...BECK, pH: values.pH, ANC: values.ANC / 1e6, alkalinity: values.alkalinity / 1e6, DIC: values.DIC, pCO2: { atm: values.pCO2 },
  };
}

describe("every allowed pair of facts finds the state that the other pairs find", () => {
  for (const activity of MODELS) {
    for (const [name, organic] of Object.entries(ORGANICS)) {
      it(`${activity} activities, organic model ${name}`, () => {
        const base = { activity, organic };
        const first = solveOne(BECK, { ...base, ...closing("charge", "pCO2") }, REPORT);
        expect(first.status).toBe("ok");
        for (const [a, b] of PAIRS) {
          const row = solveOne(withFacts(first.values), { ...base, ...closing(a, b, first.values["SI:calcite"]) }, REPORT);
          expect(row.message, `${a} with ${b}`).toBe("");
          expect(row.residual, `${a} with ${b}`).toBeLessThan(1e-10);
          for (const column of ["pH", "pCO2", "DIC", "ANC", "alkalinity", "conc:CaCO3(aq)", "conc:AlF^2+"]) {
            expect(isClose(row.values[column], first.values[column], 1e-7), `${a} with ${b}: ${column} ${row.values[column]}, not ${first.values[column]}`).toBe(true);
          }
        }
      });
    }
  }
});

describe("facts that do not agree", () => {
  it("a pH too high for the ANC is invalid, with the figures", () => {
    const row = solveOne({ pH: 10, ANC: 1e-5 }, closing("pH", "ANC"), ["pH"]);
    expect(row.status).toBe("invalid");
    expect(row.message).toContain("no state: at pH 10");
    expect(row.values.pH).toBeNaN();
  });
  it("a DIC below what the gas alone dissolves is invalid", () => {
    const row = solveOne({ DIC: 1e-5, pCO2: { atm: 1 } }, closing("DIC", "pCO2"), ["pH"]);
    expect(row.status).toBe("invalid");
    expect(row.message).toContain("DIC");
  });
  it("a saturation that no CO2 pressure reaches is invalid, with the highest SI", () => {
    const row = solveOne({ totals: { Ca: 1e-5, Cl: 1e-5 } }, closing("charge", "saturated", 1), ["pH"]);
    expect(row.status).toBe("invalid");
    expect(row.message).toMatch(/calcite reaches at most SI -\d/);
  });
  it("saturation with a solid of which the water holds no metal is invalid", () => {
    const row = solveOne({ totals: { Na: 1e-3 } }, closing("charge", "saturated"), ["pH"]);
    expect(row.message).toContain("Ca^2+");
  });
});

describe("two states", () => {
  it("of which the one of lower pH is given, with a warning", () => {
    const row = solveOne(BECK, closing("charge", "saturated", 0), REPORT);
    expect(row.status).toBe("ok");
    expect(row.warnings).toContain("several-states: more than one state satisfies");
    expect(row.values["SI:calcite"]).toBeCloseTo(0, 9);
    const richer = solveOne({ ...BECK, pCO2: { atm: row.values.pCO2 * 1.01 } }, closing("charge", "pCO2"), ["SI:calcite"]);
    expect(richer.values["SI:calcite"]).toBeLessThan(0); // more CO2 leaves saturation: this is the branch of lower pH
  });
});

describe("ill-conditioned pairs", () => {
  it("pH with alkalinity below pH 5 warns", () => {
    const row = solveOne({ pH: 4.6, alkalinity: -2.4e-5 }, closing("pH", "alkalinity"), ["pCO2"]);
    expect(row.warnings).toContain("ill-conditioned: ");
  });
  it("a DIC that is nearly all dissolved gas warns", () => {
    const gas = solveOne({ pH: 4.5, pCO2: { atm: 0.01 } }, closing("pH", "pCO2"), ["DIC"]);
    const row = solveOne({ DIC: gas.values.DIC, pCO2: { atm: 0.01 } }, closing("DIC", "pCO2"), ["pH"]);
    expect(row.values.pH).toBeCloseTo(4.5, 6);
    expect(row.warnings).toContain("ill-conditioned: ");
  });
});

describe("the temperature of the pH", () => {
  const water = { ...BECK, temperature: 8, pH: 7.8, pHTemperature: 20, alkalinity: 2.6e-3 };
  it("settles there and is then brought closed to the water's own", () => {
    const there = solveOne({ ...water, temperature: 20 }, closing("pH", "alkalinity"), REPORT);
    const row = solveOne(water, closing("pH", "alkalinity"), REPORT);
    expect(there.values.pH).toBeCloseTo(7.8, 12);
    expect(isClose(row.values.DIC, there.values.DIC, 1e-9)).toBe(true);
    expect(isClose(row.values.ANC, there.values.ANC, 1e-9)).toBe(true);
    expect(row.values.pH).toBeGreaterThan(7.85); // colder water holds its carbonic acid: higher pH at the same totals
  });
  it("means nothing where pH is no fact", () => {
    const a = solveOne(water, closing("charge", "pCO2"), ["pH"]);
    const b = solveOne({ ...water, pHTemperature: null }, closing("charge", "pCO2"), ["pH"]);
    expect(a.values.pH).toBe(b.values.pH);
  });
});
