/** What the settled water then meets: gas and solids. Totals, presence and targets for the kernel's assemblage, and its certificate. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import type { ChemistryModel } from "@/lib/chemistry/chemistry-model";
import { SUPPLY } from "@/lib/chemistry/row-inputs";
import { pressureOf } from "@/lib/chemistry/row-problem";
import { type ResolvedJob, STATUS } from "@/lib/chemistry/types";
import { type Assemblage, makeAssemblage, solveAssemblage } from "@/lib/kernel/assemblage";
import { certify, type Claim, makeClaim, TIE } from "@/lib/kernel/certificate";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, HYDROGEN } from "@/lib/kernel/kernel";
import type { Constants } from "@/lib/kernel/tableau";

export interface Reaction {
  /** Model indices of the case's solids, ascending. */
  solids: number[];
  /** Pairs of positions in `solids` of equal composition. */
  alike: [number, number][];
  assemblage: Assemblage;
  /** Position in `solids` of each solid of the assemblage. */
  places: Int32Array;
  claim: Claim;
  /** Dissolved by solid of the case (formed: negative) and CO2 taken up, mol/kg. */
  dissolved: Float64Array;
  gasTaken: number;
  outcome: { status: number; message: string; residual: number };
}

export function makeReaction(model: ChemistryModel, caseSolids: readonly { index: number }[]): Reaction {
  const solids = caseSolids.map((s) => s.index);
  const alike: [number, number][] = [];
  for (let a = 0; a < solids.length; a++) {
    for (let b = a + 1; b < solids.length; b++) {
      if (model.phases[solids[a]].nu.every((v, j) => v === model.phases[solids[b]].nu[j])) alike.push([a, b]);
    }
  }
  return {
    solids, alike, assemblage: makeAssemblage(solids.length), places: new Int32Array(solids.length),
    claim: makeClaim(model.tableau, solids.length + 2), dissolved: new Float64Array(solids.length), gasTaken: 0,
    outcome: { status: STATUS.ok, message: "", residual: 0 },
  };
}

/** Solves the second state from the first, which stands in the workspace. */
export function runReaction(solver: CaseSolver, constants: Constants, settings: ResolvedJob["solver"]): Reaction["outcome"] {
  const { kernel, reaction, input, present } = solver;
  const { outcome, assemblage } = reaction;
  outcome.status = STATUS.ok;
  outcome.message = "";
  outcome.residual = 0;
  reaction.gasTaken = 0;
  reaction.dissolved.fill(0);
  kernel.ws.constants = constants;
  const xC = gasTarget(solver, constants);
  if (typeof xC === "string") return refuse(outcome, xC);
  setTotals(solver);
  if (!Number.isNaN(xC)) present[CARBON] = 1;
  addSupplies(solver);
  fillAssemblage(solver, constants);
  const fault = alikeFault(solver);
  if (fault) return refuse(outcome, fault);
  assemblage.present = present;
  assemblage.xC = xC;
  assemblage.maxIterations = settings.maxIterations;
  const result = solveAssemblage(kernel, assemblage);
  if (result === "dependent") return refuse(outcome, `the set ${heldNames(solver, !Number.isNaN(xC))} is not supported yet: the compositions of these depend on each other`);
  if (result === "no-finite-solution") return refuse(outcome, "no finite solution: no ionic strength up to 30 mol/kg agrees with this reaction and this activity model");
  if (result === "failed") {
    outcome.status = STATUS.notConverged;
    outcome.message = `not converged while reacting with ${heldNames(solver, !Number.isNaN(xC)) || "the gas"}`;
    return outcome;
  }
  for (let k = 0; k < assemblage.count; k++) {
    const place = reaction.places[k];
    const supply = input.supplyKind[place] === SUPPLY.finite ? input.supplies[place] : 0;
    reaction.dissolved[place] = supply - assemblage.amounts[k];
  }
  reaction.gasTaken = 0 - assemblage.gasAmount; // not −0
  outcome.residual = certifyReaction(solver, constants, xC);
  return outcome;
}

function refuse(outcome: Reaction["outcome"], message: string): Reaction["outcome"] {
  outcome.status = STATUS.invalid;
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
    a.targets[k] = constants.solidLnK[solid] + input.saturations[place] * Math.LN10;
  });
}

/** Targets of alike solids closer than this (ln units) are equal: which of them exists is then undecided. */
const SAME_TARGET = 1e-9;

function alikeFault(solver: CaseSolver): string {
  const { reaction, model } = solver;
  const a = reaction.assemblage;
  const at = (place: number) => reaction.places.subarray(0, a.count).indexOf(place);
  for (const [first, second] of reaction.alike) {
    const p = at(first);
    const q = at(second);
    if (p < 0 || q < 0) continue;
    const names = `${model.solids[a.solids[p]]} and ${model.solids[a.solids[q]]}`;
    if (Math.abs(a.targets[p] - a.targets[q]) < SAME_TARGET) return `the set ${names} at one and the same saturation is not supported yet: how much of each forms is undecided`;
    const upper = a.targets[p] > a.targets[q] ? p : q;
    if (a.isExcess[upper]) return `solids contradict: ${names} have the same composition, and with ${model.solids[a.solids[upper]]} in excess the other would form without end`;
    a.mayHold[upper] = 0;
  }
  return "";
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
  solver.onState?.(claim, constants);
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
