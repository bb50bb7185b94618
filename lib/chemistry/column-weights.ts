/** What some result columns sum over: shared by their values and their derivatives. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import type { ChemistryModel } from "@/lib/chemistry/chemistry-model";
import { totalAnalytes } from "@/lib/chemistry/row-inputs";

/** Metals of the carbonate solids in excess, each once. */
export function unconservedMetals({ kase, model }: Pick<CaseSolver, "kase" | "model">): { component: number; strongCharge: number }[] {
  const excess = (kase.react?.solids ?? []).filter((s) => s.supply === "excess").map((s) => s.name);
  const keys = new Set(model.set.solids.filter((s) => excess.includes(s.name)).flatMap((s) => s.conservedWithout));
  return totalAnalytes(model).filter((a) => keys.has(a.key));
}

/** Free ions with a listed conductance: µS/cm per mol/kg, before the correction for ionic strength. */
export function conductivityIons(model: ChemistryModel): { index: number; weight: number }[] {
  return model.data.flatMap((s, index) => (s?.conductance ? [{ index, weight: s.conductance * Math.abs(s.charge) * 1e3 }] : []));
}
