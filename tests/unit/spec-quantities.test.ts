/** Written quantities against values worked out by hand from the atomic masses of the constants set. */
import { describe, expect, it, test } from "vitest";
import { outcomes, onlyIssue, type Plain, resolved } from "./spec-fixtures";

const MM = { Ca: 40.078, Na: 22.99, NO3: 62.004, SO4: 96.056, HCO3: 61.016, SiO2: 60.083, NH4: 18.039, PO4: 94.97, N: 14.007, P: 30.974, S: 32.06, Si: 28.085, CaO: 56.077 };

/** Base value of one column of one row. */
function base(key: string, raw: unknown, waters: Plain = {}): number {
  const [water] = resolved({ row: { [key]: raw }, waters }).waters;
  expect(water.faults).toEqual([]);
  if (key in water.totals) return water.totals[key];
  return (water as unknown as Record<string, number>)[key === "pressure" ? "pressureAtm" : key];
}

const near = (found: number, expected: number): void => expect(Math.abs(found / expected - 1), `${found} for ${expected}`).toBeLessThan(1e-12);

describe("an amount in mol/kg", () => {
  test.each<[string, unknown, number]>([
    ["Ca", 62.1, 62.1e-3 / MM.Ca], ["Ca", "62.1 mg/L", 62.1e-3 / MM.Ca], ["Ca", "62.1", 62.1e-3 / MM.Ca], ["Ca", "62.1mg/L", 62.1e-3 / MM.Ca],
    ["Ca", "62.1 mg/l", 62.1e-3 / MM.Ca], ["Ca", " 62.1  mg / L ", 62.1e-3 / MM.Ca], ["Ca", "62.1 mg L-1", 62.1e-3 / MM.Ca], ["Ca", "62.1 mg L^-1", 62.1e-3 / MM.Ca],
    ["Ca", "62.1 mg·L⁻¹", 62.1e-3 / MM.Ca], ["Ca", "62.1 mg/kg", 62.1e-3 / MM.Ca], ["Ca", "62.1 mg/dm3", 62.1e-3 / MM.Ca], ["Ca", "62.1 g/m3", 62.1e-3 / MM.Ca],
    ["Ca", "62.1 ppm", 62.1e-3 / MM.Ca], ["Ca", "62100 µg/L", 62.1e-3 / MM.Ca], ["Ca", "62100 μg/L", 62.1e-3 / MM.Ca], ["Ca", "62100 ug/L", 62.1e-3 / MM.Ca], ["Ca", "62100 ppb", 62.1e-3 / MM.Ca],
    ["Ca", "0.0621 g/L", 62.1e-3 / MM.Ca], ["Ca", "1.5 mmol/L", 1.5e-3], ["Ca", "1500 µmol/L", 1.5e-3], ["Ca", "1.5e-3 mol/L", 1.5e-3], ["Ca", "1.5 mM", 1.5e-3],
    ["Ca", "1500 uM", 1.5e-3], ["Ca", "0.0015 M", 1.5e-3], ["Ca", "1.5 mmol/kg", 1.5e-3], ["Ca", "3 meq/L", 1.5e-3], ["Ca", "3000 µeq/L", 1.5e-3],
    ["Ca", "100.08 mg/L as CaCO3", 1e-3], ["Ca", "100.08 mg/L CaCO3", 1e-3], ["Ca", "1 °dH", 10e-3 / MM.CaO], ["Mg", "1 dH", 10e-3 / MM.CaO], ["Mg", "50.04 mg/L as CaCO3", 0.5e-3],
    ["NO3", "1.4 mg/L as N", 1.4e-3 / MM.N], ["NO3", "1.4 mg/l as N", 1.4e-3 / MM.N], ["NO3", "1.4 mg N/L", 1.4e-3 / MM.N], ["NO3", "1.4 mg/L N", 1.4e-3 / MM.N], ["NO3", "1.4 mg/L NO3-N", 1.4e-3 / MM.N],
    ["NO3", "1.4 mg/L", 1.4e-3 / MM.NO3], ["NO3", "0.1 mmol/L as N", 1e-4], ["NH4", "1.4 mg/L as N", 1.4e-3 / MM.N], ["NH4", "1.8039 mg/L", 1e-4],
    ["SO4", "29 mg/L", 29e-3 / MM.SO4], ["SO4", "29 mg/L as S", 29e-3 / MM.S], ["SO4", "2 meq/L", 1e-3], ["PO4", "0.1 mg/L as P", 0.1e-3 / MM.P], ["PO4", "9.497 mg/L", 1e-4],
    ["Si", "8 mg/L", 8e-3 / MM.Si], ["Si", "8 mg/L as SiO2", 8e-3 / MM.SiO2], ["Si", "8 mg SiO2/L", 8e-3 / MM.SiO2], ["Na", "0.21 mmol/L", 0.21e-3], ["Na", "1e1 mg/L", 10e-3 / MM.Na], ["Na", ".5 mg/L", 0.5e-3 / MM.Na],
    ["DIC", 2.5, 2.5e-3], ["DIC", "12.011 mg/L", 1e-3], ["DIC", "61.016 mg/L as HCO3", 1e-3], ["DIC", "44.009 mg/L as CO2", 1e-3],
    ["Ca", { value: 62.1, unit: "mg/L" }, 62.1e-3 / MM.Ca], ["Ca", { value: 62.1 }, 62.1e-3 / MM.Ca], ["NO3", { value: 1.4, unit: "mg/L", as: "N" }, 1.4e-3 / MM.N], ["NO3", { value: 1.4, as: "N" }, 1.4e-3 / MM.N],
    ["NO3", { value: 1.4, unit: "mg/L as N", sd: 0.1, method: "ion chromatography", fraction: "filtered" }, 1.4e-3 / MM.N],
  ])("%s of %j is %d", (key, raw, expected) => near(base(key, raw), expected));
});

