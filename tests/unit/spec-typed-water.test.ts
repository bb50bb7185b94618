/** A water as it is dictated: what is read, what is marked, and what is assumed. */
import { describe, expect, it, test } from "vitest";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { parseWaterLine, specForLine } from "@/lib/chemistry/parse-water";
import { resolveJob } from "@/lib/chemistry/resolve-job";

/** The row of a line without a fault. */
function rowOf(line: string): Record<string, string | number> {
  const { tokens, row } = parseWaterLine(line);
  expect(tokens.filter(({ problem }) => problem).map(({ problem }) => problem), line).toEqual([]);
  return row;
}

/** The marked places of a line: text, suggestion, problem. */
const faultsOf = (line: string): [string, string | undefined, string][] =>
  parseWaterLine(line).tokens.flatMap(({ start, end, suggestion, problem }) => (problem ? [[line.slice(start, end), suggestion, problem] as [string, string | undefined, string]] : []));

const SAME = { Ca: "62 mg/L", alkalinity: "2.71 meq/L", pH: 7.9, temperature: 8.4 };

describe("the same water", () => {
  test.each([
    "Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C", "Ca 62 mg/L alkalinity 2.71 meq/L pH 7.9 8.4 °C", "Ca 62 mg/L; alkalinity 2.71 meq/L; pH 7.9; 8.4 °C", "Ca 62 mg/L\nalkalinity 2.71 meq/L\npH 7.9\n8.4 °C", "Ca 62 mg/L,alkalinity 2.71 meq/L,pH 7.9,8.4 °C",
    "Ca=62 mg/L, alkalinity=2.71 meq/L, pH=7.9, T=8.4 °C", "Ca: 62 mg/L, alk: 2.71 meq/L, pH: 7.9, temperature: 8.4", "Ca = 62mg/L alk = 2.71meq/L pH = 7.9 T = 8.4°C", "Ca=62mg/L alk=2.71meq/L pH=7.9 T=8.4°C",
    "pH 7,9, Ca 62,0 mg/L, alkalinity 2,71 meq/L, 8,4 °C", "62 mg/L Ca, 2.71 meq/L alkalinity, pH 7.9, 8.4 °C", "62 mg/L calcium, 2.71 meq/L total alkalinity, 7.9 pH, 8.4 °C", "calcium 62 total alkalinity 2.71 pH 7.9 temp 8.4", "Ca^2+ 62 mg/l, Alkalinity 2.71 meq/l, PH 7.9, 8.4 degC",
    "Ca²⁺ 62 mg/L, m-alkalinity 2.71 meq/L, pH7.9, 8.4C", "Ca of 62 mg/L and alkalinity of 2.71 meq/L with a pH of 7.9 at 8.4 °C", "ca2+ 62 mg/L, alk 2.71 meq/L, pH 7.9, 281.55 K", "  Ca   62  mg/L ,, alk  2.71 meq/L ; pH  7.9 , 8.4  ° C ",
  ])("%j", (line) => {
    const row = rowOf(line);
    expect({ ...row, Ca: String(row.Ca).replace("62.0", "62") }).toEqual(SAME);
  });
});

