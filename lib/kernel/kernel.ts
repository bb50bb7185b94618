/**
 * A kernel: one tableau with its solids, a workspace, and the systems met so far. Make one per case; solve many rows with it.
 */
import { buildSystem, type DependentPhases, type System } from "./system";
import type { Phase, Tableau } from "./tableau";
import { makeWorkspace, type Workspace } from "./workspace";

export const HYDROGEN = 0;
export const CARBON = 1;

/** Which two facts settle a water; each is a system of its own. */
export const CLOSURE = {
  balanceTotal: 0, // hydrogen balance with total carbon (also every closed reaction)
  balanceGas: 1, // hydrogen balance with a(CO2) held
  pHGas: 2,
  pHTotal: 3,
  pHBalance: 4, // pH held, CO2 is what is added until the hydrogen balance holds
  gasTotal: 5, // a(CO2) held, acid or base is what is added until total carbon is right
  balanceSaturated: 6, // a solid's activity product held, CO2 is what is added
  pHSaturated: 7,
  react: 8, // hydrogen balance; solids held by their own amounts; gas closed
  reactGas: 9,
} as const;
export type Closure = (typeof CLOSURE)[keyof typeof CLOSURE];

export interface Kernel {
  tableau: Tableau;
  /** Solids in the order of Constants.solidLnK. */
  solids: readonly Phase[];
  ws: Workspace;
  holdsHydrogen: Phase;
  holdsCarbon: Phase;
  /** By closure and components present, then by held solids and their pivots. */
  systems: Map<number, Map<number | string, System | DependentPhases>>;
  systemCount: number;
  /** What systemFor looks up; callers fill it. */
  pattern: Pattern;
}

export interface Pattern {
  closure: Closure;
  /** 1 where a component is present. */
  present: Uint8Array;
  /** Indices of held solids in ascending order: the react closures' assemblage, or the one solid of a saturated closure. */
  held: Int32Array;
  heldCount: number;
  /** Hydrogen's balance counts inorganic alkalinity only. */
  usesAlkalinity: boolean;
  /** React closures: how much of each component there is or may come, mol/kg; an order of magnitude will do. */
  abundance: Float64Array;
}

/** Systems kept; a job whose waters have more patterns than this rebuilds some (about 0.1 ms each). */
const MOST_SYSTEMS = 4096;

export function makeKernel(tableau: Tableau, solids: readonly Phase[]): Kernel {
  const n = tableau.componentCount;
  const unit = (j: number): Phase => {
    const nu = new Float64Array(n);
    nu[j] = 1;
    return { nu, water: 0 };
  };
  return {
    tableau, solids, ws: makeWorkspace(tableau, n), holdsHydrogen: unit(HYDROGEN), holdsCarbon: unit(CARBON), systems: new Map(), systemCount: 0,
    pattern: { closure: CLOSURE.balanceTotal, present: new Uint8Array(n), held: new Int32Array(solids.length + 1), heldCount: 0, usesAlkalinity: false, abundance: new Float64Array(n) },
  };
}

/**
 * The system of `kernel.pattern`, or which of its held phases depends on the others.
 *
 * A held solid is eliminated through the scarcest of its components (by `abundance`): its amount then comes from that balance, and
 * the others are not drowned in the rounding of an abundant one (a trace of magnesium beside much calcium, say).
 */
export function systemFor(kernel: Kernel): System | DependentPhases {
  const { closure, present, held, heldCount, usesAlkalinity } = kernel.pattern;
  let bits = 0;
  for (let j = present.length - 1; j >= 0; j--) bits = bits * 2 + present[j];
  const key = (closure * 2 + (usesAlkalinity ? 1 : 0)) * 2 ** present.length + bits;
  let family = kernel.systems.get(key);
  if (!family) { family = new Map(); kernel.systems.set(key, family); }
  const isReaction = closure >= CLOSURE.react;
  let solidKey: number | string = 0;
  // 128 solids with 4 components each: five digits of a number are exact below 2^53; more held solids than that take a text.
  for (let k = 0; k < heldCount; k++) {
    const digit: number = held[k] * 4 + (isReaction ? scarcest(kernel, closure, held[k]).choice : 0) + 1;
    solidKey = heldCount <= 5 ? Number(solidKey) * 1024 + digit : `${solidKey}/${digit}`;
  }
  const known = family.get(solidKey);
  if (known) return known;
  if (kernel.systemCount >= MOST_SYSTEMS) { kernel.systems.clear(); kernel.systemCount = 0; family = new Map(); kernel.systems.set(key, family); }
  const solids = Array.from(held.subarray(0, heldCount));
  const pivots = isReaction ? solids.map((k) => scarcest(kernel, closure, k).component) : [];
  const built = build(kernel, solids, pivots);
  family.set(solidKey, built);
  kernel.systemCount++;
  return built;
}

const found = { component: -1, choice: 0 };

/** The component of a solid that is least abundant, hydrogen (and an open gas's carbon) apart, and its place among the solid's components. */
function scarcest(kernel: Kernel, closure: Closure, solid: number): typeof found {
  const { nu } = kernel.solids[solid];
  const { abundance } = kernel.pattern;
  let place = 0;
  found.component = -1;
  found.choice = 0;
  for (let j = CARBON; j < nu.length; j++) {
    if (nu[j] === 0 || (j === CARBON && closure === CLOSURE.reactGas)) continue;
    if (found.component < 0 || abundance[j] < abundance[found.component]) { found.component = j; found.choice = Math.min(place, 3); }
    place++;
  }
  return found;
}

function build(kernel: Kernel, held: readonly number[], heldPivots: readonly number[]): System | DependentPhases {
  const { closure, present, usesAlkalinity } = kernel.pattern;
  const { holdsHydrogen: h, holdsCarbon: c } = kernel;
  const solids = held.map((k) => kernel.solids[k]);
  const plan = (phases: Phase[], sources: Phase[]) => buildSystem(kernel.tableau, {
    present: present.slice(), phases, sources: sources.map((s) => s.nu), usesAlkalinity, pivots: closure === CLOSURE.reactGas ? [CARBON, ...heldPivots] : heldPivots,
  });
  switch (closure) {
    case CLOSURE.balanceTotal: return plan([], []);
    case CLOSURE.balanceGas: return plan([c], [c]);
    case CLOSURE.pHGas: return plan([h, c], [h, c]);
    case CLOSURE.pHTotal: return plan([h], [h]);
    case CLOSURE.pHBalance: return plan([h], [c]);
    case CLOSURE.gasTotal: return plan([c], [h]);
    case CLOSURE.balanceSaturated: return plan(solids, [c]);
    case CLOSURE.pHSaturated: return plan([h, ...solids], [h, c]);
    case CLOSURE.react: return plan(solids, solids);
    case CLOSURE.reactGas: return plan([c, ...solids], [c, ...solids]);
  }
}
