/** What the settled water then meets: gas and solids. Totals, presence and targets for the kernel's assemblage, and its certificate. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import type { ChemistryModel } from "@/lib/chemistry/chemistry-model";
import { SUPPLY } from "@/lib/chemistry/row-inputs";
import { pressureOf } from "@/lib/chemistry/row-problem";
import { type ResolvedJob, STATUS } from "@/lib/chemistry/types";
import { type Assemblage, makeAssemblage, refineAssemblage, solveAssemblage } from "@/lib/kernel/assemblage";
import { certify, type Claim, makeClaim, TIE } from "@/lib/kernel/certificate";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, HYDROGEN } from "@/lib/kernel/kernel";
import { SAME_TARGET } from "@/lib/kernel/solid-ties";
import type { Constants } from "@/lib/kernel/tableau";
import type { Witness } from "@/lib/kernel/witness";

export interface Reaction {
  /** Model indices of the case's solids, ascending. */
  solids: number[];
  /** Pairs of positions in `solids` of equal composition, water included. */
  alike: [number, number][];
  assemblage: Assemblage;
  /** Position in `solids` of each solid of the assemblage. */
  places: Int32Array;
  claim: Claim;
  /** Dissolved by solid of the case (formed: negative) and CO2 taken up, mol/kg. */
  dissolved: Float64Array;
  gasTaken: number;
  outcome: { status: number; message: string; residual: number; witness: Witness | null; isDependent: boolean };
}

export function makeReaction(model: ChemistryModel, caseSolids: readonly { index: number }[]): Reaction {
  const solids = caseSolids.map((s) => s.index);
  const alike: [number, number][] = [];
  for (let a = 0; a < solids.length; a++) {
    for (let b = a + 1; b < solids.length; b++) {
      const one = model.phases[solids[a]];
      const other = model.phases[solids[b]];
      if (one.water === other.water && one.nu.every((v, j) => v === other.nu[j])) alike.push([a, b]);
    }
  }
  return {
    solids, alike, assemblage: makeAssemblage(solids.length), places: new Int32Array(solids.length),
    claim: makeClaim(model.tableau, solids.length + 2), dissolved: new Float64Array(solids.length), gasTaken: 0,
    outcome: { status: STATUS.ok, message: "", residual: 0, witness: null, isDependent: false },
  };
}

/** Solves the second state from the first, which stands in the workspace. */
export function runReaction(solver: CaseSolver, constants: Constants, settings: ResolvedJob["solver"]): Reaction["outcome"] {
  const { kernel, reaction, input, present } = solver;
  const { outcome, assemblage } = reaction;
  outcome.status = STATUS.ok;
  outcome.message = "";
  outcome.residual = 0;
  outcome.witness = null;
  outcome.isDependent = false;
  reaction.gasTaken = 0;
  reaction.dissolved.fill(0);
  kernel.ws.constants = constants;
  const xC = gasTarget(solver, constants);
  if (typeof xC === "string") return refuse(outcome, xC, { kind: "input" });
  setTotals(solver);
  if (!Number.isNaN(xC)) present[CARBON] = 1;
  addSupplies(solver);
  fillAssemblage(solver, constants);
  assemblage.present = present;
  assemblage.xC = xC;
  assemblage.maxIterations = settings.maxIterations;
  const fault = alikeFault(solver);
  if (fault) return refuse(outcome, fault, solidsWitness(solver));
  const result = solveAssemblage(kernel, assemblage);
  if (result === "contradiction") return refuse(outcome, contradiction(solver), solidsWitness(solver));
  if (result === "no-finite-solution") {
    return refuse(outcome, "no finite solution: no ionic strength up to 30 mol/kg agrees with this reaction and this activity model", { kind: "strength", upTo: 30, stage: "reaction" });
  }
  if (result === "failed") {
    outcome.status = STATUS.notConverged;
    outcome.message = `not converged while reacting with ${heldNames(solver, !Number.isNaN(xC)) || "the gas"}`;
    return outcome;
  }
  let residual = certifyReaction(solver, constants, xC);
  if (!(residual <= settings.tolerance)) {
    refineAssemblage(kernel, assemblage);
    residual = certifyReaction(solver, constants, xC);
  }
  solver.onState?.(reaction.claim, constants);
  for (let k = 0; k < assemblage.count; k++) {
    const place = reaction.places[k];
    const supply = input.supplyKind[place] === SUPPLY.finite ? input.supplies[place] : 0;
    reaction.dissolved[place] = supply - assemblage.amounts[k];
    if (assemblage.isTied[k]) outcome.isDependent = true;
  }
  reaction.gasTaken = 0 - assemblage.gasAmount; // not −0
  outcome.residual = residual;
  return outcome;
}

