import { describe, expect, it } from "vitest";
import { SOLIDS, SPECIES } from "@/lib/chemistry/data";
import { debyeSizeFactor, debyeSlope, dielectricConstant, logKAt, pressureOfFraction, standardPressure, vapourPressure, waterDensity } from "@/lib/chemistry/temperature";
import { solveOne } from "@/tests/unit/kernel-fixtures";

const brine = { temperature: 25, totals: { Na: 0.1, Cl: 0.1, Ca: 1e-6 }, pCO2: { atm: 4e-4 } };
const REPORT = ["ionicStrength", "species", "activities"];

/** log10 γ of a species as returned. */
function lgGamma(activity: "davies" | "guntelberg" | "debye-huckel" | "truesdell-jones" | "ideal", species: string) {
  const row = solveOne(brine, { activity, complexes: "none" }, REPORT);
  return { lg: row.values[`lgActivity:${species}`] - Math.log10(row.values[`conc:${species}`]), I: row.values.ionicStrength };
}

describe("Debye–Hückel constants", () => {
  it("have the values stated with the formulas", () => {
    expect(debyeSlope(25)).toBeCloseTo(0.5108, 3);
    expect(debyeSlope(0)).toBeCloseTo(0.4918, 3);
    expect(debyeSlope(10)).toBeCloseTo(0.4989, 3);
    expect(debyeSizeFactor(25)).toBeCloseTo(0.3287, 3);
  });
  it("rest on the published density and dielectric constant of water", () => {
    expect(waterDensity(25)).toBeCloseTo(0.997045, 5); // Kell 1975
    expect(dielectricConstant(25)).toBeCloseTo(78.30, 1); // Malmberg & Maryott 1956
  });
});

describe("activity coefficients as returned", () => {
  const A = debyeSlope(25);
  const B = debyeSizeFactor(25);
  const long = (I: number, d: number) => Math.sqrt(I) / (1 + d * Math.sqrt(I));
  it("ideal: 1", () => expect(lgGamma("ideal", "Ca^2+").lg).toBeCloseTo(0, 12));
  it("Güntelberg", () => { const { lg, I } = lgGamma("guntelberg", "Ca^2+"); expect(lg).toBeCloseTo(-A * 4 * long(I, 1), 10); });
  it("Davies", () => { const { lg, I } = lgGamma("davies", "Ca^2+"); expect(lg).toBeCloseTo(-A * 4 * (long(I, 1) - 0.3 * I), 10); });
  it("extended Debye–Hückel with Kielland's sizes", () => { const { lg, I } = lgGamma("debye-huckel", "Ca^2+"); expect(lg).toBeCloseTo(-A * 4 * long(I, 6 * B), 10); });
  it("Truesdell–Jones where it lists the ion, extended Debye–Hückel where not", () => {
    const calcium = lgGamma("truesdell-jones", "Ca^2+");
    expect(calcium.lg).toBeCloseTo(-A * 4 * long(calcium.I, 5 * B) + 0.165 * calcium.I, 10);
    const hydrogen = lgGamma("truesdell-jones", "H^+");
    expect(hydrogen.lg).toBeCloseTo(-A * long(hydrogen.I, 9 * B), 10);
  });
  it("neutral species: 0.1·I", () => { const { lg, I } = lgGamma("davies", "CO2(aq)"); expect(lg).toBeCloseTo(0.1 * I, 10); });
  it("water: 1 − 0.017·Σc in reactions that contain it", () => {
    const row = solveOne(brine, {}, REPORT);
    const solutes = Object.entries(row.values).filter(([k]) => k.startsWith("conc:")).reduce((sum, [, c]) => sum + c, 0);
    const pKw = -(row.values["lgActivity:H^+"] + row.values["lgActivity:OH^-"] - Math.log10(1 - 0.017 * solutes));
    expect(pKw).toBeCloseTo(14.0, 2);
    const ideal = solveOne(brine, { activity: "ideal" }, REPORT);
    const bare = -(ideal.values["lgActivity:H^+"] + ideal.values["lgActivity:OH^-"]);
    expect(pKw).toBeCloseTo(bare, 9);
  });
});

