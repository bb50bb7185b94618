/**
 * Settles a water from two facts, whichever they are.
 *
 * Convex closures (hydrogen balance or pH with held or total carbon) have one state at given activity coefficients and go straight
 * to solveSystem. In the others the balance imposed is not that of the component set free, so that none or several states may exist:
 *   pH with a balance       unknown a(CO2)    error ln(Q/P) of the hydrogen balance
 *   a(CO2) with total C     unknown a(H)      error ln(S_C/T_C)
 *   alkalinity beside Al or organics          unknown a(H)      error ln(Q/P) of the alkalinity
 *   pH with a saturated solid   unknown a(CO2)    error SI − target
 *   a balance with a saturated solid   unknown a(CO2)    error SI − target
 * In all but the last the error is monotone in the unknown at fixed γ (the covariance of protons given off and carbon taken up over the
 * species of any one metal is not negative; at fixed pH a metal loses less than its all to carbonate), so Newton on the whole system is
 * tried first. The last has up to two states (much CO2, and nearly none), so its bracket is always scanned, from the side of lowest pH; a
 * peak that just fails to cross is searched too.
 * Each point of a scan is a convex system; a root is closed to 0.05 by bisection and secants, then by Newton on the whole system,
 * and if Newton leaves the bracket by secants to the end.
 */
import { componentSum, evaluateActivity, evaluateSystem, loadSystem, unloadSystem } from "./evaluate";
import { CARBON, CLOSURE, type Closure, HYDROGEN, type Kernel, systemFor } from "./kernel";
import { solveSystem, type SolveOptions, type SolveResult } from "./solve-system";
import { coldStart } from "./start";
import type { System } from "./system";

export interface Facts {
  closure: Closure;
  /** 1 where a component is present. */
  present: Uint8Array;
  usesAlkalinity: boolean;
  /** ln a(H), ln a(CO2) where a fact holds them, else NaN. */
  xH: number;
  xC: number;
  /** Saturated closures: the solid and its ln K + SI·ln 10. */
  solid: number;
  solidTarget: number;
  /** Bound on the steps of any one Newton run. */
  maxIterations: number;
}

export type Settled = "solved" | "no-state" | "no-finite-solution" | "failed";

export interface SettleResult {
  outcome: Settled;
  states: number;
  /** Least and largest error met by a scan, over the whole bracket: the witness of "no-state", both of one sign. */
  least: number;
  most: number;
  /** The bracket scanned (natural logarithms of activities). */
  unknown: "hydrogen" | "carbon";
  from: number;
  to: number;
}

export function makeSettleResult(): SettleResult {
  return { outcome: "failed", states: 0, least: NaN, most: NaN, unknown: "carbon", from: NaN, to: NaN };
}

/**
 * Brackets of the unknowns, natural logarithms: a(CO2) 1e-25 … 10 mol/kg, pH −2 … 16. At 25 °C 10 mol/kg stand for some 300 atm, where CO2
 * is no gas above a water any more.
 */
const CARBON_RANGE = [Math.log(1e-25), Math.log(10)] as const;
const HYDROGEN_RANGE = [-16 * Math.LN10, 2 * Math.LN10] as const;
/** Filled anew for each solve, so that a row allocates nothing. */
const COLD: SolveOptions = { maxIterations: 0, isCold: true };
const SCAN_POINTS = 56;

/**
 * @param kernel its workspace holds constants and totals on entry, the state on "solved".
 * @param result filled in place.
 */
export function settle(kernel: Kernel, facts: Facts, result: SettleResult): void {
  result.states = 1;
  const system = wholeSystem(kernel, facts);
  const { closure, maxIterations } = facts;
  if (closure !== CLOSURE.balanceSaturated) {
    coldStart(kernel, facts);
    setTargets(kernel, facts);
    COLD.maxIterations = maxIterations;
    const solved = solveSystem(system, kernel.tableau, kernel.ws, COLD);
    result.outcome = solved;
    if (solved === "solved" && (system.isConvex || isInRange(kernel))) return;
    if (system.isConvex) return;
  }
  if (maxIterations <= 1) { result.outcome = "failed"; return; }
  scan(kernel, facts, result);
}