function refuse(outcome: Reaction["outcome"], message: string, witness: Witness): Reaction["outcome"] {
  outcome.status = STATUS.invalid;
  outcome.witness = witness;
  outcome.message = message;
  return outcome;
}

/** ln a(CO2) of the open gas, NaN where it is closed, or why it cannot be. */
function gasTarget(solver: CaseSolver, constants: Constants): number | string {
  const { input } = solver;
  if (input.gas === "closed") return NaN;
  const isOpen = input.gas === "open";
  const given = isOpen ? input.pCO2 : input.gasPressure;
  if (Number.isNaN(given)) return "no pCO2: the reaction is open to the gas, but neither the row, the case nor an axis gives a pCO2";
  const pressure = pressureOf(given, isOpen ? input.isFraction : input.isGasFraction, input.temperature, input);
  if (!(pressure > 0)) return `the pressure of the gas, ${pressure} atm, is not above 0`;
  return constants.gasLnK + Math.log(pressure);
}

/**
 * The second state keeps every total: hydrogen's too, which keeps the charge of all species. Where a fact gave hydrogen's total exactly
 * it is kept as given; the others are what the settled state holds.
 */
function setTotals(solver: CaseSolver): void {
  const { kernel, facts, model } = solver;
  const { totals, c } = kernel.ws;
  if (!facts.charge && !facts.ANC) totals[HYDROGEN] = componentSum(model.tableau, c, HYDROGEN);
  totals[CARBON] = componentSum(model.tableau, c, CARBON);
}

function addSupplies(solver: CaseSolver): void {
  const { kernel, reaction, input, present, model } = solver;
  const { totals } = kernel.ws;
  reaction.solids.forEach((solid, place) => {
    const { nu } = model.phases[solid];
    const kind = input.supplyKind[place];
    if (kind === SUPPLY.mayForm) return;
    for (let j = 0; j < nu.length; j++) {
      if (nu[j] === 0) continue;
      if (kind === SUPPLY.finite) totals[j] += input.supplies[place] * nu[j];
      if (!present[j]) present[j] = 1;
    }
  });
}

/** Solids that can exist with the components present; of equal compositions only the one of lowest target may be at equilibrium. */
function fillAssemblage(solver: CaseSolver, constants: Constants): void {
  const { reaction, input, present, model } = solver;
  const a = reaction.assemblage;
  a.count = 0;
  reaction.solids.forEach((solid, place) => {
    const { nu } = model.phases[solid];
    for (let j = 0; j < nu.length; j++) if (nu[j] !== 0 && !present[j]) return;
    const k = a.count++;
    reaction.places[k] = place;
    a.solids[k] = solid;
    a.isExcess[k] = input.supplyKind[place] === SUPPLY.excess ? 1 : 0;
    a.mayHold[k] = 1;
    a.supplies[k] = input.supplyKind[place] === SUPPLY.finite ? input.supplies[place] : 0;
    a.targets[k] = constants.solidLnK[solid] + input.saturations[place] * Math.LN10;
  });
}

/** Two forms of one composition: only the one of lowest target can be at equilibrium, and none above it can be in excess. */
function alikeFault(solver: CaseSolver): string {
  const { reaction, model } = solver;
  const a = reaction.assemblage;
  const at = (place: number) => reaction.places.subarray(0, a.count).indexOf(place);
  for (const [first, second] of reaction.alike) {
    const p = at(first);
    const q = at(second);
    if (p < 0 || q < 0 || Math.abs(a.targets[p] - a.targets[q]) <= SAME_TARGET) continue;
    const upper = a.targets[p] > a.targets[q] ? p : q;
    a.mayHold[upper] = 0;
    if (!a.isExcess[upper]) continue;
    a.combination.fill(0);
    a.combination[p] = upper === p ? -1 : 1;
    a.combination[q] = -a.combination[p];
    a.gasCombination = 0;
    return `solids contradict: ${model.solids[a.solids[p]]} and ${model.solids[a.solids[q]]} have the same composition, and with ${model.solids[a.solids[upper]]} in excess the other would form without end`;
  }
  return "";
}

