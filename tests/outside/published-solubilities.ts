/** Solubilities: calcite under CO2, gypsum, fluorite, barite, silica, gibbsite. */
import type { PublishedCheck } from "./published-checks";
import { solveOneWater } from "./solve-spec";

const TEXTBOOK = "Stumm & Morgan 1996 (Aquatic Chemistry, 3rd ed.); Garrels & Christ 1965: worked example";
const CRC = "CRC Handbook of Chemistry and Physics";
const noCarbon = { close: ["charge", "DIC"] };
const excess = (solid: string, gas: string) => ({ react: { gas, solids: { [solid]: { supply: "excess" } } } });
const openTo = (log10: number) => ({ close: ["charge", "pCO2"], pCO2: { log10 } });
type Found = Record<string, number>;
const between = (low: number, high: number) => ({ value: (low + high) / 2, tolerance: { absolute: (high - low) / 2 } });

function calciteUnderGas(): PublishedCheck[] {
  const open = (log10: number, report: string[]): Found => solveOneWater({ temperature: 25 }, { ...openTo(log10), ...excess("calcite", "open"), activity: "davies" }, report);
  const closed = (report: string[]): Found => solveOneWater({ temperature: 25, DIC: "0 mmol/L" }, { ...noCarbon, ...excess("calcite", "closed"), activity: "davies" }, report);
  const gas = (log10: number) => solveOneWater({ temperature: 25 }, { ...openTo(log10), activity: "davies" }, ["pH"]).pH;
  const range = "the textbooks' own constants and activity corrections differ by this range";
  const rows: [string, string, ReturnType<typeof between>, () => number][] = [
    ["pH over calcite under 10^-3.5 atm CO2", "pH", between(8.26, 8.31), () => open(-3.5, ["pH"]).pH],
    ["Ca over calcite under 10^-3.5 atm CO2", "mmol/L", between(0.47, 0.52), () => open(-3.5, ["dissolved:Ca"])["dissolved:Ca"] * 1e3],
    ["alkalinity over calcite under 10^-3.5 atm CO2", "meq/L", between(0.95, 1.04), () => open(-3.5, ["alkalinity"]).alkalinity / 1e3],
    ["pH over calcite without a gas phase", "pH", between(9.9, 9.95), () => closed(["pH"]).pH],
    ["Ca over calcite without a gas phase", "mmol/L", between(0.11, 0.13), () => closed(["dissolved:Ca"])["dissolved:Ca"] * 1e3],
    ["pH of pure water under 10^-3.5 atm CO2", "pH", between(5.63, 5.67), () => gas(-3.5)], ["pH of pure water under 1 atm CO2", "pH", between(3.89, 3.93), () => gas(0)],
  ];
  const examples = rows.map(([what, unit, bounds, find]): PublishedCheck => ({ topic: "calcite and CO2 in pure water", what: `${what}, 25 °C, davies`, unit, source: TEXTBOOK, fromMemory: false, ...bounds, because: range, find }));
  const wide = [-6, -5, -4, -3, -2, -1, 0].map((log10): PublishedCheck => ({
    topic: "calcite and CO2 in pure water", what: `Ca over calcite under 10^${log10} atm CO2, 25 °C, ideal, without pairs`, unit: "mmol/L", fromMemory: false,
    source: "Garrels & Christ 1965, Solutions, Minerals, and Equilibria, ch. 3: charge balance 2[Ca] + [CaOH] + [H] = [HCO3] + 2[CO3] + [OH], solved by hand with the constants of Plummer & Busenberg 1982 at 25 °C",
    value: byHand(log10) * 1e3, tolerance: { share: 1e-3 }, because: "the constants by hand are rounded to 0.001 in log K, which is 0.08 % in Ca once; anything more would be a slip",
    find: () => solveOneWater({ temperature: 25 }, { ...openTo(log10), ...excess("calcite", "open"), activity: "ideal", complexes: "none" }, ["dissolved:Ca"])["dissolved:Ca"] * 1e3,
  }));
  const atOneAtmosphere: PublishedCheck = {
    topic: "calcite and CO2 in pure water", what: "Ca over calcite under 1 atm CO2, 25 °C, davies", unit: "mmol/L", source: "solubility of calcite under about 1 atm CO2, as in Plummer & Busenberg 1982 and the handbooks", fromMemory: true, ...between(8.6, 9.6),
    because: "the measurements at one atmosphere scatter by 5 %", find: () => open(0, ["dissolved:Ca"])["dissolved:Ca"] * 1e3,
  };
  const cubicLaw: PublishedCheck = {
    topic: "calcite and CO2 in pure water", what: "slope of log Ca over log pCO2 between 10^-2 and 10^-1 atm, 25 °C, ideal, without pairs", unit: "", source: "Garrels & Christ 1965; Stumm & Morgan 1996: Ca rises with the cube root of pCO2", fromMemory: false,
    value: 1 / 3, tolerance: { absolute: 0.002 }, because: "the law leaves out carbonate and hydrogen ions, which still matter by half a percent",
    find: () => { const of = (log10: number) => Math.log10(solveOneWater({ temperature: 25 }, { ...openTo(log10), ...excess("calcite", "open"), activity: "ideal", complexes: "none" }, ["dissolved:Ca"])["dissolved:Ca"]); return of(-1) - of(-2); },
  };
  return [...examples, ...wide, atOneAtmosphere, cubicLaw];
}