function isInRange(kernel: Kernel): boolean {
  const { x } = kernel.ws;
  return x[HYDROGEN] > HYDROGEN_RANGE[0] && x[HYDROGEN] < HYDROGEN_RANGE[1] && !(x[CARBON] > CARBON_RANGE[1]);
}

function wholeSystem(kernel: Kernel, facts: Facts): System {
  const { pattern } = kernel;
  pattern.closure = facts.closure;
  pattern.present = facts.present;
  pattern.usesAlkalinity = facts.usesAlkalinity;
  pattern.heldCount = facts.solid >= 0 ? 1 : 0;
  pattern.held[0] = facts.solid;
  const system = systemFor(kernel);
  if ("dependent" in system) throw new Error("settle: the facts of a closure depend on each other");
  return system;
}

/** ρ of the held phases, in the order of systemFor. */
function setTargets(kernel: Kernel, facts: Facts): void {
  const { targets } = kernel.ws;
  switch (facts.closure) {
    case CLOSURE.balanceGas: case CLOSURE.gasTotal: targets[0] = facts.xC; break;
    case CLOSURE.pHGas: targets[0] = facts.xH; targets[1] = facts.xC; break;
    case CLOSURE.pHTotal: case CLOSURE.pHBalance: targets[0] = facts.xH; break;
    case CLOSURE.balanceSaturated: targets[0] = facts.solidTarget; break;
    case CLOSURE.pHSaturated: targets[0] = facts.xH; targets[1] = facts.solidTarget; break;
    default: break;
  }
}

/**
 * The convex system at one value of the unknown, and the error of the fact left out; NaN where it could not be solved, Infinity where it
 * has no finite solution (CO2 at 300 atm over a base, say): no root lies there.
 * @param isNear the workspace holds the state at a value near by, to start from.
 */
function errorAt(kernel: Kernel, facts: Facts, u: number, isNear: boolean): number {
  const inner: Facts = innerFacts(facts, u);
  const { ws, tableau } = kernel;
  const system = wholeSystem(kernel, inner);
  if (!system.isConvex) {
    let isSolved = false;
    if (isNear) {
      setTargets(kernel, inner);
      isSolved = solveSystem(system, tableau, ws, { maxIterations: facts.maxIterations, isCold: false }) === "solved" && isInRange(kernel);
    }
    const result = makeSettleResult();
    if (!isSolved) settle(kernel, inner, result);
    if (!isSolved && result.outcome !== "solved") return result.outcome === "failed" ? NaN : Infinity;
  } else {
    const solved = solveInner(kernel, inner, system, isNear);
    if (solved !== "solved") return solved === "failed" ? NaN : Infinity;
  }
  if (facts.closure === CLOSURE.gasTotal) return Math.log(componentSum(tableau, ws.c, CARBON) / ws.totals[CARBON]);
  if (facts.solid >= 0) return solidError(kernel, facts);
  return hydrogenError(kernel, facts.usesAlkalinity);
}

function solveInner(kernel: Kernel, inner: Facts, system: System, isNear: boolean): SolveResult {
  const { ws, tableau } = kernel;
  const { maxIterations } = inner;
  setTargets(kernel, inner);
  if (isNear) {
    const solved = solveSystem(system, tableau, ws, { maxIterations, isCold: false, isFollowed: true });
    if (solved !== "failed") return solved;
  }
  coldStart(kernel, inner);
  return solveSystem(system, tableau, ws, { maxIterations, isCold: true });
}

