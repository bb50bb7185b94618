/**
 * The sure path for assemblages: the whole assemblage at fixed activity coefficients, inside the search over ionic strength of convex.ts.
 *
 * At fixed γ and a_w the assemblage is a convex programme with linear constraints, which has its one point or a combination of solids that
 * proves it has none; every set on the way is solved by the convex core, which converges from anywhere, and so has a state even where
 * activity coefficients that follow would leave it none. As ionic strength varies the point moves continuously, so the search over φ(I) holds.
 * Bound: 40 + 12·solids changes at each ionic strength; the second half of them takes the change of lowest index, which cannot go round in
 * a circle (Murty 1974, Math. Program. 7:111, for the linear case).
 */
import { core, searchStrength, type SureResult } from "./convex";
import { bindGamma, loadSystem, unloadSystem } from "./evaluate";
import { type Assemblage, boundStart, coldStartHeld, heldSystem, readAmounts, setTargets } from "./held-solids";
import type { Kernel } from "./kernel";
import { nextChange } from "./solid-changes";
import type { System } from "./system";

/** @param a as in solveAssemblage; the held set at hand is where it starts. */
export function solveNested(kernel: Kernel, a: Assemblage): SureResult | "contradiction" {
  const { ws, tableau } = kernel;
  const found = { last: "failed" as ReturnType<typeof solveAtStrength> };
  for (let k = 0; k < a.count; k++) if (!a.isExcess[k]) a.isHeld[k] = 0;
  setTargets(kernel, a);
  coldStartHeld(kernel, a);
  bindGamma(tableau, ws);
  const result = searchStrength(tableau, ws, () => {
    if (found.last === "contradiction") return false;
    found.last = solveAtStrength(kernel, a);
    return found.last === "solved" || found.last === "unless-drier";
  });
  return found.last === "contradiction" || (result === "solved" && found.last === "unless-drier") ? "contradiction" : result;
}

/**
 * "contradiction" holds at any ionic strength; "unless-drier" names one that hangs on the activity of water: the other solids are then at
 * equilibrium, and whether it stands is seen where ionic strength agrees.
 */
function solveAtStrength(kernel: Kernel, a: Assemblage): "solved" | "contradiction" | "unless-drier" | "failed" {
  const bound = 40 + 12 * a.count;
  for (let change = 0; change < bound; change++) {
    const system = heldSystem(kernel, a);
    if (!solveCore(kernel, a, system)) return "failed";
    unloadSystem(system, kernel.tableau, kernel.ws);
    readAmounts(kernel, a);
    const next = nextChange(kernel, a, change > bound / 2);
    if (next === "settled") return "solved";
    if (next === "contradiction") return takesWater(kernel, a) ? "unless-drier" : "contradiction";
  }
  return "failed";
}

function takesWater(kernel: Kernel, a: Assemblage): boolean {
  let water = 0;
  for (let k = 0; k < a.count; k++) water += a.combination[k] * kernel.solids[a.solids[k]].water;
  return Math.abs(water) > 1e-9 && !kernel.tableau.gamma.isIdeal;
}

/** From the state at hand; from a cold start where that fails. Ionic strength and water activity stay what the search set. */
function solveCore(kernel: Kernel, a: Assemblage, system: System): boolean {
  const { ws, tableau } = kernel;
  const { ionicStrength, soluteSum } = ws;
  setTargets(kernel, a);
  for (let attempt = 0; attempt < 2; attempt++) {
    if (attempt > 0) coldStartHeld(kernel, a); else boundStart(kernel, a);
    ws.ionicStrength = ionicStrength;
    ws.soluteSum = soluteSum;
    loadSystem(system, ws, tableau.componentCount);
    if (core(system, tableau, ws)) return true;
  }
  return false;
}