describe("a value", () => {
  /** In base units, through the spec. */
  const baseOf = (line: string, key: string): number => {
    rowOf(line);
    const { spec, issues } = checkSpec(specForLine(parseWaterLine(line)));
    expect(issues, line).toEqual([]);
    const [water] = resolveJob(spec!, spec!.waters.rows as Record<string, unknown>[]).waters;
    return water.totals[key] ?? (water as unknown as Record<string, number>)[key];
  };

  test.each<[string, string, number]>([
    ["HCO3 165 mg/L", "alkalinity", 165e-3 / 61.016], ["HCO3 165", "alkalinity", 165e-3 / 61.016], ["HCO₃⁻ 165 mg/L", "alkalinity", 165e-3 / 61.016], ["bicarbonate 165 mg/l", "alkalinity", 165e-3 / 61.016], ["HCO3- 2.7 meq/L", "alkalinity", 2.7e-3], ["HCO3 2.7 mmol/L", "alkalinity", 2.7e-3],
    ["alkalinity 135 mg/L as CaCO3", "alkalinity", 135e-3 / 50.04], ["alkalinity 135 mg/L CaCO3", "alkalinity", 135e-3 / 50.04], ["alk 135 mg CaCO3/L", "alkalinity", 135e-3 / 50.04], ["alkalinity 7.6 °dH", "alkalinity", 7.6 * 20e-3 / 56.077],
    ["NO3-N 1.4 mg/L", "NO3", 1.4e-3 / 14.007], ["NO3-N 1.4", "NO3", 1.4e-3 / 14.007], ["nitrate 1.4 mg/L as N", "NO3", 1.4e-3 / 14.007], ["nitrate 1.4 mg N/L", "NO3", 1.4e-3 / 14.007], ["1.4 mg/L as N nitrate", "NO3", 1.4e-3 / 14.007], ["NO3 1.4 mg/L", "NO3", 1.4e-3 / 62.004],
    ["NH4-N 0.1 mg/L", "NH4", 0.1e-3 / 14.007], ["ammonia 0.1 mg/L", "NH4", 0.1e-3 / 17.031], ["PO4-P 0.02 mg/L", "PO4", 0.02e-3 / 30.974], ["SiO2 8 mg/L", "Si", 8e-3 / 60.083], ["silica 8", "Si", 8e-3 / 60.083], ["dissolved silica 8 mg/L", "Si", 8e-3 / 60.083],
    ["Si 8 mg/L", "Si", 8e-3 / 28.085], ["SiO2 0.1 mmol/L", "Si", 1e-4], ["SO4 29 mg/L", "SO4", 29e-3 / 96.056], ["SO₄²⁻ 29 mg/L", "SO4", 29e-3 / 96.056], ["sulfate 29", "SO4", 29e-3 / 96.056], ["sulphate 2 meq/L", "SO4", 1e-3],
    ["F <0.05 mg/L", "F", 0.025e-3 / 18.998], ["F < 0.05 mg/L", "F", 0.025e-3 / 18.998], ["F<0,05mg/L", "F", 0.025e-3 / 18.998], ["Ca 1.55 mM", "Ca", 1.55e-3], ["Ca 1550 µmol/L", "Ca", 1.55e-3], ["Ca 6.2e1 mg/L", "Ca", 62e-3 / 40.078], ["Ca 62 ppm", "Ca", 62e-3 / 40.078],
    ["acid neutralising capacity -40 ueq/L", "ANC", -40e-6], ["ANC −40", "ANC", -40e-6], ["DOC 4.2", "DOC", 4.2], ["TIC 2.9 mmol/L", "DIC", 2.9e-3], ["labile aluminium 54 µg/L", "Al", 54e-6 / 26.982], ["K 1.2 mg/L", "K", 1.2e-3 / 39.098], ["1.2 mg/L K", "K", 1.2e-3 / 39.098],
    ["altitude 310 m", "altitude", 310], ["pressure 97 kPa", "pressureAtm", 97 / 101.325], ["EC 352 µS/cm", "conductivity", 352], ["0 °C", "temperature", 0], ["T 90", "temperature", 90],
  ])("%j is %s", (line, key, expected) => expect(baseOf(line, key)).toBeCloseTo(expected, 12));

  test.each<[string, object]>([
    ["pCO2 420 ppm", { dryFraction: 420e-6 }], ["CO2 420 ppm", { dryFraction: 420e-6 }], ["pCO2 0.001", { atm: 0.001 }], ["pCO2 1000 µatm", { atm: 0.001 }], ["pCO2 101.325 Pa", { atm: 0.001 }], ["pCO2=1 matm", { atm: 0.001 }], ["pCO2 1.01325 mbar", { atm: 0.001 }],
  ])("%j is a pressure of %j", (line, expected) => {
    const spec = specForLine(parseWaterLine(line));
    const { pCO2 } = resolveJob(spec, spec.waters.rows as Record<string, unknown>[]).waters[0];
    expect(Object.keys(pCO2!)).toEqual(Object.keys(expected));
    expect(Object.values(pCO2!)[0]).toBeCloseTo(Object.values(expected)[0] as number, 12);
  });
});

describe("a slip", () => {
  test.each<[string, string, string | undefined, RegExp]>([
    ["Ca 62 mg/L, alkalinty 2.71 meq/L, pH 7.9", "alkalinty", "alkalinity", /neither an analyte/], ["Clacium 62 mg/L", "Clacium", "calcium", /neither an analyte/], ["Ca 62 mg/L foo 3 mg/L", "foo", undefined, /neither an analyte/], ["Ca 62 mg/L sulfte 3 mg/L Mg 6", "sulfte", "sulfate", /neither an analyte/],
    ["Ca 62 furlong", "furlong", "mg/L", /does not take the unit “furlong”/], ["Ca 62 mgl", "mgl", "mg/L", /does not take/], ["Ca 62 MG/L", "MG/L", "mg/L", /does not take/], ["Ca 62 mg", "mg", "mg/L", /does not take/], ["pCO2 420 pmm", "pmm", "ppm", /does not take/],
    ["alkalinity 135 mg/L", "mg/L", "mg/L as CaCO3", /does not take/], ["DOC 4 meq/L", "meq/L", "mg/L", /does not take/], ["Ca 62 mg/L as N", "mg/L as N", "mg/L", /does not take/], ["8.4 °C, pH 7 mg/L", "mg/L", undefined, /does not take/],
    ["Ca", "Ca", undefined, /A number follows Ca: for example 12 mg\/L/], ["Ca mg/L, pH 7", "Ca", undefined, /A number follows Ca/], ["pH, Ca 62", "pH", undefined, /A number follows pH: for example 7.9/], ["Ca 62 mg/L, Ca 63 mg/L", "63", undefined, /Ca is given twice/], ["calcium 62 Ca 63", "63", undefined, /given twice/],
    ["pH 19", "19", undefined, /-2 to 16/], ["95 °C", "95", undefined, /0 to 90/], ["-1 °C", "-1", undefined, /0 to 90/], ["Ca -5 mg/L", "-5", undefined, /0 or more/], ["pCO2 -3.4", "-3.4", undefined, /above 0/], ["pH <4", "<4", undefined, /below a limit/],
    ["62 mg/L", "62", undefined, /without a name/], ["7.9", "7.9", undefined, /without a name/],
  ])("in %j is marked at %j", (line, text, suggestion, problem) => {
    const faults = faultsOf(line);
    expect(faults, JSON.stringify(faults)).toHaveLength(1);
    expect(faults[0][0]).toBe(text);
    if (suggestion) expect(faults[0][1]).toBe(suggestion);
    expect(faults[0][2]).toMatch(problem);
  });

  it("leaves the rest of the line read", () => {
    expect(parseWaterLine("Ca 62 mg/L, alkalinty 2.71 meq/L, pH 7.9, Mg 6 furlong, 8.4 °C").row).toEqual({ Ca: "62 mg/L", pH: 7.9, temperature: 8.4 });
  });

  it("is never passed over: a thousands comma is asked about", () => {
    expect(faultsOf("Ca 1,234.5 mg/L").map(([text, suggestion]) => [text, suggestion])).toContainEqual(["1,234.5", "1234.5"]);
  });
});

