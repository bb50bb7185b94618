/**
 * Organic acids as components and species of a tableau. All three published fits are conditional: constants in concentrations, with
 * [H+] = 10^−pH/γ(H+), so that c(H(n−j)A) = K1…Kj·c(HnA)·(γ_H/a_H)^j (chemistry.md sections 5 and 8). The undissociated acid is the component,
 * so its dissociation is part of the hydrogen balance as −j per mole.
 */
import type { ResolvedCase } from "@/lib/chemistry/types";

export interface OrganicSpecies { name: string; charge: number; lnK: number; varies: boolean }

/** Oliver, Thurman & Malcolm 1983, Geochim. Cosmochim. Acta 47:2031: pK = 0.96 + 0.90·pH − 0.039·pH². */
export const OLIVER_FIT: [number, number, number] = [0.96, 0.9, -0.039];

/** Protons that one molecule of the model's acid can give; 0 without a model. */
export function acidicProtons(organic: ResolvedCase["organic"]): number {
  if (organic.model === "none") return 0;
  return organic.model === "oliver-1983" ? 1 : organic.pKa.length;
}

/** Species in order: the undissociated acid, then each anion. Named Org for the rest of the molecule. */
export function organicSpecies(organic: ResolvedCase["organic"]): OrganicSpecies[] {
  const n = acidicProtons(organic);
  if (n === 0) return [];
  const list: OrganicSpecies[] = [];
  let lnK = 0;
  for (let j = 0; j <= n; j++) {
    if (j > 0 && organic.model !== "oliver-1983") lnK -= organic.pKa[j - 1] * Math.LN10;
    list.push({ name: organicName(n - j, j), charge: -j, lnK, varies: organic.model === "oliver-1983" && j === 1 });
  }
  return list;
}

/** "H3Org", "H2Org^-", "HOrg^2-", "Org^3-". */
export function organicName(protons: number, charge: number): string {
  const acid = protons === 0 ? "Org" : protons === 1 ? "HOrg" : `H${protons}Org`;
  if (charge === 0) return acid;
  return charge === 1 ? `${acid}^-` : `${acid}^${charge}-`;
}
