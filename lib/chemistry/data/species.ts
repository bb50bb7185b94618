/**
 * Aqueous species and CO2(g): reactions as printed, log K over temperature, ion sizes, conductances. Reference conditions: 25 °C, 1 atm,
 * infinite dilution. Ion sizes: Kielland 1937, 4 Å for singly charged pairs he does not list (chemistry of the constants set, section 8).
 */
import { chargeOf, compositionOf, readReaction } from "./formula";
import { analytic, type PrintedLogK, vantHoff } from "./log-k";
import type { Species } from "./types";

/** Kielland 1937, Å. */
const ION_SIZES: Record<string, number> = {
  "H^+": 9, "OH^-": 3.5, "F^-": 3.5, "HF2^-": 3.5, "HCO3^-": 4, "Na^+": 4, "SO4^2-": 4, "PO4^3-": 4, "HPO4^2-": 4, "H2PO4^-": 4,
  "HSO4^-": 4, "H3SiO4^-": 4, "CO3^2-": 4.5, "AlOH^2+": 4.5, "AlF^2+": 4.5, "Ca^2+": 6, "Mg^2+": 8, "K^+": 3, "Cl^-": 3, "NO3^-": 3,
  "NO2^-": 3, "NH4^+": 2.5, "Sr^2+": 5, "Ba^2+": 5, "Al^3+": 9,
};
const PAIR_SIZE = 4;

/** Truesdell & Jones 1974 (from memory): å in Å, b in kg/mol. */
const FITTED: Record<string, { a: number; b: number }> = {
  "Ca^2+": { a: 5, b: 0.165 }, "Mg^2+": { a: 5.5, b: 0.2 }, "Na^+": { a: 4, b: 0.075 }, "K^+": { a: 3.5, b: 0.015 },
  "Cl^-": { a: 3.5, b: 0.015 }, "SO4^2-": { a: 5, b: -0.04 }, "HCO3^-": { a: 5.4, b: 0 }, "CO3^2-": { a: 5.4, b: 0 },
  "Sr^2+": { a: 5.26, b: 0.121 }, "Ba^2+": { a: 5, b: 0 },
};

/** Limiting equivalent conductance at 25 °C, S·cm²/eq (Robinson & Stokes 1959, handbooks; from memory, ±1 %). */
const CONDUCTANCES: Record<string, number> = {
  "H^+": 349.7, "Na^+": 50.1, "K^+": 73.5, "NH4^+": 73.5, "Ca^2+": 59.5, "Mg^2+": 53.1, "Sr^2+": 59.5, "OH^-": 198, "HCO3^-": 44.5,
  "CO3^2-": 69.3, "Cl^-": 76.3, "NO3^-": 71.4, "SO4^2-": 80, "F^-": 55.4,
};

const METALS = ["Na", "K", "Ca", "Mg", "Sr", "Ba", "Al"];

function species(name: string, reaction: string | null, logK: PrintedLogK | null): Species {
  const composition = compositionOf(name);
  if (!composition) throw new Error(`constants set: ${name} is no formula`);
  const charge = chargeOf(name);
  const hasMetal = METALS.some((metal) => composition[metal]);
  // A metal bound to nothing but water's own atoms is free or a hydroxo species; anything more is a pair.
  const hasLigand = Object.keys(composition).some((element) => !METALS.includes(element) && element !== "H" && element !== "O");
  return {
    name, charge, composition, reaction: reaction === null ? null : readReaction(reaction), logK,
    ionSize: charge === 0 ? null : ION_SIZES[name] ?? PAIR_SIZE,
    truesdellJones: FITTED[name] ?? null, isComplex: hasMetal && hasLigand, conductance: CONDUCTANCES[name] ?? null,
  };
}

const component = (name: string): Species => species(name, null, null);
const PB = { source: "plummer-busenberg-1982", fromMemory: false } as const;
const MF = { source: "marshall-franck-1981", fromMemory: false } as const;
const N90 = { source: "nordstrom-1990", fromMemory: true } as const;
const ROUGH = { ...N90, note: "reaction enthalpy uncertain" } as const;
const SM = { source: "stumm-morgan-1996", fromMemory: true, note: "reaction enthalpy uncertain" } as const;