describe("alkalinity and ANC in eq/kg", () => {
  test.each<[string, unknown, number]>([
    ["alkalinity", 2.71, 2.71e-3], ["alkalinity", "2710 µeq/L", 2.71e-3], ["alkalinity", "2.71 mmol/L", 2.71e-3], ["alkalinity", "50.04 mg/L as CaCO3", 1e-3], ["alkalinity", "1 mg/L as CaCO3", 1e-3 / 50.04],
    ["alkalinity", "165 mg/L as HCO3", 165e-3 / MM.HCO3], ["alkalinity", "165 mg/L HCO3", 165e-3 / MM.HCO3], ["alkalinity", "165 mg/L HCO3^-", 165e-3 / MM.HCO3], ["alkalinity", "1 mmol/L as CaCO3", 2e-3],
    ["alkalinity", "1 °dH", 20e-3 / MM.CaO], ["ANC", 120, 120e-6], ["ANC", "-40 ueq/L", -40e-6], ["ANC", "−40 µeq/L", -40e-6], ["ANC", "0.12 meq/L", 120e-6], ["alkalinity", { value: 135, unit: "mg/L", as: "CaCO3" }, 135e-3 / 50.04],
  ])("%s of %j is %d", (key, raw, expected) => near(base(key, raw), expected));

  it("has the rounded figures of handbooks: 0.01998 meq per mg/L CaCO3, 0.357 meq per German degree, 2.704 meq for 165 mg/L HCO3", () => {
    expect(base("alkalinity", "1 mg/L as CaCO3") * 1e3).toBeCloseTo(0.01998, 5);
    expect(base("alkalinity", "1 °dH") * 1e3).toBeCloseTo(0.357, 3);
    expect(base("alkalinity", "165 mg/L as HCO3") * 1e3).toBeCloseTo(2.704, 3);
  });
});

describe("conditions", () => {
  test.each<[string, unknown, number]>([
    ["temperature", "8.4 °C", 8.4], ["temperature", "8.4 degC", 8.4], ["temperature", "8.4 C", 8.4], ["pH", "7.9", 7.9], ["pHTemperature", "293.15 K", 20], ["altitude", "0.31 km", 310], ["altitude", "1000 ft", 304.8],
    ["pressure", "101.325 kPa", 1], ["pressure", "1013.25 hPa", 1], ["pressure", 0.97, 0.97], ["conductivity", "0.352 mS/cm", 352], ["conductivity", "35.2 mS/m", 352], ["conductivity", "352 µS/cm", 352],
    ["DOC", 4.2, 4.2], ["DOC", "4200 µg/L", 4.2], ["DOC", "1 mmol/L", 12.011], ["DOC", { value: 4.2, unit: "mg/L", sd: 0.3, method: "combustion", fraction: "filtered" }, 4.2],
  ])("%s of %j is %d", (key, raw, expected) => near(base(key, raw), expected));
});

