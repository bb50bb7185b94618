/**
 * Whether a row called invalid really has no state: each reason is checked by its witness or looked for again in another way.
 * @returns "" where the reason stands, else what refutes it.
 */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { SOLIDS } from "@/lib/chemistry/data";
import type { ResolvedWater } from "@/lib/chemistry/types";
import { CARBON, CLOSURE, HYDROGEN } from "@/lib/kernel/kernel";
import { type Facts, makeSettleResult, settle } from "@/lib/kernel/settle";
import { provesContradiction, type SolidsWitness } from "@/lib/kernel/witness";
import { componentSum } from "@/lib/kernel/evaluate";
import { makePoint, type Programme, solveProgramme } from "./interior-point";
import { atmOf } from "./recompute";

const LN10 = Math.LN10;
const MOST_SOLUTES = 57.6;

export function refute(solver: CaseSolver, water: ResolvedWater): string {
  const { witness } = solver;
  if (!witness) return "no witness";
  switch (witness.kind) {
    case "input": return hasFault(solver, water) ? "" : "the input is not at fault";
    case "absent": return witness.components.every((name) => !(solver.kernel.ws.totals[solver.model.components.indexOf(name)] > 0)) ? "" : "the components are there";
    case "gas": return witness.total <= witness.dissolves ? "" : "the gas dissolves less";
    case "solids": return refuteSolids(solver, witness);
    case "strength": return refuteStrength(solver, water, witness.stage);
    case "scan": return refuteScan(solver, water);
  }
}

function hasFault(solver: CaseSolver, w: ResolvedWater): boolean {
  const { facts } = solver;
  const outside = (v: number | null, a: number, b: number) => v === null || !(v >= a && v <= b);
  if (w.faults.length > 0 || outside(w.temperature, 0, 90) || Object.values(w.totals).some((t) => !(t >= 0))) return true;
  if (facts.pH && outside(w.pH, -2, 16)) return true;
  if ((facts.DIC && outside(w.DIC, 0, Infinity)) || (facts.ANC && w.ANC === null) || (facts.alkalinity && w.alkalinity === null)) return true;
  const needsGas = facts.pCO2 || solver.kase.react?.gas === "open";
  const temperatures = [w.temperature ?? 25, ...(facts.pH && w.pHTemperature !== null ? [w.pHTemperature] : [])];
  return needsGas && temperatures.some((t) => !(atmOf(w.pCO2, t, w) > 0));
}

/** The combination itself, and the printed constants under it: elements and water must cancel and the constants must not. */
function refuteSolids(solver: CaseSolver, witness: SolidsWitness): string {
  if (!provesContradiction(witness)) return "the combination proves nothing";
  const { model } = solver;
  const elements = new Map<string, number>();
  witness.phases.forEach((phase, m) => {
    const solid = SOLIDS.find((s) => s.name === model.solids[model.phases.indexOf(phase)]);
    const composition = solid?.composition ?? { C: 1, O: 2 };
    for (const [element, count] of Object.entries(composition)) if (element !== "H" && element !== "O") elements.set(element, (elements.get(element) ?? 0) + count * witness.coefficients[m]);
  });
  for (const [element, sum] of elements) if (Math.abs(sum) > 1e-9) return `${element} does not cancel`;
  const water = witness.phases.reduce((sum, phase, m) => sum + witness.coefficients[m] * phase.water, 0);
  if (Math.abs(water) < 1e-9 || solver.kernel.tableau.gamma.isIdeal) return "";
  // It hangs on the activity of water: that which all of them need must differ from that of any state near.
  const needed = witness.phases.reduce((sum, _, m) => sum + witness.coefficients[m] * witness.targets[m], 0) / water;
  return witness.isHeld.every(Boolean) && Math.abs(needed - witness.lnWater) < 1e-9 ? "the activity of water suits all" : "";
}

