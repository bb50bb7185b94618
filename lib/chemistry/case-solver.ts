/**
 * One case, compiled: solves a water at a grid point through its stages (facts settle the water; brought closed to its own temperature;
 * met by gas and solids), each with its certificate.
 */
import { buildModel, type ChemistryModel } from "@/lib/chemistry/chemistry-model";
import { caseSolids, type InputReader, makeInputReader, type RowInput } from "@/lib/chemistry/row-inputs";
import { caseTraits, type CaseTraits, hydrogenTotal, inputFault, pressureOf, usedFacts, type UsedFacts } from "@/lib/chemistry/row-problem";
import { makeReaction, type Reaction, runReaction } from "@/lib/chemistry/row-reaction";
import { noStateReason } from "@/lib/chemistry/no-state";
import { conditioningWarning, DEPENDENT_SOLIDS, rowWarnings, severalStates } from "@/lib/chemistry/row-warnings";
import { type ResolvedCase, type ResolvedJob, type ResolvedWater, STATUS } from "@/lib/chemistry/types";
import { certify, type Claim, makeClaim, TIE } from "@/lib/kernel/certificate";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, CLOSURE, HYDROGEN, type Kernel, makeKernel } from "@/lib/kernel/kernel";
import { type Facts, makeSettleResult, refineSettled, settle, type SettleResult } from "@/lib/kernel/settle";
import type { Constants } from "@/lib/kernel/tableau";
import type { Witness } from "@/lib/kernel/witness";

/** The state of the row solved last, for the columns; valid where `status` is ok. */
export interface CaseSolver {
  model: ChemistryModel;
  kernel: Kernel;
  kase: ResolvedCase;
  traits: CaseTraits;
  facts: UsedFacts;
  input: RowInput;
  present: Uint8Array;
  reaction: Reaction;
  status: number;
  message: string;
  warnings: string[];
  /** Where the row is invalid: why, in a form that can be checked apart. */
  witness: Witness | null;
  residual: number;
  /** Newton iterations of the row. */
  iterations: number;
  /** Counts the rows begun, so that what is kept of one is not taken for the next. */
  serial: number;
  /** Where set, is shown each certified state of a row, in order; what it is shown is overwritten by the next. */
  onState: ((claim: Claim, constants: Constants) => void) | null;
  solve(water: ResolvedWater, point: number): void;
}

/** log K at the temperatures met, per case; dropped whole when it grows past this, so that a million temperatures fit. */
const MOST_TEMPERATURES = 2048;

interface Parts {
  solver: CaseSolver;
  reader: InputReader;
  claim: Claim;
  settled: SettleResult;
  settling: Facts;
  constants: Map<string | number, Constants>;
  job: ResolvedJob;
  hasConstantAxis: boolean;
}

export function makeCaseSolver(job: ResolvedJob, kase: ResolvedCase): CaseSolver {
  const model = buildModel(kase, job.constantsSet);
  const kernel = makeKernel(model.tableau, model.phases);
  const reader = makeInputReader(model, kase, job.axes);
  const traits = caseTraits(model, kase);
  const solver: CaseSolver = {
    model, kernel, kase, traits, facts: usedFacts(kase), input: reader.input, present: new Uint8Array(model.components.length),
    reaction: makeReaction(model, caseSolids(model, kase)),
    status: STATUS.ok, message: "", warnings: [], witness: null, residual: NaN, iterations: 0, serial: 0, onState: null,
    solve: (water, point) => solveRow(parts, water, point),
  };
  const parts: Parts = {
    solver, reader, job, claim: makeClaim(model.tableau, model.solids.length + 4), settled: makeSettleResult(),
    settling: {
      closure: traits.closure, present: solver.present, usesAlkalinity: false, xH: NaN, xC: NaN, solid: -1, solidTarget: NaN,
      maxIterations: job.solver.maxIterations,
    },
    constants: new Map(), hasConstantAxis: job.axes.some((a) => a.field.endsWith("/logK")),
  };
  return solver;
}

function fail(solver: CaseSolver, status: number, message: string, witness: Witness | null = null): void {
  solver.status = status;
  solver.witness = witness;
  solver.message = message;
}