describe("a CO2 pressure", () => {
  const pressure = (raw: unknown, waters: Plain = {}) => resolved({ row: { pCO2: raw }, waters }).waters[0].pCO2;
  test.each<[unknown, number]>([
    [4e-4, 4e-4], ["400 uatm", 4e-4], ["400 µatm", 4e-4], ["0.4 matm", 4e-4], ["40.53 Pa", 4e-4], ["0.04053 kPa", 4e-4], ["0.4053 hPa", 4e-4], ["1.01325 bar", 1], ["1013.25 mbar", 1], [{ log10: -3.4 }, 10 ** -3.4], [{ value: 400, unit: "uatm" }, 4e-4],
  ])("of %j is %d atm", (raw, expected) => near((pressure(raw) as { atm: number }).atm, expected));

  it("in ppm is a dry mole fraction, also by the column's default unit", () => {
    expect(pressure("420 ppm")).toEqual({ dryFraction: 420 * 1e-6 });
    expect(pressure(420, { units: { pCO2: "ppm" } })).toEqual({ dryFraction: 420 * 1e-6 });
  });

  it("in ppm is of 1 atm, or of the moist air at an altitude, or at a pressure, which wins; anything else is not of the air", () => {
    const at = (row: Plain, pCO2: unknown = "420 ppm"): number => outcomes({ row: { ...row, temperature: 10 }, kase: { close: ["alkalinity", "pCO2"], pCO2 }, report: ["pCO2"] })[0].values.pCO2;
    const vapour = 0.61121 * Math.exp((18.678 - 10 / 234.5) * 10 / (257.14 + 10)) / 101.325;
    near(at({}), 420e-6);
    near(at({ altitude: 310 }), 420e-6 * ((1 - 2.25577e-5 * 310) ** 5.2559 - vapour));
    near(at({ altitude: 310, pressure: "98 kPa" }), 420e-6 * (98 / 101.325 - vapour));
    near(at({ altitude: 310 }, "420 uatm"), 420e-6);
  });
});

describe("default units", () => {
  it("count bare numbers of their column, with their basis, and nothing else", () => {
    const units = { Ca: "mmol/L", NO3: "mg/L as N", alkalinity: "mg/L as CaCO3", temperature: "K", pH: "" };
    near(base("Ca", 1.5, { units }), 1.5e-3);
    near(base("Ca", "62.1 mg/L", { units }), 62.1e-3 / MM.Ca);
    near(base("Ca", { value: 1.5 }, { units }), 1.5e-3);
    near(base("NO3", 1.4, { units }), 1.4e-3 / MM.N);
    near(base("NO3", "<2.8", { units }), 1.4e-3 / MM.N);
    near(base("alkalinity", 50.04, { units }), 1e-3);
    near(base("temperature", 283.15, { units }), 10);
    near(base("Mg", 24.305, { units }), 1e-3);
  });

  it("count a case's bare numbers too", () => {
    near(resolved({ waters: { units: { DIC: "umol/L" } }, kase: { close: ["pH", "DIC"], DIC: 1500 } }).cases[0].given.DIC!, 1.5e-3);
  });
});

describe("a value below its limit", () => {
  test.each<[Plain, number]>([[{}, 0.5], [{ belowLimit: "half" }, 0.5], [{ belowLimit: "zero" }, 0], [{ belowLimit: "limit" }, 1]])("with %j counts as %d of it, written either way, in a row and in a case", (waters, share) => {
    for (const raw of ["<0.05 mg/L", "< 0.05 mg/L", "<0.05", { value: 0.05, unit: "mg/L", below: true }]) {
      expect(base("F", raw, waters)).toBeCloseTo(share * 0.05e-3 / 18.998, 15);
      expect(resolved({ waters, kase: { F: raw } }).cases[0].given.totals!.F).toBeCloseTo(share * 0.05e-3 / 18.998, 15);
    }
  });

  it("is the value itself where below is false", () => near(base("F", { value: 0.05, below: false }), 0.05e-3 / 18.998));

  test.each([["temperature", "<5 °C"], ["pH", "<4"], ["altitude", "<300 m"]])("cannot be a %s", (key, raw) => {
    expect(onlyIssue({ row: { [key]: raw } })).toMatchObject({ pointer: `/waters/rows/0/${key}`, code: "no-limit" });
  });
});
