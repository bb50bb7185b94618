/** From the numbers of a row to the facts that settle it, with every reason why they may not. */
import type { ChemistryModel } from "@/lib/chemistry/chemistry-model";
import { type RowInput, totalAnalytes } from "@/lib/chemistry/row-inputs";
import { pressureOfFraction } from "@/lib/chemistry/temperature";
import type { CarbonFact, ProtonFact, ResolvedCase } from "@/lib/chemistry/types";
import { CLOSURE, type Closure } from "@/lib/kernel/kernel";
import { compensatedDot } from "@/lib/kernel/linear";

/** Ions without which an electroneutral water is refused, unless missing ones are said to be zero. */
const NEEDED_FOR_CHARGE = ["Ca", "Mg", "Na", "Cl", "SO4"] as const;

export interface CaseTraits {
  closure: Closure;
  /** Weights q with hydrogen total = −ANC + Σ q·T, and = Σ q'·T for electroneutrality. */
  ancWeights: Float64Array;
  chargeWeights: Float64Array;
  needed: { key: string; component: number }[];
  saturatedSolid: number;
  aluminium: number;
}

export function caseTraits(model: ChemistryModel, kase: ResolvedCase): CaseTraits {
  const n = model.components.length;
  const analytes = totalAnalytes(model);
  const z = model.tableau.componentCharge;
  const chargeWeights = new Float64Array(n);
  const ancWeights = new Float64Array(n);
  for (const { component, strongCharge } of analytes) {
    chargeWeights[component] = -z[component];
    ancWeights[component] = strongCharge - z[component];
  }
  const { saturated } = kase.close;
  return {
    closure: closureOf(kase), ancWeights, chargeWeights,
    needed: NEEDED_FOR_CHARGE.map((key) => ({ key, component: analytes.find((a) => a.key === key)?.component ?? -1 })),
    saturatedSolid: saturated ? model.solids.indexOf(saturated.solid) : -1,
    aluminium: model.components.indexOf("Al^3+"),
  };
}

function closureOf(kase: ResolvedCase): Closure {
  const facts = usedFacts(kase);
  const hasBalance = facts.charge || facts.ANC || facts.alkalinity;
  if (facts.pH) {
    if (facts.pCO2) return CLOSURE.pHGas;
    if (facts.DIC) return CLOSURE.pHTotal;
    if (facts.saturated) return CLOSURE.pHSaturated;
    if (hasBalance) return CLOSURE.pHBalance;
  } else if (hasBalance) {
    if (facts.pCO2) return CLOSURE.balanceGas;
    if (facts.DIC) return CLOSURE.balanceTotal;
    if (facts.saturated) return CLOSURE.balanceSaturated;
  } else if (facts.pCO2 && facts.DIC) return CLOSURE.gasTotal;
  throw new Error(`case ${kase.name}: close ${kase.close.facts.join(" with ")} does not settle a water`);
}

const FIELD_NAMES: Record<"pH" | "alkalinity" | "ANC" | "DIC", string> = {
  pH: "pH", alkalinity: "alkalinity", ANC: "ANC", DIC: "total inorganic carbon (DIC)",
};

/** What is wrong with the numbers of a row before any chemistry, or "" where nothing is. */
export function inputFault(input: RowInput, traits: CaseTraits, facts: UsedFacts, missing: "refuse" | "zero"): string {
  if (Number.isNaN(input.temperature)) return "no temperature: neither the row, the case nor an axis gives one; add temperature (°C)";
  const t = rangeFault("temperature", input.temperature, 0, 90, "°C")
    || (facts.pH && !Number.isNaN(input.pHTemperature) ? rangeFault("pHTemperature", input.pHTemperature, 0, 90, "°C") : "");
  if (t) return t;
  for (const key of ["pH", "alkalinity", "ANC", "DIC"] as const) {
    if (facts[key] && Number.isNaN(input[key])) return `no ${FIELD_NAMES[key]}: the case closes on it, but neither the row, the case nor an axis gives it`;
  }
  if (facts.pCO2 && Number.isNaN(input.pCO2)) return "no pCO2: the case needs it, but neither the row, the case nor an axis gives it";
  if (facts.pH) { const fault = rangeFault("pH", input.pH, -2, 16, ""); if (fault) return fault; }
  if (facts.DIC && input.DIC < 0) return `DIC ${input.DIC} mol/kg is negative; amounts are 0 or more`;
  if (input.DOC < 0) return `DOC ${input.DOC} mg/L is negative; amounts are 0 or more`;
  for (let j = 0; j < input.totals.length; j++) {
    if (!(input.totals[j] >= 0) || input.totals[j] === Infinity) return "a total is negative or not a number; amounts are 0 or more";
  }
  if (facts.charge && missing === "refuse") {
    const absent = traits.needed.filter((a) => a.component < 0 || !input.isGiven[a.component]).map((a) => a.key);
    if (absent.length > 0) {
      return `missing for electroneutrality: ${absent.join(", ")}; give ${absent.length > 1 ? "them" : "it"}, close on another fact, or set missing to "zero"`;
    }
  }
  return "";
}

function rangeFault(name: string, value: number, low: number, high: number, unit: string): string {
  return value >= low && value <= high ? "" : `${name} ${value}${unit ? ` ${unit}` : ""} is outside ${low} to ${high}${unit ? ` ${unit}` : ""}`;
}

export type UsedFacts = Record<ProtonFact | CarbonFact, boolean>;

export function usedFacts(kase: ResolvedCase): UsedFacts {
  const has = (fact: ProtonFact | CarbonFact) => kase.close.facts.includes(fact);
  return {
    charge: has("charge"), ANC: has("ANC"), alkalinity: has("alkalinity"), pH: has("pH"),
    pCO2: has("pCO2"), DIC: has("DIC"), saturated: has("saturated"),
  };
}

/** The hydrogen total that the proton fact fixes, mol/kg (minus the alkalinity for that fact), or 0 where pH is the only one. */
export function hydrogenTotal(input: RowInput, traits: CaseTraits, facts: UsedFacts): number {
  const n = input.totals.length;
  if (facts.charge) return compensatedDot(traits.chargeWeights, input.totals, n);
  if (facts.ANC) return compensatedDot(traits.ancWeights, input.totals, n) - input.ANC;
  if (facts.alkalinity) return -input.alkalinity;
  return 0;
}

/** atm, at a temperature. */
export function pressureOf(value: number, isFraction: boolean, celsius: number, input: RowInput): number {
  if (!isFraction) return value;
  return pressureOfFraction(value, celsius, Number.isNaN(input.altitude) ? null : input.altitude, Number.isNaN(input.pressureAtm) ? null : input.pressureAtm);
}