function solveRow(parts: Parts, water: ResolvedWater, point: number): void {
  const { solver, job } = parts;
  solver.serial++;
  solver.status = STATUS.ok;
  solver.message = "";
  solver.warnings.length = 0;
  solver.witness = null;
  solver.residual = 0;
  solver.kernel.ws.iterations = 0;
  const input = parts.reader.read(water, point);
  const fault = water.faults.length > 0 ? water.faults.map((f) => f.message).join("; ")
    : inputFault(input, solver.traits, solver.facts, job.missing);
  if (fault) fail(solver, STATUS.invalid, fault, { kind: "input" });
  if (solver.status === STATUS.ok) settleWater(parts);
  if (solver.status === STATUS.ok && solver.kase.react) {
    const problem = runReaction(solver, constantsAt(parts, input.temperature), job.solver);
    solver.residual = Math.max(solver.residual, problem.residual);
    if (problem.status !== STATUS.ok) fail(solver, problem.status, problem.message, problem.witness);
    if (problem.isDependent) solver.warnings.push(DEPENDENT_SOLIDS);
  }
  solver.iterations = solver.kernel.ws.iterations;
  if (solver.status === STATUS.ok && !(solver.residual <= job.solver.tolerance)) {
    fail(solver, STATUS.notConverged, `the returned state is exact to ${solver.residual.toExponential(1)} only; ${job.solver.tolerance} is asked for`);
  }
  if (solver.status === STATUS.ok) rowWarnings(solver, water);
}

function constantsAt(parts: Parts, celsius: number): Constants {
  const { overrides } = parts.solver.input;
  const key = parts.hasConstantAxis ? `${celsius}/${overrides.join()}` : celsius;
  let constants = parts.constants.get(key);
  if (!constants) {
    if (parts.constants.size >= MOST_TEMPERATURES) parts.constants.clear();
    constants = parts.solver.model.constantsAt(celsius, overrides);
    parts.constants.set(key, constants);
  }
  return constants;
}

/** The sampled water: by its two facts, at the temperature of the pH where one is given, then closed at its own. */
function settleWater(parts: Parts): void {
  const { solver, settled } = parts;
  const { input, kernel, facts, model } = solver;
  const { ws } = kernel;
  const settlesAt = facts.pH && !Number.isNaN(input.pHTemperature) ? input.pHTemperature : input.temperature;
  ws.constants = constantsAt(parts, settlesAt);
  const fault = setFacts(parts, settlesAt);
  if (fault) { fail(solver, STATUS.invalid, fault.message, fault.witness); return; }
  settle(kernel, parts.settling, settled);
  if (!report(parts, "facts")) return;
  if (settled.states > 1) solver.warnings.push(severalStates(solver.kase.close.facts));
  const loose = conditioningWarning(solver);
  if (loose) solver.warnings.push(loose);
  certifySettled(parts);
  if (settlesAt === input.temperature) return;

  // Closed to the gas on the way to its own temperature: hydrogen and carbon totals of the settled state.
  if (!facts.charge && !facts.ANC || parts.settling.usesAlkalinity) ws.totals[HYDROGEN] = componentSum(model.tableau, ws.c, HYDROGEN);
  ws.totals[CARBON] = componentSum(model.tableau, ws.c, CARBON);
  ws.constants = constantsAt(parts, input.temperature);
  const f = parts.settling;
  f.closure = CLOSURE.balanceTotal; f.usesAlkalinity = false; f.xH = NaN; f.xC = NaN; f.solid = -1;
  settle(kernel, f, settled);
  if (report(parts, "own-temperature")) certifySettled(parts);
}

/** @returns false where no state was found, with status and message set. */
function report(parts: Parts, stage: "facts" | "own-temperature"): boolean {
  const { solver, settled } = parts;
  if (settled.outcome === "solved") return true;
  const facts = solver.kase.close.facts.join(" and ");
  if (settled.outcome === "no-state") {
    const { unknown, from, to, least, most } = settled;
    fail(solver, STATUS.invalid, noStateReason(solver, settled), { kind: "scan", unknown, from, to, least, most });
  } else if (settled.outcome === "no-finite-solution") {
    fail(solver, STATUS.invalid, "no finite solution: no ionic strength up to 30 mol/kg agrees with these totals and this activity model", { kind: "strength", upTo: 30, stage });
  }
  else fail(solver, STATUS.notConverged, `not converged while settling ${facts}`);
  return false;
}

