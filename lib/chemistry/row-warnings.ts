/** What a reader must know beside an answer that is exact but may not mean what it seems to. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import type { ActivityModel, ResolvedWater } from "@/lib/chemistry/types";
import { CARBON, CLOSURE, HYDROGEN } from "@/lib/kernel/kernel";

/** Ionic strength up to which each model is used, mol/kg (chemistry.md section 2; Güntelberg as extended Debye–Hückel: common practice). */
const MODEL_RANGE: Record<ActivityModel, number> = {
  ideal: Infinity, guntelberg: 0.1, davies: 0.5, "debye-huckel": 0.1, "truesdell-jones": 1,
};
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
  // No figures of the row in a warning: a million rows then share a handful of texts, and a summary can count them.
  if (kernel.ws.ionicStrength > range) warnings.push(`ionic strength is beyond the range of the ${kase.activity} model (${range} mol/kg)`);
  const hasAluminium = traits.aluminium >= 0 && input.totals[traits.aluminium] > 0;
  if (hasAluminium && input.DOC > BROWN_WATER && !water.aluminiumFractionGiven) {
    warnings.push("Al is taken as inorganic monomeric; in brown water (DOC above 5 mg/L) a total overstates its charge: give the fraction");
  }
  if (model.organicComponent >= 0 && Number.isNaN(input.DOC)) warnings.push("no DOC given: organic acids are left out");
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