/** Total calcium over calcite by bisection on the printed charge balance; mol/L. */
function byHand(log10: number): number {
  const KH = 10 ** -1.468, K1 = 10 ** -6.352, K2 = 10 ** -10.329, KC = 10 ** -8.48, KW = 1e-14, KOH = 10 ** -12.78;
  const at = (pH: number) => {
    const h = 10 ** -pH;
    const HCO3 = KH * 10 ** log10 * K1 / h;
    const CO3 = HCO3 * K2 / h;
    const Ca = KC / CO3;
    const CaOH = Ca * KOH / h;
    return { charge: 2 * Ca + CaOH + h - HCO3 - 2 * CO3 - KW / h, calcium: Ca + CaOH };
  };
  let [low, high] = [4, 12];
  for (let k = 0; k < 100; k++) { const middle = (low + high) / 2; if (at(middle).charge > 0) low = middle; else high = middle; }
  return at(low).calcium;
}

function inPureWater(): PublishedCheck[] {
  const dissolved = (solid: string, temperature: number, activity: string) =>
    solveOneWater({ temperature, DIC: "0 mmol/L" }, { ...noCarbon, activity, ...excess(solid, "closed") }, ["solids"])[`solid:${solid}`];
  const gypsumModels = [["debye-huckel", 0.04], ["truesdell-jones", 0.04], ["davies", 0.06]] as const;
  const gypsum = gypsumModels.map(([activity, share]): PublishedCheck => ({
    topic: "solubility in pure water", what: `gypsum, 25 °C, ${activity}`, unit: "mmol/L", source: CRC, fromMemory: false, value: 15.2, tolerance: { share },
    because: "I = 0.05 with a pair of doubly charged ions: coefficients good to 3 %, Davies to 5 %", find: () => dissolved("gypsum", 25, activity),
  }));
  // Grams of CaSO4 in 100 g of water.
  const overTemperature = ([[0, 0.176], [10, 0.193], [20, 0.204], [30, 0.209], [40, 0.2097]] as const).map(([celsius, grams]): PublishedCheck => ({
    topic: "solubility in pure water", what: `gypsum, ${celsius} °C, truesdell-jones`, unit: "mmol/L", source: `${CRC}, grams of CaSO4 in 100 g of water`, fromMemory: true, value: grams * 1e4 / 136.134, tolerance: { share: 0.05 },
    because: "coefficients good to 3 %, handbook tables differ by 2 %", find: () => dissolved("gypsum", celsius, "truesdell-jones"),
  }));
  const others: [string, number, number, number, string, string, boolean, string][] = [
    ["fluorite", 78.074, 16, 1 / 16, CRC, "published values from 15 to 17 mg/L", false, "mg/L CaF2"],
    ["barite", 233.384, 2.45, 0.1, CRC, "published values from 2.2 to 2.7 mg/L", true, "mg/L BaSO4"],
    ["amorphous silica", 60.083, 116, 0.05, "Morey, Fournier & Rowe 1964, J. Geophys. Res. 69:1995", "preparations differ by 5 %", true, "mg/L SiO2"],
    ["quartz", 60.083, 6, 0.12, "Morey, Fournier & Rowe 1962, Geochim. Cosmochim. Acta 26:1029", "extrapolated from hot water, ±0.7 mg/L", true, "mg/L SiO2"],
    ["celestite", 183.677, 124, 0.15, CRC, "handbook values from 113 to 135 mg/L; the constants set lists no pair of strontium with sulphate, which would add 7 %", true, "mg/L SrSO4"],
  ];
  const single = others.flatMap(([solid, mass, value, share, source, because, fromMemory, unit]) => (["davies", "debye-huckel", "truesdell-jones"] as const).map((activity): PublishedCheck => ({
    topic: "solubility in pure water", what: `${solid}, 25 °C, ${activity}`, unit, source, fromMemory, value, tolerance: { share }, because, find: () => dissolved(solid, 25, activity) * mass,
  })));
  return [...gypsum, ...overTemperature, ...single];
}

/** pH of least total aluminium over gibbsite, by golden section, and that total. */
function gibbsiteMinimum(): { pH: number; lgTotal: number } {
  const lg = (pH: number) => {
    const start = solveOneWater({ temperature: 25, DIC: "0 mmol/L", pH, Al: "1 mmol/L" }, { close: ["pH", "DIC"], activity: "ideal" }, ["activities", "SI:gibbsite", "dissolved:Al"]);
    // At given pH without fluoride or sulphate every aluminium species goes with a(Al^3+): the total at saturation follows from SI.
    return Math.log10(start["dissolved:Al"]) - start["SI:gibbsite"];
  };
  let [a, b] = [5, 8];
  for (let k = 0; k < 40; k++) { const u = b - (b - a) * 0.618, v = a + (b - a) * 0.618; if (lg(u) < lg(v)) b = v; else a = u; }
  return { pH: (a + b) / 2, lgTotal: lg((a + b) / 2) };
}

function gibbsite(): PublishedCheck[] {
  const source = "Nordstrom & May 1996, in: The Environmental Chemistry of Aluminum, 2nd ed.; Stumm & Morgan 1996, solubility diagrams of Al(OH)3";
  const because = "read from diagrams; the neutral Al(OH)3(aq), little known, flattens the minimum";
  return [
    { topic: "gibbsite", what: "pH of least solubility, 25 °C, ideal", unit: "pH", source, fromMemory: true, ...between(6, 6.6), because, find: () => gibbsiteMinimum().pH },
    { topic: "gibbsite", what: "log10 of least total Al, mol/kg, 25 °C, ideal", unit: "", source, fromMemory: true, ...between(-8.4, -7.4), because, find: () => gibbsiteMinimum().lgTotal },
  ];
}

export const solubilities = (): PublishedCheck[] => [...calciteUnderGas(), ...inPureWater(), ...gibbsite()];
