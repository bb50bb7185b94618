/** Constants over temperature, crossings of distribution diagrams, gas solubility, conversions. */
import { debyeSizeFactor, debyeSlope } from "@/lib/chemistry/temperature";
import type { PublishedCheck } from "./published-checks";
import { solveOneWater } from "./solve-spec";

const PB = "Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011";
const STUMM = "Stumm & Morgan 1996, Aquatic Chemistry, 3rd ed.";
const CRC = "CRC Handbook of Chemistry and Physics";
const openTo = (log10: number) => ({ close: ["charge", "pCO2"], pCO2: { log10 } });
const PRINTED = "the published figure is rounded to 0.001";

/** log K from the activities in a water. */
function constantOf(celsius: number, terms: Record<string, number>, SI?: string): number {
  const found = solveOneWater({ temperature: celsius, Ca: "1 mmol/L", Na: "1 mmol/L", Cl: "1 mmol/L" }, { ...openTo(-3.4), activity: "ideal" }, ["activities", "SI"]);
  return Object.entries(terms).reduce((sum, [name, count]) => sum + count * found[`lgActivity:${name}`], SI ? -found[`SI:${SI}`] : 0);
}

function constants(): PublishedCheck[] {
  const calcium = { "Ca^2+": 1, "CO3^2-": 1 };
  const rows: [string, Record<string, number>, string | undefined, [number, number][]][] = [
    ["calcite", calcium, "calcite", [[0, -8.381], [10, -8.41], [25, -8.48], [40, -8.58]]],
    ["aragonite", calcium, "aragonite", [[0, -8.218], [10, -8.255], [25, -8.336]]], ["vaterite", calcium, "vaterite", [[0, -7.743], [10, -7.802], [25, -7.913]]],
    ["K1 of carbonic acid", { "H^+": 1, "HCO3^-": 1, "CO2(aq)": -1 }, undefined, [[0, -6.579], [10, -6.463], [25, -6.352]]],
    ["K2 of carbonic acid", { "H^+": 1, "CO3^2-": 1, "HCO3^-": -1 }, undefined, [[0, -10.629], [10, -10.488], [25, -10.329]]],
    ["formation of CaHCO3^+", { "CaHCO3^+": 1, "Ca^2+": -1, "HCO3^-": -1 }, undefined, [[0, 0.82], [10, 0.968], [25, 1.106]]],
    ["formation of CaCO3(aq)", { "CaCO3(aq)": 1, "Ca^2+": -1, "CO3^2-": -1 }, undefined, [[0, 3.134], [10, 3.135], [25, 3.224]]],
  ];
  const printed = rows.flatMap(([what, terms, SI, points]) => points.map(([celsius, value]): PublishedCheck => ({
    topic: "constants over temperature", what: `log K, ${what}, ${celsius} °C`, unit: "", source: PB, fromMemory: false, value, tolerance: { absolute: 0.0015 }, because: PRINTED, find: () => constantOf(celsius, terms, SI),
  })));
  const water = ([[0, -14.942, 0.0015, false], [10, -14.534, 0.0015, false], [25, -14, 0.0015, false], [40, -13.535, 0.02, true], [50, -13.262, 0.025, true], [60, -13.017, 0.03, true]] as const).map(([celsius, value, absolute, fromMemory]): PublishedCheck => ({
    topic: "constants over temperature", what: `log K of water, ${celsius} °C`, unit: "", source: fromMemory ? "Harned & Owen 1958, Physical Chemistry of Electrolytic Solutions, and handbooks" : "Marshall & Franck 1981 as fitted in Nordstrom et al. 1990", fromMemory, value,
    tolerance: { absolute }, because: fromMemory ? "two determinations, which part slowly above 25 °C" : PRINTED, find: () => constantOf(celsius, { "H^+": 1, "OH^-": 1 }),
  }));
  // Bunsen coefficients (volumes of gas at 0 °C and 1 atm), 22.26 L/mol of CO2.
  const henry = ([[0, 1.713], [5, 1.424], [10, 1.194], [15, 1.019], [20, 0.878], [25, 0.759], [30, 0.665], [40, 0.53]] as const).map(([celsius, bunsen]): PublishedCheck => ({
    topic: "CO2 in water", what: `CO2(aq) under 1 atm, ${celsius} °C, from the Bunsen coefficient ${bunsen}`, unit: "mol/kg", source: `${CRC}, absorption coefficients of gases`, fromMemory: true, value: bunsen / 22.26, tolerance: { share: 0.015 },
    because: "litre taken for kilogram (0.3–0.8 %), fugacity for pressure (0.5 %), and the table's own digits",
    find: () => solveOneWater({ temperature: celsius }, { ...openTo(0), activity: "ideal" }, ["conc:CO2(aq)"])["conc:CO2(aq)"],
  }));
  return [...printed, ...water, ...henry];
}

