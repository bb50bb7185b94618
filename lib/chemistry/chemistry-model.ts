/**
 * The chemistry of one case as a kernel tableau: which species take part, their stoichiometry over the components, their activity
 * classes, and how their constants follow from the printed reactions at any temperature.
 */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import type { LogKOverT, Species } from "@/lib/chemistry/data/types";
import { makeTableau } from "@/lib/chemistry/model-tableau";
import { organicSpecies } from "@/lib/chemistry/organic-model";
import { type Combination, combine, makeBasis } from "@/lib/chemistry/reaction-basis";
import { debyeSizeFactor, debyeSlope, logKAt } from "@/lib/chemistry/temperature";
import type { ResolvedCase } from "@/lib/chemistry/types";
import type { Constants, Phase, Tableau } from "@/lib/kernel/tableau";

const LN10 = Math.LN10;
/** Component order; hydrogen and carbon first, as the kernel wants them. */
const FIRST = ["H^+", "CO2(aq)"];
/** The organic acid's component; it has no elements of its own. */
export const ORGANIC_COMPONENT = "organic";
const GAS = "CO2(g)";

export interface ChemistryModel {
  set: ConstantsSet;
  tableau: Tableau;
  /** Names by component and species index. */
  components: string[];
  species: string[];
  /** The data behind a species; null for organic ones. */
  data: (Species | null)[];
  solids: string[];
  phases: Phase[];
  /** Names whose log K can be overridden, with their place in `overrides`. */
  reactionIndex: Map<string, number>;
  organicComponent: number;
  organicProtons: number;
  /** Printed reactions by index: formed species, solids, CO2(g). */
  reactions: readonly { name: string; logK: LogKOverT }[];
  /** Formed inorganic species from `firstForm` on, and solids, over the components and the printed log K. */
  forms: readonly Combination[];
  firstForm: number;
  solidForms: readonly Combination[];
  /** @param overrides log K by reaction index, NaN where the constants set rules. */
  constantsAt(celsius: number, overrides: Float64Array): Constants;
}

/** Data of the components, hydrogen and carbon first, H2O left out. */
function componentData(set: ConstantsSet): Species[] {
  const all = set.species.filter((s) => s.reaction === null && s.name !== "H2O");
  const first = FIRST.map((name) => {
    const found = all.find((s) => s.name === name);
    if (!found) throw new Error(`constants set: component ${name} is missing from lib/chemistry/data/species`);
    return found;
  });
  return [...first, ...all.filter((s) => !FIRST.includes(s.name))];
}

function isWanted(species: Species, complexes: ResolvedCase["complexes"]): boolean {
  if (!species.isComplex || complexes === "all") return true;
  return complexes !== "none" && complexes.includes(species.name);
}

/** @param kase decides complexes, activity model and organic model; nothing else of it is read. */
export function buildModel(kase: Pick<ResolvedCase, "complexes" | "activity" | "organic">, set: ConstantsSet = BUILT_IN): ChemistryModel {
  const components = componentData(set);
  const formed = set.species.filter((s) => s.reaction !== null && s.name !== GAS);
  const basis = makeBasis(components.map((s) => s.name), formed.map((s) => ({ name: s.name, reaction: s.reaction ?? {} })));
  const wanted = formed.filter((s) => isWanted(s, kase.complexes));
  const organic = organicSpecies(kase.organic);
  const solidData = set.solids;
  const solidForms = solidData.map((s) => combine(basis, s.reaction));
  const gas = set.species.find((s) => s.name === GAS);
  if (!gas?.logK) throw new Error(`constants set: ${GAS} is missing from lib/chemistry/data/species`);

  const acid = organic.length > 0 ? organic[0] : null;
  const organicComponent = acid ? components.length : -1;
  const names = [...components.map((s) => s.name), ...(acid ? [acid.name] : []), ...wanted.map((s) => s.name), ...organic.slice(1).map((s) => s.name)];
  const data: (Species | null)[] = [...components, ...(acid ? [null] : []), ...wanted, ...organic.slice(1).map(() => null)];
  const forms = wanted.map((s) => basis.forms.get(s.name)!);
  const n = components.length + (acid ? 1 : 0);
  const tableau = makeTableau({ n, names, data, forms, organic, organicComponent, activity: kase.activity });

  const reactions = [
    ...formed.map((s) => ({ name: s.name, logK: s.logK! })),
    ...solidData.map((s) => ({ name: s.name, logK: s.logK })),
    { name: GAS, logK: gas.logK },
  ];
  const reactionIndex = new Map(reactions.map((r, k) => [r.name, k]));
  const firstForm = n;
  const phases = solidForms.map((f): Phase => ({ nu: padded(f.nu, n), water: f.water }));
  const count = reactions.length;
  const constantsAt = (celsius: number, overrides: Float64Array): Constants => {
    const logK = Float64Array.from(reactions, (r, k) =>
      k < overrides.length && !Number.isNaN(overrides[k]) ? overrides[k] : logKAt(r.logK, celsius));
    const lnK = new Float64Array(names.length);
    forms.forEach((f, k) => { lnK[firstForm + k] = LN10 * weighted(f.logK, logK); });
    for (let j = 1; j < organic.length; j++) lnK[firstForm + forms.length + j - 1] = organic[j].lnK;
    const solidLnK = Float64Array.from(solidForms, (f, k) => LN10 * (logK[formed.length + k] - weighted(f.logK, logK)));
    return { lnK, solidLnK, gasLnK: LN10 * logK[count - 1], debyeA: debyeSlope(celsius), debyeB: debyeSizeFactor(celsius) };
  };
  return {
    set, reactions, forms, firstForm, solidForms, tableau, components: [...components.map((s) => s.name), ...(acid ? [ORGANIC_COMPONENT] : [])], species: names, data,
    solids: solidData.map((s) => s.name), phases, reactionIndex,
    organicComponent, organicProtons: Math.max(organic.length - 1, 0), constantsAt,
  };
}

function padded(nu: Float64Array, n: number): Float64Array {
  const wide = new Float64Array(n);
  wide.set(nu);
  return wide;
}

function weighted(terms: readonly [number, number][], logK: Float64Array): number {
  let sum = 0;
  for (const [k, factor] of terms) sum += factor * logK[k];
  return sum;
}
