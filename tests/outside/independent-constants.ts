/**
 * A second transcription of the constants, typed in again from the published tables and shared with nothing under lib/, so that
 * a slip in one of the two shows as a disagreement. Every species is written from BARE masters (CO3^2-, PO4^3-, H^+ …), not
 * from the neutral reference species of the product's balances.
 *
 * Sources: carbonate system and calcium carbonates, Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011; water, Marshall &
 * Franck 1981 as fitted in Nordstrom et al. 1990; everything else Nordstrom et al. 1990, ACS Symp. Ser. 416:398 (from memory),
 * H3PO4 Stumm & Morgan 1996; ion sizes Kielland 1937; a and b of Truesdell & Jones 1974 (from memory).
 */

export type Master =
  | "H" | "CO3" | "Ca" | "Mg" | "Na" | "K" | "NH4" | "Sr" | "Ba" | "Al" | "Cl" | "NO3" | "NO2" | "SO4" | "F" | "PO4" | "Si";
type LogK = (celsius: number) => number;

const RESULT = Math.LN10 * 8.314462618;
/** a + bT + c/T + d·log10 T + e/T² */
const an = (a: number, b: number, c: number, d: number, e = 0): LogK => (t) => {
  const k = t + 273.15;
  return a + b * k + c / k + d * Math.log10(k) + e / k / k;
};
/** Van 't Hoff from 25 °C; enthalpy in kcal/mol. */
const vh = (logK25: number, kcal = 0): LogK => (t) => logK25 - (kcal * 4184 / RESULT) * (1 / (t + 273.15) - 1 / 298.15);
const sum = (...parts: LogK[]): LogK => (t) => parts.reduce((total, part) => total + part(t), 0);
const minus = (part: LogK): LogK => (t) => -part(t);

const HENRY = an(108.3865, 0.01985076, -6919.53, -40.45154, 669365);
const K1 = an(-356.3094, -0.06091964, 21834.37, 126.8339, -1684915);
const K2 = an(-107.8871, -0.03252849, 5151.79, 38.92561, -563713.9);
const KW = an(-283.971, -0.05069842, 13323, 102.24447, -1119669);
export const CO2_GAS = HENRY;

export interface PlainSpecies {
  name: string; z: number; parts: Partial<Record<Master, number>>; water: number;
  /** Named constant as printed; `own` overrides it, `rest` is what turns it into a formation from masters. */
  logK: LogK; size: number | null; tj: [number, number] | null; pair: boolean;
  /** Equivalents of alkalinity to the CO2 end point in one mole. */
  alkalinity: number;
}
const PLAIN: PlainSpecies[] = [];
interface Extra { w?: number; size?: number; tj?: [number, number]; pair?: boolean; alk?: number }
function add(name: string, z: number, parts: Partial<Record<Master, number>>, logK: LogK, extra: Extra = {}): void {
  PLAIN.push({
    name, z, parts, water: extra.w ?? 0, logK, size: z === 0 ? null : extra.size ?? 4, tj: extra.tj ?? null, pair: extra.pair ?? false, alkalinity: extra.alk ?? 0,
  });
}
const zero: LogK = () => 0;
const pair = { pair: true };