/** Totals, presence and held values from the input; @returns why not, or null. */
function setFacts(parts: Parts, celsius: number): { message: string; witness: Witness } | null {
  const { solver, settling } = parts;
  const { input, kernel, present, facts, model, traits } = solver;
  const { totals, constants } = kernel.ws;
  totals.set(input.totals);
  if (model.organicComponent >= 0) {
    const sites = Number.isNaN(input.DOC) ? 0 : input.DOC * input.sitesPerMgC;
    totals[model.organicComponent] = sites / model.organicProtons;
  }
  for (let j = 2; j < totals.length; j++) present[j] = totals[j] > 0 ? 1 : 0;
  present[HYDROGEN] = 1;
  present[CARBON] = facts.DIC && !(input.DIC > 0) ? 0 : 1;
  totals[CARBON] = facts.DIC ? input.DIC : 0;
  totals[HYDROGEN] = hydrogenTotal(input, traits, facts);
  settling.closure = traits.closure;
  const hasUncounted = (traits.aluminium >= 0 && present[traits.aluminium] === 1) || (model.organicComponent >= 0 && present[model.organicComponent] === 1);
  settling.usesAlkalinity = facts.alkalinity && hasUncounted;
  settling.xH = facts.pH ? -input.pH * Math.LN10 : NaN;
  settling.xC = NaN;
  if (facts.pCO2) {
    const pressure = pressureOf(input.pCO2, input.isFraction, celsius, input);
    if (!(pressure > 0)) return { message: `pCO2 ${pressure} atm is not above 0`, witness: { kind: "input" } };
    settling.xC = constants.gasLnK + Math.log(pressure);
    if (facts.DIC) {
      const gas = Math.exp(settling.xC);
      if (!(input.DIC > 0)) return { message: "DIC is 0, which no pCO2 above 0 agrees with", witness: { kind: "gas", dissolves: gas, total: input.DIC } };
      // With salting-out the dissolved gas is a little less; the scan decides the cases in between.
      if (kernel.tableau.gamma.isIdeal && input.DIC <= gas) {
        return { message: `no state: pCO2 alone dissolves ${gas.toPrecision(4)} mol/kg of CO2, not less than the DIC of ${input.DIC.toPrecision(4)}`, witness: { kind: "gas", dissolves: gas, total: input.DIC } };
      }
    }
  }
  settling.solid = -1;
  if (facts.saturated) {
    settling.solid = traits.saturatedSolid;
    settling.solidTarget = constants.solidLnK[traits.saturatedSolid] + input.closeSI * Math.LN10;
    const lacking = model.components.filter((_, j) => model.phases[traits.saturatedSolid].nu[j] !== 0 && !present[j]);
    if (lacking.length > 0) {
      return { message: `no state: ${model.solids[traits.saturatedSolid]} needs ${lacking.join(", ")}, of which the water has none`, witness: { kind: "absent", components: lacking } };
    }
  }
  return null;
}

function certifySettled(parts: Parts): void {
  const { solver, job } = parts;
  let residual = settledResidual(parts);
  if (!(residual <= job.solver.tolerance)) {
    refineSettled(solver.kernel, parts.settling);
    residual = settledResidual(parts);
  }
  solver.residual = Math.max(solver.residual, residual);
  solver.onState?.(parts.claim, solver.kernel.ws.constants);
}

function settledResidual(parts: Parts): number {
  const { solver, claim, settling } = parts;
  const { kernel, present, model } = solver;
  const { ws } = kernel;
  const { closure } = settling;
  claim.c.set(ws.c);
  claim.x.set(ws.x);
  claim.present.set(present);
  claim.totals.set(ws.totals);
  claim.usesAlkalinity = settling.usesAlkalinity;
  claim.isFree.fill(0);
  const isCarbonTotal = closure === CLOSURE.balanceTotal || closure === CLOSURE.pHTotal || closure === CLOSURE.gasTotal;
  claim.isFree[CARBON] = isCarbonTotal ? 0 : 1;
  claim.isFree[HYDROGEN] = closure === CLOSURE.pHGas || closure === CLOSURE.pHTotal || closure === CLOSURE.pHSaturated || closure === CLOSURE.gasTotal ? 1 : 0;
  claim.sourceCount = 0;
  claim.tieCount = 0;
  if (!Number.isNaN(settling.xH)) holdTie(claim, kernel.holdsHydrogen, settling.xH);
  if (!Number.isNaN(settling.xC)) holdTie(claim, kernel.holdsCarbon, settling.xC);
  if (settling.solid >= 0) holdTie(claim, model.phases[settling.solid], settling.solidTarget);
  return certify(kernel.tableau, ws.constants, claim);
}

export function holdTie(claim: Claim, phase: Claim["tiePhase"][number], target: number): void {
  const m = claim.tieCount++;
  claim.tiePhase[m] = phase;
  claim.tieTarget[m] = target;
  claim.tieKind[m] = TIE.held;
  claim.tieAmount[m] = 0;
}