export const SPECIES: readonly Species[] = [
  ...["H^+", "CO2(aq)", "Na^+", "K^+", "NH4^+", "Ca^2+", "Mg^2+", "Sr^2+", "Ba^2+", "Al^3+", "Cl^-", "NO3^-", "NO2^-", "SO4^2-", "F^-", "H2PO4^-", "H4SiO4"].map(component),

  species("OH^-", "H2O = H^+ + OH^-", analytic(-14, [-283.971, -0.05069842, 13323, 102.24447, -1119669], MF)),
  species("CO2(g)", "CO2(g) = CO2(aq)", analytic(-1.468, [108.3865, 0.01985076, -6919.53, -40.45154, 669365], PB)),
  species("HCO3^-", "CO2(aq) + H2O = H^+ + HCO3^-", analytic(-6.352, [-356.3094, -0.06091964, 21834.37, 126.8339, -1684915], PB)),
  species("CO3^2-", "HCO3^- = H^+ + CO3^2-", analytic(-10.329, [-107.8871, -0.03252849, 5151.79, 38.92561, -563713.9], PB)),
  species("CaHCO3^+", "Ca^2+ + HCO3^- = CaHCO3^+", analytic(1.106, [1209.12, 0.31294, -34765.05, -478.782, 0], PB)),
  species("CaCO3(aq)", "Ca^2+ + CO3^2- = CaCO3(aq)", analytic(3.224, [-1228.732, -0.299444, 35512.75, 485.818, 0], PB)),

  species("HSO4^-", "H^+ + SO4^2- = HSO4^-", analytic(1.988, [-56.889, 0.006473, 2307.9, 19.8858, 0], N90)),
  species("CaSO4(aq)", "Ca^2+ + SO4^2- = CaSO4(aq)", vantHoff(2.3, 1.65, N90)),
  species("MgSO4(aq)", "Mg^2+ + SO4^2- = MgSO4(aq)", vantHoff(2.37, 4.55, N90)),
  species("NaSO4^-", "Na^+ + SO4^2- = NaSO4^-", vantHoff(0.7, 1.12, N90)),
  species("KSO4^-", "K^+ + SO4^2- = KSO4^-", vantHoff(0.85, 2.25, N90)),
  species("MgHCO3^+", "Mg^2+ + HCO3^- = MgHCO3^+", analytic(1.07, [-59.215, 0, 2537.455, 20.92298, 0], N90)),
  species("MgCO3(aq)", "Mg^2+ + CO3^2- = MgCO3(aq)", analytic(2.98, [0.991, 0.00667, 0, 0, 0], N90)),
  species("NaHCO3(aq)", "Na^+ + HCO3^- = NaHCO3(aq)", vantHoff(-0.25, 0, N90)),
  species("NaCO3^-", "Na^+ + CO3^2- = NaCO3^-", vantHoff(1.27, 8.91, N90)),
  species("SrHCO3^+", "Sr^2+ + HCO3^- = SrHCO3^+", vantHoff(1.18, 6.05, N90)),
  species("SrCO3(aq)", "Sr^2+ + CO3^2- = SrCO3(aq)", vantHoff(2.81, 5.22, N90)),
  species("CaOH^+", "Ca^2+ + H2O = CaOH^+ + H^+", vantHoff(-12.78, 15, ROUGH)),
  species("MgOH^+", "Mg^2+ + H2O = MgOH^+ + H^+", vantHoff(-11.44, 15.952, N90)),
  species("HF", "H^+ + F^- = HF", analytic(3.18, [-2.033, 0.012645, 429.01, 0, 0], N90)),
  species("HF2^-", "H^+ + 2 F^- = HF2^-", vantHoff(3.76, 4.55, N90)),
  species("CaF^+", "Ca^2+ + F^- = CaF^+", vantHoff(0.94, 4.12, N90)),
  species("MgF^+", "Mg^2+ + F^- = MgF^+", vantHoff(1.82, 3.2, N90)),
  species("NaF(aq)", "Na^+ + F^- = NaF(aq)", vantHoff(-0.24, 0, N90)),
  species("NH3", "NH4^+ = NH3 + H^+", vantHoff(-9.252, 12.48, N90)),

  species("AlOH^2+", "Al^3+ + H2O = AlOH^2+ + H^+", analytic(-5, [-38.253, 0, -656.27, 14.327, 0], N90)),
  species("Al(OH)2^+", "Al^3+ + 2 H2O = Al(OH)2^+ + 2 H^+", analytic(-10.1, [88.5, 0, -9391.6, -27.121, 0], N90)),
  species("Al(OH)3(aq)", "Al^3+ + 3 H2O = Al(OH)3(aq) + 3 H^+", analytic(-16.9, [226.374, 0, -18247.8, -73.597, 0], N90)),
  species("Al(OH)4^-", "Al^3+ + 4 H2O = Al(OH)4^- + 4 H^+", analytic(-22.7, [51.578, 0, -11168.9, -14.865, 0], N90)),
  species("AlF^2+", "Al^3+ + F^- = AlF^2+", vantHoff(7, 1.06, N90)),
  species("AlF2^+", "Al^3+ + 2 F^- = AlF2^+", vantHoff(12.7, 1.98, N90)),
  species("AlF3(aq)", "Al^3+ + 3 F^- = AlF3(aq)", vantHoff(16.8, 2.16, N90)),
  species("AlF4^-", "Al^3+ + 4 F^- = AlF4^-", vantHoff(19.4, 2.2, N90)),
  species("AlSO4^+", "Al^3+ + SO4^2- = AlSO4^+", vantHoff(3.5, 2.29, N90)),
  species("Al(SO4)2^-", "Al^3+ + 2 SO4^2- = Al(SO4)2^-", vantHoff(5, 3.11, N90)),

  species("H3SiO4^-", "H4SiO4 = H3SiO4^- + H^+", analytic(-9.83, [-302.3724, -0.050698, 15669.69, 108.18466, -1119669], N90)),
  // H2PO4^- is the component, so its printed reaction stands with the species it is solved for.
  species("PO4^3-", "PO4^3- + 2 H^+ = H2PO4^-", vantHoff(19.553, -4.52, N90)),
  species("HPO4^2-", "PO4^3- + H^+ = HPO4^2-", vantHoff(12.346, -3.53, N90)),
  species("H3PO4", "PO4^3- + 3 H^+ = H3PO4", vantHoff(21.7, -2.5, SM)),
];