/** pH at which two species cross, from their ratio at a pH nearby: the ratio goes with a whole power of a(H). */
function crossing(row: Record<string, unknown>, pH: number, [acid, base, protons]: readonly [string, string, number]): number {
  const found = solveOneWater({ temperature: 25, DIC: "1 mmol/L", pH, ...row }, { close: ["pH", "DIC"], activity: "ideal" }, ["species"]);
  return pH + Math.log10(found[`conc:${acid}`] / found[`conc:${base}`]) / protons;
}

function crossings(): PublishedCheck[] {
  const handbook = "the product's constant against another compilation's, rounded to 0.01–0.05";
  const rows: readonly (readonly [string, Record<string, unknown>, readonly [string, string, number], number, number, string])[] = [
    ["CO2(aq) and HCO3^-", {}, ["CO2(aq)", "HCO3^-", 1], 6.35, 0.01, CRC], ["HCO3^- and CO3^2-", {}, ["HCO3^-", "CO3^2-", 1], 10.33, 0.01, CRC],
    ["NH4^+ and NH3", { NH4: "1 mmol/L" }, ["NH4^+", "NH3", 1], 9.25, 0.01, CRC], ["HF and F^-", { F: "0.001 mmol/L" }, ["HF", "F^-", 1], 3.19, 0.03, CRC],
    ["HSO4^- and SO4^2-", { SO4: "1 mmol/L" }, ["HSO4^-", "SO4^2-", 1], 1.99, 0.01, CRC], ["H3PO4 and H2PO4^-", { PO4: "1 mmol/L" }, ["H3PO4", "H2PO4^-", 1], 2.15, 0.02, CRC],
    ["H2PO4^- and HPO4^2-", { PO4: "1 mmol/L" }, ["H2PO4^-", "HPO4^2-", 1], 7.2, 0.02, CRC], ["HPO4^2- and PO4^3-", { PO4: "1 mmol/L" }, ["HPO4^2-", "PO4^3-", 1], 12.35, 0.03, CRC],
    ["H4SiO4 and H3SiO4^-", { Si: "0.1 mmol/L" }, ["H4SiO4", "H3SiO4^-", 1], 9.84, 0.04, CRC],
    ["Al^3+ and AlOH^2+", { Al: "0.001 mmol/L" }, ["Al^3+", "AlOH^2+", 1], 4.98, 0.05, STUMM],
    ["AlOH^2+ and Al(OH)2^+", { Al: "0.001 mmol/L" }, ["AlOH^2+", "Al(OH)2^+", 1], 5.1, 0.1, "Nordstrom & May 1996, in: The Environmental Chemistry of Aluminum, 2nd ed."],
    ["Al(OH)2^+ and Al(OH)4^-", { Al: "0.001 mmol/L" }, ["Al(OH)2^+", "Al(OH)4^-", 2], 6.3, 0.1, "Nordstrom & May 1996, in: The Environmental Chemistry of Aluminum, 2nd ed."],
  ];
  return rows.map(([what, row, pair, value, absolute, source]): PublishedCheck => ({
    topic: "crossings of distribution diagrams", what: `pH where ${what} are equal, 25 °C, ideal`, unit: "pH", source, fromMemory: true, value, tolerance: { absolute }, because: handbook, find: () => crossing(row, Math.round(value), pair),
  }));
}

function conversions(): PublishedCheck[] {
  const calcium = (quantity: string) => () => solveOneWater({ temperature: 10, Ca: quantity }, openTo(-3.4), ["dissolved:Ca"])["dissolved:Ca"] * 2e3;
  const rows: [string, string, string, number, { absolute: number }, () => number][] = [
    ["1 mg/L as CaCO3", "meq/L", "ISO 6059 and handbooks", 0.01998, { absolute: 1e-5 }, calcium("1 mg/L as CaCO3")],
    ["1 °dH, 10 mg/L CaO", "meq/L", "ISO 6059 and handbooks", 0.357, { absolute: 5e-4 }, calcium("10 mg/L as CaO")],
    ...([[0, 0.4918], [10, 0.4989], [25, 0.5108]] as const).map(([t, a]): [string, string, string, number, { absolute: number }, () => number] => [`Debye–Hückel A, ${t} °C`, "", "Malmberg & Maryott 1956 (ε), Kell 1975 (ρ)", a, { absolute: 6e-5 }, () => debyeSlope(t)]),
    ["Debye–Hückel B, 25 °C", "1/Å", "Malmberg & Maryott 1956 (ε), Kell 1975 (ρ)", 0.3287, { absolute: 6e-5 }, () => debyeSizeFactor(25)],
  ];
  return rows.map(([what, unit, source, value, tolerance, find]) => ({ topic: "conversions and Debye–Hückel slopes", what, unit, source, fromMemory: false, value, tolerance, because: "the published figure's last digit", find }));
}

export const equilibria = (): PublishedCheck[] => [...constants(), ...crossings(), ...conversions()];