/** Activity coefficients at an ionic strength, by the formulas and not by the kernel's tables. */
function exponents(solver: CaseSolver, strength: number, lnWater: number): Float64Array {
  const { tableau } = solver.kernel;
  const { constants } = solver.kernel.ws;
  const g = tableau.gamma;
  const root = Math.sqrt(strength);
  const lnGamma = (k: number): number => {
    if (g.isIdeal) return 0;
    if (g.hydrogenMultiple[k] !== 0) return g.hydrogenMultiple[k] * lnGamma(g.hydrogenClass);
    const size = g.ionSize[k] > 0 ? constants.debyeB * g.ionSize[k] : 1;
    return LN10 * (-constants.debyeA * g.squaredCharge[k] * (root / (1 + size * root) - g.relativeSlope * strength) + g.slope[k] * strength);
  };
  return Float64Array.from({ length: tableau.speciesCount }, (_, i) => constants.lnK[i] + tableau.water[i] * lnWater - lnGamma(tableau.gammaClass[i]));
}

/** At ionic strengths all the way up: do the concentrations ever ask for no higher one? */
function refuteStrength(solver: CaseSolver, water: ResolvedWater, stage: "facts" | "own-temperature" | "reaction"): string {
  const { kernel, present, reaction, kase } = solver;
  const { tableau, ws } = kernel;
  if (tableau.varying >= 0 && present[tableau.varyingAcid]) return ""; // the one-site acid is not of this form; its share of ions is small
  const n = tableau.componentCount;
  const live = Array.from({ length: n }, (_, j) => j).filter((j) => present[j]);
  const species = Array.from({ length: tableau.speciesCount }, (_, i) => i).filter((i) => live.length === n || !Array.from({ length: n }, (_, j) => j).some((j) => tableau.nu[i * n + j] !== 0 && !present[j]));
  const pack = (nu: Float64Array) => Float64Array.from(live, (j) => nu[j]);
  const equal: { nu: Float64Array; value: number; water: number }[] = [];
  const below: { nu: Float64Array; value: number; water: number }[] = [];
  if (stage === "reaction") {
    const a = reaction.assemblage;
    if (!Number.isNaN(a.xC)) equal.push({ nu: pack(kernel.holdsCarbon.nu), value: a.xC, water: 0 });
    for (let k = 0; k < a.count; k++) {
      const phase = kernel.solids[a.solids[k]];
      const entry = { nu: pack(phase.nu), value: a.targets[k], water: phase.water };
      if (a.isExcess[k] && !a.isTied[k]) equal.push(entry); else if (!a.isExcess[k]) below.push(entry);
    }
  } else if (stage === "facts") {
    if (solver.facts.pH) equal.push({ nu: pack(kernel.holdsHydrogen.nu), value: -water.pH! * LN10, water: 0 });
    if (solver.facts.pCO2) equal.push({ nu: pack(kernel.holdsCarbon.nu), value: ws.constants.gasLnK + Math.log(atmOf(water.pCO2, kase.close.facts.includes("pH") && water.pHTemperature !== null ? water.pHTemperature : water.temperature!, water)), water: 0 });
  }
  const programme: Programme = {
    n: live.length, rows: species.map((i) => pack(tableau.nu.subarray(i * n, (i + 1) * n))), base: new Float64Array(species.length),
    totals: Float64Array.from(live, (j) => ws.totals[j]), equal, below,
  };
  const point = makePoint(programme, Float64Array.from(live, (j) => Math.log(ws.totals[j] > 0 ? ws.totals[j] : 1e-5)));
  let solutes = 0;
  for (let strength = 1e-3; strength <= 30; strength *= strength < 0.4 ? 2 : 1.06) {
    let isSolved = false;
    for (let k = 0; k < 40; k++) {
      const lnWater = Math.log(Math.max(1 - 0.017 * solutes, 0.02));
      const base = exponents(solver, strength, lnWater);
      species.forEach((i, s) => { programme.base[s] = base[i]; });
      equal.concat(below).forEach((each) => { (each as { value: number; own?: number }).own ??= each.value; each.value = (each as { own?: number }).own! - each.water * lnWater; });
      if (!solveProgramme(programme, point)) break;
      const sum = point.c.reduce((total, c) => total + c, 0);
      const moved = Math.abs(Math.min(sum, MOST_SOLUTES) - solutes);
      solutes = k < 8 ? Math.min(sum, MOST_SOLUTES) : 0.5 * (solutes + Math.min(sum, MOST_SOLUTES));
      if (moved < 1e-7 * (1 + solutes)) { isSolved = true; break; }
    }
    if (!isSolved) { Object.assign(point, makePoint(programme, Float64Array.from(live, (j) => Math.log(ws.totals[j] > 0 ? ws.totals[j] : 1e-5)))); continue; }
    const own = 0.5 * species.reduce((total, i, s) => total + tableau.charge[i] ** 2 * point.c[s], 0);
    if (own < strength * (1 - 1e-6) && solutes < MOST_SOLUTES - 1e-6) return `at ionic strength ${strength} the concentrations ask for ${own}`;
  }
  return "";
}