describe("conditional organic constants", () => {
  it("hold between concentrations, with [H+] = 10^−pH/γ", () => {
    const row = solveOne({ ...brine, DOC: 10 }, { organic: { model: "hruska-2003", pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 } }, REPORT);
    const h = row.values["conc:H^+"];
    expect(-Math.log10(h * row.values["conc:H2Org^-"] / row.values["conc:H3Org"])).toBeCloseTo(3.04, 9);
    expect(-Math.log10(h * row.values["conc:Org^3-"] / row.values["conc:HOrg^2-"])).toBeCloseTo(6.46, 9);
    const total = ["H3Org", "H2Org^-", "HOrg^2-", "Org^3-"].reduce((sum, s) => sum + row.values[`conc:${s}`], 0);
    expect(total).toBeCloseTo(10 * 8.6e-6 / 3, 12);
  });
  it("one site: [A−] = K·C/(K + [H+]) with pK from the pH", () => {
    const row = solveOne({ ...brine, DOC: 10 }, { organic: { model: "oliver-1983", pKa: [], sitesPerMgC: 1e-5 } }, ["pH", ...REPORT]);
    const K = 10 ** -(0.96 + 0.9 * row.values.pH - 0.039 * row.values.pH ** 2);
    expect(row.values["conc:Org^-"] / (K * 1e-4 / (K + row.values["conc:H^+"]))).toBeCloseTo(1, 9);
  });
});

describe("constants over temperature", () => {
  const named = (name: string) => [...Object.values(SPECIES), ...Object.values(SOLIDS)].find((s) => s.name === name)?.logK;
  const at = (name: string, t: number) => { const form = named(name); if (!form) throw new Error(name); return logKAt(form, t); };
  it("give the published values of the carbonate system at 0, 10 and 25 °C (Plummer & Busenberg 1982)", () => {
    const table: Record<string, number[]> = {
      "CO2(g)": [-1.108, -1.269, -1.468], "HCO3^-": [-6.579, -6.463, -6.352], "CO3^2-": [-10.629, -10.488, -10.329], calcite: [-8.381, -8.41, -8.48],
      aragonite: [-8.218, -8.255, -8.336], vaterite: [-7.743, -7.802, -7.913], "CaHCO3^+": [0.82, 0.968, 1.106], "CaCO3(aq)": [3.134, 3.135, 3.224], "OH^-": [-14.942, -14.534, -14],
    };
    for (const [name, values] of Object.entries(table)) {
      [0, 10, 25].forEach((t, k) => expect(Math.abs(at(name, t) - values[k]), `${name} at ${t} °C`).toBeLessThan(0.003));
    }
  });
  it("follow van 't Hoff where only a reaction enthalpy is published: barite, endothermic, dissolves better in the warm", () => {
    // 6.35 kcal/mol over 25 K: Δ log K = 6.35·4184/(8.3145·ln 10)·(1/298.15 − 1/323.15)
    expect(at("barite", 50) - at("barite", 25)).toBeCloseTo(6350 * 4.184 / (8.314462618 * Math.LN10) * (1 / 298.15 - 1 / 323.15), 9);
    expect(at("barite", 50)).toBeGreaterThan(at("barite", 25));
  });
});

describe("pressure", () => {
  it("follows the standard atmosphere and the vapour pressure", () => {
    expect(standardPressure(0)).toBe(1);
    expect(standardPressure(1000)).toBeCloseTo(89875 / 101325, 4); // ISO 2533 table
    expect(vapourPressure(25)).toBeCloseTo(3.1690 / 101.325, 4); // steam tables
  });
  it("turns a dry fraction into a pressure only where the total is known", () => {
    expect(pressureOfFraction(4e-4, 10, null, null)).toBe(4e-4);
    expect(pressureOfFraction(4e-4, 10, null, 0.9)).toBeCloseTo(4e-4 * (0.9 - vapourPressure(10)), 15);
    expect(pressureOfFraction(4e-4, 10, 500, 0.9)).toBe(pressureOfFraction(4e-4, 10, null, 0.9));
  });
});