function innerFacts(facts: Facts, u: number): Facts {
  switch (facts.closure) {
    case CLOSURE.pHBalance: return { ...facts, closure: CLOSURE.pHGas, usesAlkalinity: false, xC: u };
    case CLOSURE.gasTotal: return { ...facts, closure: CLOSURE.pHGas, usesAlkalinity: false, xH: u };
    case CLOSURE.balanceGas: return { ...facts, closure: CLOSURE.pHGas, usesAlkalinity: false, xH: u };
    case CLOSURE.balanceTotal: return { ...facts, closure: CLOSURE.pHTotal, usesAlkalinity: false, xH: u };
    case CLOSURE.balanceSaturated: return { ...facts, closure: CLOSURE.balanceGas, xC: u, solid: -1 };
    case CLOSURE.pHSaturated: return { ...facts, closure: CLOSURE.pHGas, usesAlkalinity: false, xC: u, solid: -1 };
    default: throw new Error(`settle: closure ${facts.closure} has no inner system`);
  }
}

/** ln IAP − target of the solid at the state in the workspace. */
function solidError(kernel: Kernel, facts: Facts): number {
  const { ws, tableau, solids } = kernel;
  const phase = solids[facts.solid];
  let v = phase.water * ws.lnWater - facts.solidTarget;
  for (let j = 0; j < tableau.componentCount; j++) if (phase.nu[j] !== 0) v += phase.nu[j] * ws.x[j];
  return v;
}

/** ln(Q/P) of the hydrogen balance (or the alkalinity) at the state in the workspace: rises with the alkalinity of the state. */
function hydrogenError(kernel: Kernel, usesAlkalinity: boolean): number {
  const { ws, tableau } = kernel;
  const n = tableau.componentCount;
  let plus = Math.max(0, -ws.totals[HYDROGEN]);
  let minus = Math.max(0, ws.totals[HYDROGEN]);
  for (let i = 0; i < tableau.speciesCount; i++) {
    const part = (usesAlkalinity ? -tableau.alkalinity[i] : tableau.nu[i * n]) * ws.c[i];
    if (part > 0) plus += part; else minus -= part;
  }
  return Math.log(minus / plus);
}

function isHydrogenUnknown(facts: Facts): boolean {
  return facts.closure === CLOSURE.gasTotal || facts.closure === CLOSURE.balanceGas || facts.closure === CLOSURE.balanceTotal;
}

function scan(kernel: Kernel, facts: Facts, result: SettleResult): void {
  const [low, high] = isHydrogenUnknown(facts) ? HYDROGEN_RANGE : CARBON_RANGE;
  // From the side of lowest pH: much acid, or much CO2.
  const at = (k: number) => high + (low - high) * k / SCAN_POINTS;
  let isNear = false;
  let wasEndless = false;
  const error = (u: number) => {
    const g = errorAt(kernel, facts, u, isNear);
    isNear = Number.isFinite(g);
    return g;
  };
  const canTurn = facts.closure === CLOSURE.balanceSaturated;
  let states = 0;
  let bracket: [number, number, number, number] | null = null;
  let isComplete = true;
  result.unknown = isHydrogenUnknown(facts) ? "hydrogen" : "carbon";
  result.from = low;
  result.to = high;
  result.least = Infinity;
  result.most = -Infinity;
  let before = NaN;
  let last = NaN;
  for (let k = 0; k <= SCAN_POINTS; k++) {
    let g = error(at(k));
    const isEndless = g === Infinity;
    if (Number.isNaN(g)) isComplete = false;
    else if (!Number.isFinite(g)) g = NaN;
    else if (!bracket && k > 0 && wasEndless) {
      const edge = findAtEdge(error, at(k), g, at(k - 1));
      if (edge) { states++; bracket = edge; }
    }
    if (Number.isFinite(g)) { result.least = Math.min(result.least, g); result.most = Math.max(result.most, g); }
    if (last * g <= 0 && g !== last) {
      states++;
      bracket ??= [at(k - 1), last, at(k), g];
    } else if (canTurn && before * last > 0 && Math.abs(last) < Math.abs(before) && Math.abs(last) < Math.abs(g) && Math.sign(g) === Math.sign(last)) {
      const turned = findTurn(error, at(k - 2), at(k), Math.sign(last));
      if (turned) { states += 2; bracket ??= [at(k - 2), before, turned[0], turned[1]]; }
    }
    if (isEndless && !bracket && Number.isFinite(last)) {
      const edge = findAtEdge(error, at(k - 1), last, at(k));
      if (edge) { states++; bracket = edge; }
    }
    before = last;
    last = g;
    wasEndless = isEndless;
  }
  result.states = states;
  if (!bracket) { result.outcome = isComplete ? "no-state" : "failed"; return; }
  result.outcome = closeRoot(kernel, facts, bracket) ? "solved" : "failed";
}