/** The reaction among the solids that no activities satisfy, with the solids named that demand it. */
function contradiction(solver: CaseSolver): string {
  const { reaction, model } = solver;
  const a = reaction.assemblage;
  const left: string[] = [];
  const right: string[] = [];
  const excess: string[] = [];
  const add = (name: string, factor: number) => {
    if (Math.abs(factor) < 1e-9) return;
    (factor < 0 ? left : right).push(`${Math.abs(Math.abs(factor) - 1) < 1e-9 ? "" : `${Number(Math.abs(factor).toPrecision(6))} `}${name}`);
  };
  for (let k = 0; k < a.count; k++) {
    add(model.solids[a.solids[k]], a.combination[k]);
    if (a.isExcess[k] && Math.abs(a.combination[k]) > 1e-9 && k !== a.culprit) excess.push(model.solids[a.solids[k]]);
  }
  add("CO2(g)", a.gasCombination);
  const culprit = model.solids[a.solids[a.culprit]];
  const why = a.isExcess[a.culprit] ? `${culprit} cannot be at its saturation too` : `${culprit} would form without end`;
  return `solids contradict: ${left.join(" + ")} = ${right.join(" + ")}, so with ${excess.join(" and ")} in excess ${why}`;
}

function solidsWitness(solver: CaseSolver): Witness {
  const { kernel, reaction, model } = solver;
  const a = reaction.assemblage;
  const used = Array.from({ length: a.count }, (_, k) => k).filter((k) => a.combination[k] !== 0);
  const hasGas = !Number.isNaN(a.xC) && a.gasCombination !== 0;
  return {
    kind: "solids", lnWater: kernel.ws.lnWater,
    phases: [...used.map((k) => model.phases[a.solids[k]]), ...(hasGas ? [kernel.holdsCarbon] : [])],
    coefficients: [...used.map((k) => a.combination[k]), ...(hasGas ? [a.gasCombination] : [])],
    targets: [...used.map((k) => a.targets[k]), ...(hasGas ? [a.xC] : [])],
    isHeld: [...used.map((k) => a.isExcess[k] === 1), ...(hasGas ? [true] : [])],
  };
}

function heldNames(solver: CaseSolver, hasGas: boolean): string {
  const { reaction, model } = solver;
  const a = reaction.assemblage;
  const names: string[] = [];
  for (let k = 0; k < a.count; k++) if (a.isHeld[k]) names.push(model.solids[a.solids[k]]);
  return [...names, ...(hasGas && names.length > 0 ? ["CO2(g)"] : [])].join(" + ");
}

function certifyReaction(solver: CaseSolver, constants: Constants, xC: number): number {
  const { kernel, reaction, present, model } = solver;
  const { ws } = kernel;
  const { claim, assemblage: a } = reaction;
  claim.c.set(ws.c);
  claim.x.set(ws.x);
  claim.present.set(present);
  claim.totals.set(ws.totals);
  claim.usesAlkalinity = false;
  claim.isFree.fill(0);
  claim.sourceCount = 0;
  claim.tieCount = 0;
  if (!Number.isNaN(xC)) claimPhase(claim, kernel.holdsCarbon, xC, a.gasAmount, true);
  for (let k = 0; k < a.count; k++) {
    claimPhase(claim, model.phases[a.solids[k]], a.targets[k], a.amounts[k], a.isExcess[k] === 1);
  }
  return certify(kernel.tableau, constants, claim);
}

function claimPhase(claim: Claim, phase: Claim["tiePhase"][number], target: number, amount: number, isHeld: boolean): void {
  const k = claim.sourceCount++;
  claim.sourceNu[k] = phase.nu;
  claim.sourceAmount[k] = amount;
  const m = claim.tieCount++;
  claim.tiePhase[m] = phase;
  claim.tieTarget[m] = target;
  claim.tieKind[m] = isHeld ? TIE.held : TIE.bounded;
  claim.tieAmount[m] = amount;
}
