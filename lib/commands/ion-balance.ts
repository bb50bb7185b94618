/**
 * Is the analysis consistent with itself? The ion balance of a settled water and what to make of it.
 * Acceptance: Standard Methods for the Examination of Water and Wastewater, method 1030 E (from memory): anion sum
 * 0–3 meq/L ±0.2 meq/L; 3–10 ±2 %; 10–800 ±5 %. The percentage is of the sum of cations and anions, not of its half.
 */
export interface IonBalance {
  /** 100·(Σcations − Σanions)/(Σcations + Σanions) */
  percent: number;
  /** meq/L */
  cations: number;
  anions: number;
  verdict: "within" | "outside" | "closed" | "incomplete";
  words: string;
}

const MAJORS = ["Ca", "Mg", "Na", "Cl", "SO4"] as const;

/** Charge of a species from its name: "Ca^2+" is +2, "HCO3^-" is −1, names without a caret are neutral. */
export function chargeOf(name: string): number {
  const match = /\^(\d*)([+-])$/.exec(name);
  return match ? (match[2] === "+" ? 1 : -1) * Number(match[1] || 1) : 0;
}

/**
 * From one answered row with its `conc:` columns (mol/kg), the row of the water as sent and the facts that closed it.
 * Without the concentrations, or where the organics' charge leaves no column, the row's own balanceError is used.
 */
export function judgeIonBalance(answered: Record<string, unknown>, water: Record<string, unknown>, closesOnCharge: boolean): IonBalance | null {
  let cations = 0;
  let anions = 0;
  for (const [name, value] of Object.entries(answered)) {
    if (!name.startsWith("conc:") || typeof value !== "number") continue;
    const equivalents = value * chargeOf(name.slice(5)) * 1000;
    if (equivalents > 0) cations += equivalents;
    else anions -= equivalents;
  }
  const percent = typeof answered.balanceError === "number" ? answered.balanceError : cations + anions > 0 ? (100 * (cations - anions)) / (cations + anions) : null;
  if (percent === null) return null;
  const base = { percent, cations, anions };
  if (closesOnCharge) return { ...base, verdict: "closed", words: "closed on charge: the ions themselves settle the water, so this says nothing about the analysis" };
  const missing = MAJORS.filter((key) => water[key] === undefined);
  if (missing.length > 0) return { ...base, verdict: "incomplete", words: `no verdict: ${listed(missing)} not given` };
  const difference = Math.abs(cations - anions);
  const limit = anions <= 3 ? 0.2 : ((anions <= 10 ? 2 : 5) / 100) * (cations + anions);
  const rule = anions <= 3 ? "±0.2 meq/L up to 3 meq/L of anions" : anions <= 10 ? "±2 % for 3–10 meq/L of anions" : "±5 % above 10 meq/L of anions";
  const isWithin = difference <= limit;
  return { ...base, verdict: isWithin ? "within" : "outside", words: `${isWithin ? "acceptable" : "not acceptable"} (${rule})` };
}

const listed = (names: readonly string[]): string =>
  names.length < 2 ? names.join("") : `${names.slice(0, -1).join(", ")} and ${names[names.length - 1]}`;
