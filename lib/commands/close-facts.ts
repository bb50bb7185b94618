/** Choosing the two facts that settle a water when one of them is varied or newly given (job-spec.md section 1). */
import type { JobSpec } from "@/lib/schemas/job-spec";

export type Fact = string | { saturated: string; SI?: number };
export type Close = readonly Fact[];
type Case = JobSpec["cases"][number];

const PROTON = new Set<Fact>(["charge", "ANC", "alkalinity", "pH"]);
const CARBON = new Set<Fact>(["pCO2", "DIC"]);
const isCarbon = (fact: Fact): boolean => typeof fact === "object" || CARBON.has(fact);

/**
 * Makes `fact` one of the two facts. It takes the place of the fact of its own kind; from a pair of two proton facts
 * (pH with alkalinity, say) the new proton fact replaces the other one beside pH, and a new carbon fact replaces pH,
 * because alkalinity and charge are what stays when CO2 comes or goes.
 */
export function closeOver(each: Case, fact: "pH" | "ANC" | "alkalinity" | "DIC" | "pCO2"): void {
  const close = [...((each.close as Close | undefined) ?? [])];
  if (close.includes(fact)) return;
  const isProton = PROTON.has(fact);
  const protons = close.filter((one) => PROTON.has(one));
  const carbons = close.filter(isCarbon);
  let next: Fact[];
  if (isProton && carbons.length === 1 && protons.length === 1) next = [fact, carbons[0]];
  else if (isProton && protons.length === 2) next = fact === "pH" ? ["pH", protons[0]] : ["pH", fact];
  else if (isProton) next = [fact, carbons[0] ?? "pCO2"];
  else if (protons.length === 2) next = [protons.find((one) => one !== "pH") ?? "pH", fact];
  else next = [protons[0] ?? "charge", fact];
  each.close = next as unknown as Case["close"];
}
