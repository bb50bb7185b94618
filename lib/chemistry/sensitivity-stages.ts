/**
 * The states a row goes through, kept for its derivatives: settled by its facts; brought, closed, to its own temperature; met by gas and
 * solids. Each hands its totals of hydrogen and carbon to the next.
 */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import type { Claim } from "@/lib/kernel/certificate";
import type { StatePoint } from "@/lib/kernel/derivative";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, HYDROGEN } from "@/lib/kernel/kernel";
import type { Constants } from "@/lib/kernel/tableau";

export type Tie = { holds: "pH" } | { holds: "gas" } | { holds: "solid"; solid: number };

export interface Stage {
  kind: "settled" | "brought" | "reacted";
  /** °C at which it stands, and the input that this temperature is. */
  celsius: number;
  temperatureInput: "temperature" | "pHTemperature";
  state: StatePoint;
  /** What each of `state.ties` holds. */
  ties: Tie[];
}

/** Collects the stages of each row solved from now on. @returns the stages of the row solved last. */
export function recordStages(solver: CaseSolver): () => Stage[] {
  let serial = -1;
  let stages: Stage[] = [];
  solver.onState = (claim, constants) => {
    if (serial !== solver.serial) { serial = solver.serial; stages = []; }
    stages.push(makeStage(solver, claim, constants, stages.length));
  };
  return () => {
    // A pH measured at the water's own temperature needs no second state; its two temperatures are two inputs all the same.
    if (stages[0]?.temperatureInput === "pHTemperature" && stages.filter((s) => s.kind === "brought").length === 0) {
      stages.splice(1, 0, closedStage(solver, stages[0]));
    }
    return stages;
  };
}

function makeStage(solver: CaseSolver, claim: Claim, constants: Constants, index: number): Stage {
  const { input, facts, kernel, model } = solver;
  const isReacted = claim === solver.reaction.claim;
  const kind = isReacted ? "reacted" : index === 0 ? "settled" : "brought";
  const isMeasuredApart = kind === "settled" && facts.pH && !Number.isNaN(input.pHTemperature);
  const ties: Tie[] = [];
  const phases: StatePoint["ties"] = [];
  for (let m = 0; m < claim.tieCount; m++) {
    // A solid that may form and is not there is not at equilibrium: its amount is exactly zero.
    if (claim.tieKind[m] === 1 && claim.tieAmount[m] === 0) continue;
    const phase = claim.tiePhase[m];
    phases.push({ phase, isSource: isReacted });
    ties.push(phase === kernel.holdsHydrogen ? { holds: "pH" } : phase === kernel.holdsCarbon ? { holds: "gas" } : { holds: "solid", solid: model.phases.indexOf(phase) });
  }
  return {
    kind, celsius: isMeasuredApart ? input.pHTemperature : input.temperature, temperatureInput: isMeasuredApart ? "pHTemperature" : "temperature", ties,
    state: {
      c: claim.c.slice(), x: claim.x.slice(), present: claim.present.slice(), totals: claim.totals.slice(),
      // Absent aluminium and organics may be derived by, and they never count.
      usesAlkalinity: kind === "settled" && facts.alkalinity, isFree: claim.isFree.slice(), constants, ties: phases,
    },
  };
}

/** The same water with nothing held: every total as it is. */
export function closedStage(solver: CaseSolver, from: Stage): Stage {
  const { tableau } = solver.model;
  const totals = from.state.totals.slice();
  totals[HYDROGEN] = componentSum(tableau, from.state.c, HYDROGEN);
  totals[CARBON] = componentSum(tableau, from.state.c, CARBON);
  return {
    kind: "brought", celsius: solver.input.temperature, temperatureInput: "temperature", ties: [],
    state: { ...from.state, totals, usesAlkalinity: false, isFree: new Uint8Array(from.state.isFree.length), ties: [] },
  };
}
