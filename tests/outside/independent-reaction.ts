/** What a settled water meets, in the independent way: every subset of the solids is tried, and the one that breaks no rule is the answer. */
import { type Master, STRONG } from "./independent-constants";
import { NoState, type PlainFact, type PlainProblem, type PlainState, solidOf, solveState } from "./independent-solver";

export interface PlainSupply { solid: string; supply: "excess" | "may-form" | number; SI: number }

export interface PlainOutcome { state: PlainState; dissolved: Record<string, number>; gasTaken: number }

/** A sign or an index that is off by less than this is zero. */
const SLACK = 1e-11;

/**
 * Keeps the charge of all species and every total but for what gas and solids bring. `pressure` null: closed.
 * Throws NoState where no subset of the solids does.
 */
export function react(first: PlainState, celsius: number, pressure: number | null, supplies: readonly PlainSupply[]): PlainOutcome {
  const base = first.problem;
  const totals: Partial<Record<Master, number>> = { ...base.totals };
  let carbon = first.DIC;
  for (const { solid, supply } of supplies) {
    if (typeof supply !== "number") continue;
    for (const [m, n] of Object.entries(solidOf(solid).parts) as [Master, number][]) {
      if (m === "CO3") carbon += n * supply;
      else if (m !== "H") totals[m] = (totals[m] ?? 0) + n * supply;
    }
  }
  const gas: PlainFact = pressure === null ? { is: "DIC", value: carbon } : { is: "pCO2", value: pressure };
  const loose = supplies.filter((each) => each.supply !== "excess");
  const found: PlainOutcome[] = [];
  for (let subset = 0; subset < 2 ** loose.length; subset++) {
    const held = supplies.filter((each) => each.supply === "excess" || (subset >> loose.indexOf(each)) & 1);
    const problem: PlainProblem = { ...base, celsius, totals, facts: [{ is: "charge", value: first.charge }, gas], held: held.map(({ solid, SI }) => ({ solid, SI })) };
    if (!isPossible(problem, held, supplies)) continue;
    const state = attempt(problem);
    if (state === null || !keepsRules(state, supplies, held)) continue;
    const dissolved = Object.fromEntries(supplies.map((each) => [each.solid, (typeof each.supply === "number" ? each.supply : 0) + (state.dissolved[each.solid] ?? 0)]));
    const fromSolids = supplies.reduce((sum, each) => sum + (solidOf(each.solid).parts.CO3 ?? 0) * dissolved[each.solid], 0);
    found.push({ state, dissolved, gasTaken: pressure === null ? 0 : state.DIC - first.DIC - fromSolids });
  }
  if (found.length === 0) throw new NoState("no subset of the solids");
  return found[0];
}

function attempt(problem: PlainProblem): PlainState | null {
  try {
    return solveState(problem);
  } catch (error) {
    if (error instanceof NoState) return null;
    throw error;
  }
}

/** A solid that is not in excess needs its ions in the water, or another solid that brings them. */
function isPossible(problem: PlainProblem, held: readonly PlainSupply[], supplies: readonly PlainSupply[]): boolean {
  const brought = new Set(supplies.filter((each) => each.supply === "excess").flatMap((each) => Object.keys(solidOf(each.solid).parts)));
  return held.every((each) => each.supply === "excess" || Object.keys(solidOf(each.solid).parts)
    .every((m) => m === "H" || m === "CO3" || brought.has(m) || (problem.totals[m as Master] ?? 0) > 0));
}

function keepsRules(state: PlainState, supplies: readonly PlainSupply[], held: readonly PlainSupply[]): boolean {
  return supplies.every((each) => {
    if (each.supply === "excess") return true;
    if (held.includes(each)) return state.dissolved[each.solid] <= SLACK * state.ionicStrength;
    const SI = state.SI[each.solid];
    return SI === null || SI <= each.SI + SLACK;
  });
}

/** Σ z·total of the strong ions, eq/kg. */
export function strongIons(totals: Readonly<Partial<Record<Master, number>>>): number {
  return (Object.entries(STRONG) as [Master, number][]).reduce((sum, [m, z]) => sum + z * (totals[m] ?? 0), 0);
}