/**
 * Between a point with an error and one without a finite solution: a point of the other sign, if the edge of what is finite lies beyond it.
 * From the outer side inwards, so that a bracket's first point is the one of lower pH.
 */
function findAtEdge(error: (u: number) => number, inside: number, g: number, outside: number): [number, number, number, number] | null {
  let from = inside;
  let gFrom = g;
  let to = outside;
  for (let k = 0; k < 20; k++) {
    const u = 0.5 * (from + to);
    const each = error(u);
    if (!Number.isFinite(each)) { to = u; continue; }
    if (each * g <= 0) return [u, each, from, gFrom];
    from = u;
    gFrom = each;
  }
  return null;
}

/** Golden-section search for a point of the other sign between two points of one sign; null where the peak stays short. */
function findTurn(error: (u: number) => number, from: number, to: number, sign: number): [number, number] | null {
  const golden = 0.6180339887498949;
  let a = from;
  let b = to;
  let u = b + (a - b) * golden;
  let v = a + (b - a) * golden;
  let gu = error(u);
  let gv = error(v);
  for (let k = 0; k < 24; k++) {
    if (gu * sign < 0) return [u, gu];
    if (gv * sign < 0) return [v, gv];
    if (Math.abs(gu) < Math.abs(gv)) { b = v; v = u; gv = gu; u = b + (a - b) * golden; gu = error(u); }
    else { a = u; u = v; gu = gv; v = a + (b - a) * golden; gv = error(v); }
  }
  return null;
}

function closeRoot(kernel: Kernel, facts: Facts, bracket: [number, number, number, number]): boolean {
  let [a, ga, b, gb] = bracket;
  const component = isHydrogenUnknown(facts) ? HYDROGEN : CARBON;
  const system = wholeSystem(kernel, facts);
  let hasTried = false;
  for (let k = 0; k < 120; k++) {
    const secant = a + (b - a) * (ga / (ga - gb));
    const u = k % 3 === 2 || !Number.isFinite(secant) ? 0.5 * (a + b) : secant;
    const g = errorAt(kernel, facts, u, k > 0);
    if (!Number.isFinite(g)) return false;
    if (!hasTried && (Math.abs(b - a) < 0.05 || Math.abs(g) < 1e-3)) {
      hasTried = true;
      setTargets(kernel, facts);
      const near = Math.max(Math.abs(b - a), 0.05);
      if (solveSystem(system, kernel.tableau, kernel.ws, { maxIterations: facts.maxIterations, isCold: false }) === "solved"
        && Math.abs(kernel.ws.x[component] - u) <= near) return true;
    } else if (Math.abs(g) <= 1e-13 || Math.abs(b - a) <= 4e-16 * Math.abs(u)) {
      acceptPoint(kernel, facts, system);
      return true;
    }
    if (g * ga <= 0) { b = u; gb = g; } else { a = u; ga = g; }
  }
  return false;
}

/** Takes the scan's last point as the state of the whole system; the certificate judges it. */
function acceptPoint(kernel: Kernel, facts: Facts, system: System): void {
  const { ws, tableau } = kernel;
  setTargets(kernel, facts);
  loadSystem(system, ws, tableau.componentCount);
  evaluateActivity(tableau, ws);
  evaluateSystem(system, ws);
  unloadSystem(system, tableau, ws);
}

/** Takes a settled water on to where rounding ends. */
export function refineSettled(kernel: Kernel, facts: Facts): void {
  setTargets(kernel, facts);
  const options = { maxIterations: facts.maxIterations, isCold: false, isFollowed: true, isTight: true };
  solveSystem(wholeSystem(kernel, facts), kernel.tableau, kernel.ws, options);
}