// Masters.
add("H^+", 1, { H: 1 }, zero, { size: 9, alk: -1 });
add("CO3^2-", -2, { CO3: 1 }, zero, { size: 4.5, tj: [5.4, 0], alk: 2 });
add("Ca^2+", 2, { Ca: 1 }, zero, { size: 6, tj: [5, 0.165] });
add("Mg^2+", 2, { Mg: 1 }, zero, { size: 8, tj: [5.5, 0.2] });
add("Na^+", 1, { Na: 1 }, zero, { size: 4, tj: [4, 0.075] });
add("K^+", 1, { K: 1 }, zero, { size: 3, tj: [3.5, 0.015] });
add("NH4^+", 1, { NH4: 1 }, zero, { size: 2.5 });
add("Sr^2+", 2, { Sr: 1 }, zero, { size: 5, tj: [5.26, 0.121] });
add("Ba^2+", 2, { Ba: 1 }, zero, { size: 5, tj: [5, 0] });
add("Al^3+", 3, { Al: 1 }, zero, { size: 9 });
add("Cl^-", -1, { Cl: 1 }, zero, { size: 3, tj: [3.5, 0.015] });
add("NO3^-", -1, { NO3: 1 }, zero, { size: 3 });
add("NO2^-", -1, { NO2: 1 }, zero, { size: 3 });
add("SO4^2-", -2, { SO4: 1 }, zero, { size: 4, tj: [5, -0.04] });
add("F^-", -1, { F: 1 }, zero, { size: 3.5 });
add("PO4^3-", -3, { PO4: 1 }, zero, { alk: 2 });
add("H4SiO4", 0, { Si: 1 }, zero);
// Acids and bases.
add("OH^-", -1, { H: -1 }, KW, { w: 1, size: 3.5, alk: 1 });
add("HCO3^-", -1, { H: 1, CO3: 1 }, minus(K2), { tj: [5.4, 0], alk: 1 });
add("CO2(aq)", 0, { H: 2, CO3: 1 }, minus(sum(K1, K2)), { w: -1 });
add("HSO4^-", -1, { H: 1, SO4: 1 }, an(-56.889, 0.006473, 2307.9, 19.8858), { alk: -1 });
add("HF", 0, { H: 1, F: 1 }, an(-2.033, 0.012645, 429.01, 0), { alk: -1 });
add("HF2^-", -1, { H: 1, F: 2 }, vh(3.76, 4.55), { size: 3.5, alk: -1 });
add("NH3", 0, { NH4: 1, H: -1 }, vh(-9.252, 12.48), { alk: 1 });
add("H3SiO4^-", -1, { Si: 1, H: -1 }, an(-302.3724, -0.050698, 15669.69, 108.18466, -1119669), { alk: 1 });
add("HPO4^2-", -2, { H: 1, PO4: 1 }, vh(12.346, -3.53), { alk: 1 });
add("H2PO4^-", -1, { H: 2, PO4: 1 }, vh(19.553, -4.52));
add("H3PO4", 0, { H: 3, PO4: 1 }, vh(21.7, -2.5), { alk: -1 });
// Hydroxo species of metals: no pairs in the sense of `complexes`. Aluminium stays out of the alkalinity.
add("CaOH^+", 1, { Ca: 1, H: -1 }, vh(-12.78, 15), { w: 1, alk: 1 });
add("MgOH^+", 1, { Mg: 1, H: -1 }, vh(-11.44, 15.952), { w: 1, alk: 1 });
add("AlOH^2+", 2, { Al: 1, H: -1 }, an(-38.253, 0, -656.27, 14.327), { w: 1, size: 4.5 });
add("Al(OH)2^+", 1, { Al: 1, H: -2 }, an(88.5, 0, -9391.6, -27.121), { w: 2 });
add("Al(OH)3(aq)", 0, { Al: 1, H: -3 }, an(226.374, 0, -18247.8, -73.597), { w: 3 });
add("Al(OH)4^-", -1, { Al: 1, H: -4 }, an(51.578, 0, -11168.9, -14.865), { w: 4 });
// Pairs.
add("CaHCO3^+", 1, { Ca: 1, H: 1, CO3: 1 }, sum(an(1209.12, 0.31294, -34765.05, -478.782), minus(K2)), { ...pair, alk: 1 });
add("CaCO3(aq)", 0, { Ca: 1, CO3: 1 }, an(-1228.732, -0.299444, 35512.75, 485.818), { ...pair, alk: 2 });
add("CaSO4(aq)", 0, { Ca: 1, SO4: 1 }, vh(2.3, 1.65), pair);
add("MgSO4(aq)", 0, { Mg: 1, SO4: 1 }, vh(2.37, 4.55), pair);
add("NaSO4^-", -1, { Na: 1, SO4: 1 }, vh(0.7, 1.12), pair);
add("KSO4^-", -1, { K: 1, SO4: 1 }, vh(0.85, 2.25), pair);
add("MgHCO3^+", 1, { Mg: 1, H: 1, CO3: 1 }, sum(an(-59.215, 0, 2537.455, 20.92298), minus(K2)), { ...pair, alk: 1 });
add("MgCO3(aq)", 0, { Mg: 1, CO3: 1 }, an(0.991, 0.00667, 0, 0), { ...pair, alk: 2 });
add("NaHCO3(aq)", 0, { Na: 1, H: 1, CO3: 1 }, sum(vh(-0.25), minus(K2)), { ...pair, alk: 1 });
add("NaCO3^-", -1, { Na: 1, CO3: 1 }, vh(1.27, 8.91), { ...pair, alk: 2 });
add("SrHCO3^+", 1, { Sr: 1, H: 1, CO3: 1 }, sum(vh(1.18, 6.05), minus(K2)), { ...pair, alk: 1 });
add("SrCO3(aq)", 0, { Sr: 1, CO3: 1 }, vh(2.81, 5.22), { ...pair, alk: 2 });
add("CaF^+", 1, { Ca: 1, F: 1 }, vh(0.94, 4.12), pair);
add("MgF^+", 1, { Mg: 1, F: 1 }, vh(1.82, 3.2), pair);
add("NaF(aq)", 0, { Na: 1, F: 1 }, vh(-0.24), pair);
add("AlF^2+", 2, { Al: 1, F: 1 }, vh(7, 1.06), { ...pair, size: 4.5 });
add("AlF2^+", 1, { Al: 1, F: 2 }, vh(12.7, 1.98), pair);
add("AlF3(aq)", 0, { Al: 1, F: 3 }, vh(16.8, 2.16), pair);
add("AlF4^-", -1, { Al: 1, F: 4 }, vh(19.4, 2.2), pair);
add("AlSO4^+", 1, { Al: 1, SO4: 1 }, vh(3.5, 2.29), pair);
add("Al(SO4)2^-", -1, { Al: 1, SO4: 2 }, vh(5, 3.11), pair);
export const PLAIN_SPECIES: readonly PlainSpecies[] = PLAIN;