/** The scan again, more than twice as fine, each sign change followed to the end. */
function refuteScan(solver: CaseSolver, water: ResolvedWater): string {
  const { kernel, traits, facts, kase, present } = solver;
  const { ws, tableau, solids } = kernel;
  const totals = ws.totals.slice();
  const result = makeSettleResult();
  const { closure } = traits;
  const isHydrogen = closure === CLOSURE.gasTotal || closure === CLOSURE.balanceGas || closure === CLOSURE.balanceTotal;
  const uncounted = (traits.aluminium >= 0 && present[traits.aluminium] === 1) || (solver.model.organicComponent >= 0 && present[solver.model.organicComponent] === 1);
  const usesAlkalinity = facts.alkalinity && uncounted;
  const settlesAt = facts.pH && water.pHTemperature !== null ? water.pHTemperature : water.temperature!;
  const xH = facts.pH ? -water.pH! * LN10 : NaN;
  const xC = facts.pCO2 ? ws.constants.gasLnK + Math.log(atmOf(water.pCO2, settlesAt, water)) : NaN;
  const target = facts.saturated ? ws.constants.solidLnK[traits.saturatedSolid] + kase.close.saturated!.SI * LN10 : NaN;
  const plain: Facts = { closure: CLOSURE.pHGas, present, usesAlkalinity: false, xH, xC, solid: -1, solidTarget: NaN, maxIterations: 100 };
  const balance = (withAlkalinity: boolean) => {
    let acid = Math.max(0, totals[HYDROGEN]);
    let base = Math.max(0, -totals[HYDROGEN]);
    for (let i = 0; i < tableau.speciesCount; i++) {
      const part = (withAlkalinity ? -tableau.alkalinity[i] : tableau.nu[i * tableau.componentCount]) * ws.c[i];
      if (part > 0) base += part; else acid -= part;
    }
    return Math.log(acid / base);
  };
  const iap = () => {
    const phase = solids[traits.saturatedSolid];
    return phase.nu.reduce((sum, v, j) => (v === 0 ? sum : sum + v * ws.x[j]), phase.water * ws.lnWater) - target;
  };
  const errorAt = (u: number): number => {
    ws.totals.set(totals);
    const inner: Facts = isHydrogen ? { ...plain, xH: u, closure: closure === CLOSURE.balanceTotal ? CLOSURE.pHTotal : CLOSURE.pHGas } : { ...plain, xC: u, closure: closure === CLOSURE.balanceSaturated ? CLOSURE.balanceGas : CLOSURE.pHGas };
    if (closure === CLOSURE.balanceSaturated && usesAlkalinity) inner.usesAlkalinity = true;
    settle(kernel, inner, result);
    if (result.outcome !== "solved") return NaN;
    if (closure === CLOSURE.gasTotal) return Math.log(componentSum(tableau, ws.c, CARBON) / totals[CARBON]);
    if (facts.saturated) return iap();
    return balance(usesAlkalinity);
  };
  const [from, to] = isHydrogen ? [2 * LN10, -16 * LN10] : [Math.log(10), Math.log(1e-25)];
  const count = closure === CLOSURE.balanceSaturated && usesAlkalinity ? 60 : 150;
  let lastU = NaN;
  let last = NaN;
  for (let k = 0; k <= count; k++) {
    const u = from + (to - from) * k / count;
    const g = errorAt(u);
    if (last * g < 0) {
      let [a, ga, b] = [lastU, last, u];
      let gm = NaN;
      for (let step = 0; step < 60; step++) {
        const middle = 0.5 * (a + b);
        gm = errorAt(middle);
        if (Number.isNaN(gm) || Math.abs(gm) < 1e-9) break;
        if (gm * ga < 0) b = middle; else { a = middle; ga = gm; }
      }
      if (Math.abs(gm) < 1e-8) return `the fact holds at ln activity ${0.5 * (a + b)}`;
    }
    lastU = u;
    last = g;
  }
  return "";
}

