/**
 * Values from outside the project, each with its source. Tolerances are what the published figure's own precision and the activity model
 * allow. Everything goes the whole way from a spec document to a column.
 */
import { describe, expect, it } from "vitest";
import { debyeSizeFactor, debyeSlope } from "@/lib/chemistry/temperature";
import { solveOneWater } from "./solve-spec";

const pureWater = { temperature: 25 };
const openTo = (log10: number) => ({ close: ["charge", "pCO2"], pCO2: { log10 } });
const noCarbon = { close: ["charge", "DIC"] };
const MODELS = ["guntelberg", "davies", "debye-huckel", "truesdell-jones"] as const;

describe("Stumm & Morgan 1996 (Aquatic Chemistry, 3rd ed.); Garrels & Christ 1965: textbook worked examples at 25 °C", () => {
  const calcite = (gas: string) => ({ react: { gas, solids: { calcite: { supply: "excess" } } }, activity: "davies" });

  it("pure water over calcite under 10^-3.5 atm CO2: pH 8.26–8.31, Ca 0.47–0.52 mmol/L, alkalinity 0.95–1.04 meq/L", () => {
    const found = solveOneWater(pureWater, { ...openTo(-3.5), ...calcite("open") }, ["pH", "dissolved:Ca", "alkalinity", "SI:calcite"]);
    expect(found.pH).toBeGreaterThan(8.26);
    expect(found.pH).toBeLessThan(8.31);
    expect(found["dissolved:Ca"]).toBeGreaterThan(0.47e-3);
    expect(found["dissolved:Ca"]).toBeLessThan(0.52e-3);
    expect(found.alkalinity).toBeGreaterThan(950);
    expect(found.alkalinity).toBeLessThan(1040);
    expect(found["SI:calcite"]).toBeCloseTo(0, 9);
  });

  it("pure water over calcite without a gas phase: pH 9.90–9.95, Ca 0.11–0.13 mmol/L", () => {
    const found = solveOneWater({ ...pureWater, DIC: "0 mmol/L" }, { ...noCarbon, ...calcite("closed") }, ["pH", "dissolved:Ca"]);
    expect(found.pH).toBeGreaterThan(9.9);
    expect(found.pH).toBeLessThan(9.95);
    expect(found["dissolved:Ca"]).toBeGreaterThan(0.11e-3);
    expect(found["dissolved:Ca"]).toBeLessThan(0.13e-3);
  });

  it.each([[-3.5, 5.65], [0, 3.91]])("pure water under 10^%d atm CO2: pH %d ± 0.02", (log10, pH) => {
    const found = solveOneWater(pureWater, { ...openTo(log10), activity: "davies" }, ["pH"]);
    expect(Math.abs(found.pH - pH)).toBeLessThan(0.02);
  });
});

describe("NIST/IUPAC primary pH standards (Bates; Buck et al. 2002, Pure Appl. Chem. 74:2169)", () => {
  const carbonate = [[0, 10.317], [5, 10.245], [10, 10.179], [15, 10.118], [20, 10.062], [25, 10.012], [30, 9.966]] as const;
  const phosphate = [[0, 6.984], [10, 6.923], [20, 6.881], [25, 6.865], [30, 6.853]] as const;
  const carbonateBuffer = (temperature: number, activity: string, complexes: string) =>
    solveOneWater({ temperature, Na: "75 mmol/L", DIC: "50 mmol/L" }, { ...noCarbon, activity, complexes }, ["pH"]).pH;

  describe.each(MODELS)("%s", (activity) => {
    it.each(carbonate)("0.025 mol/kg NaHCO3 + 0.025 mol/kg Na2CO3 at %d °C: pH %d ± 0.02 without pairs (Güntelberg ± 0.06)", (temperature, pH) => {
      expect(Math.abs(carbonateBuffer(temperature, activity, "none") - pH)).toBeLessThan(activity === "guntelberg" ? 0.06 : 0.02);
    });

    it.each(phosphate)("0.025 mol/kg KH2PO4 + 0.025 mol/kg Na2HPO4 at %d °C: pH %d ± 0.05 (Güntelberg ± 0.07)", (temperature, pH) => {
      const found = solveOneWater({ temperature, K: "25 mmol/L", Na: "50 mmol/L", PO4: "50 mmol/L", DIC: "0 mmol/L" }, { ...noCarbon, activity }, ["pH"]);
      expect(Math.abs(found.pH - pH)).toBeLessThan(activity === "guntelberg" ? 0.07 : 0.05);
    });
  });

  it("the tabulated sodium–carbonate pairs bring the carbonate buffer down by up to 0.18: table and buffer's convention do not go together", () => {
    for (const [temperature, pH] of carbonate) {
      const found = carbonateBuffer(temperature, "davies", "all");
      expect(found).toBeLessThan(pH);
      expect(found).toBeGreaterThan(pH - 0.185);
    }
  });
});

describe("CRC Handbook of Chemistry and Physics: solubilities in pure water at 25 °C", () => {
  const dissolved = (solid: string, activity: string) =>
    solveOneWater({ ...pureWater, DIC: "0 mmol/L" }, { ...noCarbon, activity, react: { gas: "closed", solids: { [solid]: { supply: "excess" } } } }, ["solids"])[`solid:${solid}`];

  it.each([["debye-huckel", 0.04], ["truesdell-jones", 0.04], ["davies", 0.06]] as const)("gypsum 15.2 mmol/L, %s within %d of it", (activity, share) => {
    expect(Math.abs(dissolved("gypsum", activity) / 15.2 - 1)).toBeLessThan(share);
  });

  it.each(["debye-huckel", "truesdell-jones", "davies"])("fluorite 15–17 mg/L CaF2 (%s)", (activity) => {
    const milligrams = dissolved("fluorite", activity) * (40.078 + 2 * 18.998);
    expect(milligrams).toBeGreaterThan(15);
    expect(milligrams).toBeLessThan(17);
  });
});

