/** Solids: dissolution as printed and log K over temperature. Reference conditions: 25 °C, 1 atm, infinite dilution. */
import { compositionOf, readReaction } from "./formula";
import { analytic, type PrintedLogK, vantHoff } from "./log-k";
import type { Solid } from "./types";

/** @param products what one formula unit gives; "+ …" on the left of "=" is what it takes. */
function solid(name: string, formula: string, products: string, logK: PrintedLogK, conservedWithout: string[] = []): Solid {
  const composition = compositionOf(formula);
  if (!composition) throw new Error(`constants set: ${formula} is no formula`);
  const reaction = products.includes(" = ") ? readReaction(products) : readReaction(`nothing = ${products}`);
  delete reaction.nothing;
  return { name, formula, composition, reaction, logK, conservedWithout };
}

const PB = { source: "plummer-busenberg-1982", fromMemory: false } as const;
const N90 = { source: "nordstrom-1990", fromMemory: true } as const;
const ROUGH = { ...N90, note: "reaction enthalpy uncertain" } as const;

export const SOLIDS: readonly Solid[] = [
  solid("calcite", "CaCO3", "Ca^2+ + CO3^2-", analytic(-8.48, [-171.9065, -0.077993, 2839.319, 71.595, 0], PB), ["Ca"]),
  solid("aragonite", "CaCO3", "Ca^2+ + CO3^2-", analytic(-8.336, [-171.9773, -0.077993, 2903.293, 71.595, 0], PB), ["Ca"]),
  solid("vaterite", "CaCO3", "Ca^2+ + CO3^2-", analytic(-7.913, [-172.1295, -0.077993, 3074.688, 71.595, 0], PB), ["Ca"]),
  solid("gypsum", "CaSO4·2H2O", "Ca^2+ + SO4^2- + 2 H2O", analytic(-4.58, [68.2401, 0, -3221.51, -25.0627, 0], N90)),
  solid("anhydrite", "CaSO4", "Ca^2+ + SO4^2-", analytic(-4.36, [197.52, 0, -8669.8, -69.835, 0], N90)),
  solid("dolomite", "CaMg(CO3)2", "Ca^2+ + Mg^2+ + 2 CO3^2-", vantHoff(-17.09, -9.436, { ...N90, note: "ordered dolomite" }), ["Ca", "Mg"]),
  solid("fluorite", "CaF2", "Ca^2+ + 2 F^-", analytic(-10.6, [66.348, 0, -4298.2, -25.271, 0], N90)),
  solid("gibbsite", "Al(OH)3", "3 H^+ = Al^3+ + 3 H2O", vantHoff(8.11, -22.8, { ...N90, note: "crystalline" })),
  solid("Al(OH)3 (microcrystalline)", "Al(OH)3", "3 H^+ = Al^3+ + 3 H2O", vantHoff(9.35, -24.5, ROUGH)),
  solid("Al(OH)3 (amorphous)", "Al(OH)3", "3 H^+ = Al^3+ + 3 H2O", vantHoff(10.8, -26.5, N90)),
  solid("amorphous silica", "SiO2", "2 H2O = H4SiO4", vantHoff(-2.71, 3.34, N90)),
  solid("quartz", "SiO2", "2 H2O = H4SiO4", vantHoff(-3.98, 5.99, N90)),
  solid("strontianite", "SrCO3", "Sr^2+ + CO3^2-", vantHoff(-9.271, -0.4, { ...N90, note: "a published analytic form exists" }), ["Sr"]),
  solid("celestite", "SrSO4", "Sr^2+ + SO4^2-", vantHoff(-6.63, -1.04, N90)),
  solid("barite", "BaSO4", "Ba^2+ + SO4^2-", vantHoff(-9.97, 6.35, N90)),
];