describe("tokens", () => {
  it("cover names, numbers, units and breaks in order, with what a word was taken for", () => {
    const line = "sulphate 29 mg/L, 8.4 °C";
    expect(parseWaterLine(line).tokens.map(({ start, end, kind, shown }) => [line.slice(start, end), kind, shown])).toEqual([
      ["sulphate", "analyte", "SO4"], ["29", "number", undefined], ["mg/L", "unit", undefined], [",", "separator", undefined], ["8.4", "number", undefined], ["°C", "unit", undefined],
    ]);
  });

  it("read a long paste in linear time", () => {
    const line = "Ca 62 mg/L foo bar 8 ".repeat(5000);
    const started = performance.now();
    expect(parseWaterLine(line).tokens.length).toBeGreaterThan(20_000);
    expect(performance.now() - started).toBeLessThan(5000);
  });
});

describe("the spec of a line", () => {
  test.each<[string, string[], string]>([
    ["Ca 62, alkalinity 2.71, pH 7.9, 8 °C", ["pH", "alkalinity"], "by pH and alkalinity"], ["pH 7.9, ANC 2700, 8 °C", ["pH", "ANC"], "by pH and ANC"], ["pH 7.9, alkalinity 2.71, pCO2 420 ppm, 8 °C", ["pH", "alkalinity"], "by pH and alkalinity"], ["pH 7.9, DIC 2.8, 8 °C", ["pH", "DIC"], "by pH and DIC"],
    ["pH 7.9, pCO2 420 ppm, 8 °C", ["pH", "pCO2"], "by pH and pCO2"], ["pH 7.9, Ca 62, Cl 12, 8 °C", ["pH", "charge"], "by pH and charge balance"], ["pH 7.9, 8 °C", ["pH", "pCO2"], "by pH and open air (420 ppm)"], ["alkalinity 2.71, 8 °C", ["alkalinity", "pCO2"], "by alkalinity and open air (420 ppm)"],
    ["alkalinity 2.71, pCO2 900 ppm, 8 °C", ["alkalinity", "pCO2"], "by alkalinity and pCO2"], ["ANC 100, DIC 0.2, 8 °C", ["ANC", "DIC"], "by ANC and DIC"], ["DIC 2.8, pCO2 420 ppm, 8 °C", ["DIC", "pCO2"], "by DIC and pCO2"], ["Ca 62, DIC 2.8, 8 °C", ["charge", "DIC"], "by charge balance and DIC"],
    ["Ca 62, 8 °C", ["charge", "pCO2"], "by charge balance and open air (420 ppm)"], ["Ca 62", ["charge", "pCO2"], "by charge balance and open air (420 ppm), at 25 °C for want of a temperature"],
  ])("%j closes on %j and says so in its name", (line, close, name) => {
    const spec = specForLine(parseWaterLine(line));
    expect(spec.cases[0]).toMatchObject({ close, name, activity: "davies" });
    expect(spec.cases[0].temperature).toBe(line.includes("°C") ? undefined : 25);
    expect(spec.cases[0].pCO2).toBe(name.includes("open air") ? "420 ppm" : undefined);
    expect(spec.waters.missing).toBe("zero");
    expect(checkSpec(spec).issues).toEqual([]);
  });

  it("is sound for an empty line too", () => expect(checkSpec(specForLine(parseWaterLine(""))).issues).toEqual([]));
});