describe("Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011", () => {
  // IAP over SI, read from the columns: what the product used as constant at that temperature.
  const productOf = (temperature: number, anion: string, solid: string) => {
    const found = solveOneWater({ temperature, Ca: "1 mmol/L", Cl: "1 mmol/L" }, openTo(-3.4), ["activities", "SI"]);
    return found["lgActivity:Ca^2+"] + found[`lgActivity:${anion}`] - found[`SI:${solid}`];
  };

  it.each([[0, -8.381], [10, -8.41], [25, -8.48], [40, -8.58]])("calcite: log K at %d °C is %d", (temperature, logK) => {
    expect(Math.abs(productOf(temperature, "CO3^2-", "calcite") - logK)).toBeLessThan(0.0015);
  });
  it.each([["aragonite", [-8.218, -8.255, -8.336]], ["vaterite", [-7.743, -7.802, -7.913]]] as const)("%s: log K at 0, 10, 25 °C", (solid, logKs) => {
    [0, 10, 25].forEach((temperature, k) => expect(Math.abs(productOf(temperature, "CO3^2-", solid) - logKs[k])).toBeLessThan(0.0015));
  });

  it.each([[0, -6.579, -10.629, -1.108], [10, -6.463, -10.488, -1.269], [25, -6.352, -10.329, -1.468]])("carbonic acid and Henry's law at %d °C: log K1 %d, log K2 %d, log KH %d", (temperature, first, second, henry) => {
    const found = solveOneWater({ temperature, Na: "1 mmol/L" }, { ...openTo(-3.4), activity: "ideal" }, ["activities"]);
    const lg = (name: string) => found[`lgActivity:${name}`];
    expect(Math.abs(lg("H^+") + lg("HCO3^-") - lg("CO2(aq)") - first)).toBeLessThan(0.0015);
    expect(Math.abs(lg("H^+") + lg("CO3^2-") - lg("HCO3^-") - second)).toBeLessThan(0.0015);
    expect(Math.abs(lg("CO2(aq)") + 3.4 - henry)).toBeLessThan(0.0015);
  });

  it.each([[0, -14.942], [10, -14.534], [25, -14]])("water at %d °C: log Kw %d (Marshall & Franck 1981 as fitted in Nordstrom et al. 1990)", (temperature, logK) => {
    const found = solveOneWater({ temperature, Na: "1 mmol/L" }, { ...openTo(-3.4), activity: "ideal" }, ["activities"]);
    expect(Math.abs(found["lgActivity:H^+"] + found["lgActivity:OH^-"] - logK)).toBeLessThan(0.0015);
  });
});

describe("Debye–Hückel slope from Malmberg & Maryott 1956 (ε) and Kell 1975 (ρ)", () => {
  it.each([[0, 0.4918], [10, 0.4989], [25, 0.5108]])("A at %d °C is %d", (temperature, slope) => expect(debyeSlope(temperature)).toBeCloseTo(slope, 4));
  it("B at 25 °C is 0.3287 per Å", () => expect(debyeSizeFactor(25)).toBeCloseTo(0.3287, 4));
});

describe("ISO 6059 and handbook: hardness in equivalents", () => {
  const calciumOf = (quantity: string) => solveOneWater({ temperature: 10, Ca: quantity }, openTo(-3.4), ["dissolved:Ca"])["dissolved:Ca"] * 2e3;

  it("1 mg/L as CaCO3 is 0.01998 meq/L", () => expect(Math.abs(calciumOf("1 mg/L as CaCO3") - 0.01998)).toBeLessThan(0.00001));
  it("1 °dH, 10 mg/L CaO, is 0.357 meq/L", () => expect(Math.abs(calciumOf("10 mg/L as CaO") - 0.357)).toBeLessThan(0.0005));
});

describe("a stream over limestone (common practice, no source), ideal activities, open to 10^-3.38 atm", () => {
  it.each([8, 9, 10])("strong-ion ANC 2358 µeq/L and no solid at %d °C: pH about 8.4", (temperature) => {
    const found = solveOneWater({ temperature, ANC: "2358 ueq/L" }, { close: ["ANC", "pCO2"], pCO2: { log10: -3.38 }, activity: "ideal" }, ["pH", "ANC"]);
    expect(Math.abs(found.pH - 8.4)).toBeLessThan(0.1);
    expect(found.ANC).toBeCloseTo(2358, 6);
  });

  it.each([8, 9, 10])("at equilibrium with calcite (log K −8.4), conserved sum −260.6 µeq/L, at %d °C: pH about 8.15", (temperature) => {
    const found = solveOneWater({ temperature, ANC: "-260.6 ueq/L" }, {
      close: ["ANC", "pCO2"], pCO2: { log10: -3.38 }, activity: "ideal", constants: { calcite: { logK: -8.4 } },
      react: { gas: "open", solids: { calcite: { supply: "excess" } } },
    }, ["pH", "ANC", "conservedANC", "dissolved:Ca"]);
    expect(Math.abs(found.pH - 8.15)).toBeLessThan(0.05);
    expect(found.conservedANC).toBeCloseTo(-260.6, 6);
    expect(found.ANC).toBeCloseTo(found["dissolved:Ca"] * 2e6 - 260.6, 6);
  });
});
