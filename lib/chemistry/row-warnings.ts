/**
 * What a reader must know beside an answer that is exact but may not mean what it seems to. Each warning starts with a code that stays
 * the same; no figures of the row stand in it, so that a million rows share a handful of texts and a summary can count them.
 */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import type { ActivityModel, ResolvedWater } from "@/lib/chemistry/types";
import { CARBON, CLOSURE, HYDROGEN } from "@/lib/kernel/kernel";

/** Ionic strength up to which each model is used, mol/kg (chemistry.md section 2; Güntelberg as extended Debye–Hückel: common practice). */
const MODEL_RANGE: Record<ActivityModel, number> = {
  ideal: Infinity, guntelberg: 0.1, davies: 0.5, "debye-huckel": 0.1, "truesdell-jones": 1,
};
/** °C from which a constant known at 25 °C with its reaction enthalpy only is an extrapolation worth a word. */
const ENTHALPY_REACH = 50;
/** Sum of solutes, mol/kg, from which 1 L of water holds about 1 % less or more than 1 kg of H2O (0.5 mol/kg NaCl: 1.01 L). */
const DILUTE = 1;
/** mg C/L above which dissolved aluminium is largely bound to organic matter. */
const BROWN_WATER = 5;
/** Below this pH, and below this share of carbon in the balance, alkalinity or ions say little about the carbon. */
const LEAST_PH = 5;
const LEAST_SHARE = 0.05;

/** Appends to `solver.warnings` from the row solved last. */
export function rowWarnings(solver: CaseSolver, water: ResolvedWater): void {
  const { warnings, input, kase, kernel, traits, model } = solver;
  for (const warning of water.warnings) warnings.push(warning);
  const range = MODEL_RANGE[kase.activity];
  if (kernel.ws.ionicStrength > range) warnings.push(`activity-range: ionic strength is beyond the range of the ${kase.activity} model (${range} mol/kg)`);
  if (kernel.ws.sumM > DILUTE) warnings.push(`non-dilute: above ${DILUTE} mol/kg of solutes 1 L of water no longer holds 1 kg of H2O; amounts given per litre are off by 1 % or more`);
  if (input.temperature > ENTHALPY_REACH && isExtrapolated(solver)) {
    warnings.push(`temperature-range: above ${ENTHALPY_REACH} °C some constants are extrapolated from 25 °C with a fixed reaction enthalpy`);
  }
  const hasAluminium = traits.aluminium >= 0 && input.totals[traits.aluminium] > 0;
  if (hasAluminium && input.DOC > BROWN_WATER && !water.aluminiumFractionGiven) {
    warnings.push("aluminium-fraction: Al is taken as inorganic monomeric; in brown water (DOC above 5 mg/L) a total overstates its charge: give the fraction");
  }
  if (model.organicComponent >= 0 && Number.isNaN(input.DOC)) warnings.push("no-DOC: no DOC given: organic acids are left out");
}

export const DEPENDENT_SOLIDS = "dependent-solids: solids at equilibrium depend on each other in composition; the amounts given are the smallest that keep the balances";

export function severalStates(facts: readonly string[]): string {
  return `several-states: more than one state satisfies ${facts.join(" and ")}; the one of lowest pH is given`;
}

/** Whether a species present, or the solid of the case, has a constant known by its enthalpy only. */
function isExtrapolated(solver: CaseSolver): boolean {
  const { model, kernel } = solver;
  for (let i = 0; i < model.data.length; i++) {
    const logK = model.data[i]?.logK;
    if (logK?.form === "vantHoff" && kernel.ws.c[i] > 0 && Number.isNaN(solver.input.overrides[model.reactionIndex.get(model.species[i]) ?? -1] ?? NaN)) return true;
  }
  return false;
}

/** A warning where the two facts leave the answer loosely tied, from the settled state; "" where they do not. */
export function conditioningWarning(solver: CaseSolver): string {
  const { kernel, traits, facts, model } = solver;
  const { ws, tableau } = kernel;
  const n = tableau.componentCount;
  if (traits.closure === CLOSURE.pHBalance) {
    const fact = facts.alkalinity ? "alkalinity" : facts.ANC ? "ANC" : "charge";
    if (-ws.x[HYDROGEN] / Math.LN10 < LEAST_PH) return `ill-conditioned: below pH 5, pH with ${fact} says little about the carbon; DIC and pCO2 are uncertain`;
    let all = 0;
    let carbon = 0;
    for (let i = 0; i < tableau.speciesCount; i++) {
      const part = Math.abs(facts.alkalinity ? tableau.alkalinity[i] : tableau.nu[i * n]) * ws.c[i];
      all += part;
      if (tableau.nu[i * n + CARBON] !== 0) carbon += part;
    }
    if (carbon < LEAST_SHARE * all) return `ill-conditioned: carbon carries less than 5 % of the ${fact}; DIC and pCO2 are uncertain`;
  }
  if (traits.closure === CLOSURE.gasTotal) {
    const total = ws.totals[CARBON];
    const ionised = total - ws.c[model.species.indexOf("CO2(aq)")];
    if (ionised < LEAST_SHARE * total) return "ill-conditioned: nearly all of the DIC is CO2(aq), so that DIC with pCO2 says little about the pH";
  }
  return "";
}
