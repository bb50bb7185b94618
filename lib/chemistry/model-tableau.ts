/** The kernel's tableau from species data: stoichiometry, charges, equivalents of alkalinity, classes of activity coefficient. */
import type { Species } from "@/lib/chemistry/data/types";
import { OLIVER_FIT, type OrganicSpecies } from "@/lib/chemistry/organic-model";
import type { Combination } from "@/lib/chemistry/reaction-basis";
import type { ActivityModel } from "@/lib/chemistry/types";
import type { GammaTable, Tableau } from "@/lib/kernel/tableau";

export interface TableauParts {
  /** Components, the organic one included. */
  n: number;
  names: readonly string[];
  /** Data by species; null for organic ones. */
  data: readonly (Species | null)[];
  /** Formed inorganic species, over the inorganic components. */
  forms: readonly Combination[];
  organic: readonly OrganicSpecies[];
  organicComponent: number;
  activity: ActivityModel;
}

export function makeTableau(parts: TableauParts): Tableau {
  const { n, names, data, forms, organic, organicComponent } = parts;
  const ns = names.length;
  const nu = new Float64Array(ns * n);
  const water = new Float64Array(ns);
  for (let j = 0; j < n; j++) nu[j * n + j] = 1;
  forms.forEach((f, k) => { nu.set(f.nu, (n + k) * n); water[n + k] = f.water; });
  const firstAnion = n + forms.length;
  organic.slice(1).forEach((_, k) => {
    nu[(firstAnion + k) * n + organicComponent] = 1;
    nu[(firstAnion + k) * n] = -(k + 1);
  });
  const charge = Float64Array.from(data, (s, i) => s ? s.charge : organicCharge(i, firstAnion));
  // Proton deficiency against the components, which are the reference level; aluminium and organic anions are left out.
  const alkalinity = Float64Array.from(data, (s, i) => !s || s.composition.Al ? 0 : nu[i * n] === 0 ? 0 : -nu[i * n]);
  const { gamma, gammaClass } = activityClasses(parts.activity, data, charge);
  const varyingAt = organic.findIndex((s) => s.varies);
  return {
    componentCount: n, speciesCount: ns, nu, water, charge, componentCharge: charge.slice(0, n), alkalinity, gammaClass, gamma,
    varying: varyingAt > 0 ? firstAnion + varyingAt - 1 : -1, varyingAcid: varyingAt > 0 ? organicComponent : -1, varyingFit: OLIVER_FIT,
  };
}

function organicCharge(index: number, firstAnion: number): number {
  return index < firstAnion ? 0 : -(index - firstAnion + 1);
}

/** Kielland's value for a singly charged pair, where the data name none (chemistry.md section 8). */
const PAIR_SIZE = 4;
/** log10 γ of a neutral species per unit of ionic strength (common practice). */
const SALTING_OUT = 0.1;
/** Davies 1962: 0.3·I inside the bracket. */
const DAVIES_SLOPE = 0.3;

function activityClasses(model: ActivityModel, data: readonly (Species | null)[], charge: Float64Array) {
  const keys = new Map<string, number>();
  const rows: { z2: number; size: number; slope: number; multiple: number }[] = [];
  const classOf = (z2: number, size: number, slope: number, multiple: number): number => {
    const key = `${z2}/${size}/${slope}/${multiple}`;
    let k = keys.get(key);
    if (k === undefined) { k = rows.length; keys.set(key, k); rows.push({ z2, size, slope, multiple }); }
    return k;
  };
  const hasSize = model === "debye-huckel" || model === "truesdell-jones";
  const gammaClass = Int32Array.from(data, (s, i) => {
    const z = charge[i];
    if (!s) return classOf(0, 0, 0, z); // conditional constants: γ of H+ to the power of the charge lost, 1 for the acid itself
    if (z === 0) return classOf(0, 0, SALTING_OUT, 0);
    if (!hasSize) return classOf(z * z, 0, 0, 0);
    const fitted = model === "truesdell-jones" ? s.truesdellJones : null;
    return fitted ? classOf(z * z, fitted.a, fitted.b, 0) : classOf(z * z, s.ionSize ?? PAIR_SIZE, 0, 0);
  });
  const gamma: GammaTable = {
    count: rows.length, isIdeal: model === "ideal",
    squaredCharge: Float64Array.from(rows, (r) => r.z2), ionSize: Float64Array.from(rows, (r) => r.size),
    slope: Float64Array.from(rows, (r) => r.slope), relativeSlope: model === "davies" ? DAVIES_SLOPE : 0,
    hydrogenMultiple: Float64Array.from(rows, (r) => r.multiple), hydrogenClass: gammaClass[0],
  };
  return { gamma, gammaClass };
}