/** Charge of each master, for the solids' and strong ions' sums. */
export const STRONG: Partial<Record<Master, number>> = { Na: 1, K: 1, NH4: 1, Ca: 2, Mg: 2, Sr: 2, Ba: 2, Cl: -1, NO3: -1, NO2: -1, SO4: -2, F: -1 };

/** ln-activity product of a solid: Π a(master)^n · aw^w = K. */
export interface PlainSolid { name: string; parts: Partial<Record<Master, number>>; water: number; logK: LogK }
export const PLAIN_SOLIDS: readonly PlainSolid[] = [
  { name: "calcite", parts: { Ca: 1, CO3: 1 }, water: 0, logK: an(-171.9065, -0.077993, 2839.319, 71.595) },
  { name: "aragonite", parts: { Ca: 1, CO3: 1 }, water: 0, logK: an(-171.9773, -0.077993, 2903.293, 71.595) },
  { name: "vaterite", parts: { Ca: 1, CO3: 1 }, water: 0, logK: an(-172.1295, -0.077993, 3074.688, 71.595) },
  { name: "gypsum", parts: { Ca: 1, SO4: 1 }, water: 2, logK: an(68.2401, 0, -3221.51, -25.0627) },
  { name: "anhydrite", parts: { Ca: 1, SO4: 1 }, water: 0, logK: an(197.52, 0, -8669.8, -69.835) },
  { name: "dolomite", parts: { Ca: 1, Mg: 1, CO3: 2 }, water: 0, logK: vh(-17.09, -9.436) },
  { name: "fluorite", parts: { Ca: 1, F: 2 }, water: 0, logK: an(66.348, 0, -4298.2, -25.271) },
  { name: "gibbsite", parts: { Al: 1, H: -3 }, water: 3, logK: vh(8.11, -22.8) },
  { name: "Al(OH)3 (microcrystalline)", parts: { Al: 1, H: -3 }, water: 3, logK: vh(9.35, -24.5) },
  { name: "Al(OH)3 (amorphous)", parts: { Al: 1, H: -3 }, water: 3, logK: vh(10.8, -26.5) },
  { name: "amorphous silica", parts: { Si: 1 }, water: -2, logK: vh(-2.71, 3.34) },
  { name: "quartz", parts: { Si: 1 }, water: -2, logK: vh(-3.98, 5.99) },
  { name: "strontianite", parts: { Sr: 1, CO3: 1 }, water: 0, logK: vh(-9.271, -0.4) },
  { name: "celestite", parts: { Sr: 1, SO4: 1 }, water: 0, logK: vh(-6.63, -1.04) },
  { name: "barite", parts: { Ba: 1, SO4: 1 }, water: 0, logK: vh(-9.97, 6.35) },
];

/** Debye–Hückel A and B (per Å) at t °C: Malmberg & Maryott 1956 for ε, Kell 1975 for ρ. */
export function debyeHuckel(t: number): { A: number; B: number } {
  const epsilon = 87.74 - 0.40008 * t + 9.398e-4 * t ** 2 - 1.41e-6 * t ** 3;
  const rho = (999.83952 + 16.945176 * t - 7.9870401e-3 * t ** 2 - 46.170461e-6 * t ** 3 + 105.56302e-9 * t ** 4 - 280.54253e-12 * t ** 5)
    / (1 + 16.87985e-3 * t) / 1000;
  const k = t + 273.15;
  return { A: 1.82483e6 * Math.sqrt(rho) * (epsilon * k) ** -1.5, B: 50.2916 * Math.sqrt(rho / (epsilon * k)) };
}
