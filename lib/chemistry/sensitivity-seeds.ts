/** What one input moves in each state of a row: totals, facts held, constants. All in base units, per base unit of the input. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { SUPPLY, totalAnalytes } from "@/lib/chemistry/row-inputs";
import type { Stage } from "@/lib/chemistry/sensitivity-stages";
import { debyeTemperatureSlopes, fractionSlopes, logKSlope, pressureOfFraction } from "@/lib/chemistry/temperature";
import type { Seed, Tangent } from "@/lib/kernel/derivative";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, HYDROGEN } from "@/lib/kernel/kernel";

const LN10 = Math.LN10;

export interface SensitivityInput {
  name: string;
  /** Component of an analyte's total, or −1. */
  component: number;
  /** Printed reaction whose log K it is, or −1. */
  reaction: number;
  /** Solid and what of it, for "react/solids/<solid>/<what>". */
  solid: number;
  what: string;
  /** A gas counted as a dry mole fraction. */
  isDryFraction: boolean;
}

export function readInput(solver: CaseSolver, name: string, isDryFraction: boolean): SensitivityInput {
  const { model, kase } = solver;
  const ofSolid = /^react\/solids\/(.+)\/(saturation|supply|logK)$/.exec(name);
  const ofConstant = /^constants\/(.+)\/logK$/.exec(name);
  const isListed = ofSolid !== null && (kase.react?.solids.some((s) => s.name === ofSolid[1]) ?? false);
  const constant = ofConstant?.[1] ?? (isListed && ofSolid?.[2] === "logK" ? ofSolid[1] : null);
  return {
    name, isDryFraction,
    component: totalAnalytes(model).find((a) => a.key === name)?.component ?? -1,
    reaction: constant === null ? -1 : model.reactionIndex.get(constant) ?? -1,
    solid: isListed && ofSolid ? model.solids.indexOf(ofSolid[1]) : -1, what: ofSolid?.[2] ?? "",
  };
}

export function makeSeed(solver: CaseSolver, mostTies: number): Seed {
  const { tableau, phases } = solver.model;
  return {
    totals: new Float64Array(tableau.componentCount), targets: new Float64Array(mostTies),
    constants: { lnK: new Float64Array(tableau.speciesCount), solidLnK: new Float64Array(phases.length), gasLnK: 0, debyeA: 0, debyeB: 0 },
  };
}

/** Fills the seed of a stage. @param before tangent of the stage before; null for the first. */
export function fillSeed(solver: CaseSolver, input: SensitivityInput, stage: Stage, before: Tangent | null, seed: Seed): void {
  fillConstants(solver, input, stage, seed);
  fillTotals(solver, input, stage, before, seed);
  seed.targets.fill(0);
  stage.ties.forEach((tie, k) => {
    if (tie.holds === "pH") seed.targets[k] = input.name === "pH" ? -LN10 : 0;
    else if (tie.holds === "gas") seed.targets[k] = seed.constants.gasLnK + gasSlope(solver, input, stage);
    else seed.targets[k] = seed.constants.solidLnK[tie.solid] + (movesSaturation(input, stage, tie.solid) ? LN10 : 0);
  });
}

function movesSaturation(input: SensitivityInput, stage: Stage, solid: number): boolean {
  return stage.kind === "reacted" ? input.what === "saturation" && input.solid === solid : input.name === "close/SI";
}

/** Tangent of model.constantsAt: by temperature where the constants set rules, or by one printed log K. */
function fillConstants(solver: CaseSolver, input: SensitivityInput, stage: Stage, seed: Seed): void {
  const { model } = solver;
  const { constants } = seed;
  constants.lnK.fill(0); constants.solidLnK.fill(0);
  constants.gasLnK = 0; constants.debyeA = 0; constants.debyeB = 0;
  const isTemperature = input.name === stage.temperatureInput;
  if (!isTemperature && input.reaction < 0) return;
  const { overrides } = solver.input;
  const slope = (k: number): number => {
    if (!isTemperature) return k === input.reaction ? 1 : 0;
    return k < overrides.length && !Number.isNaN(overrides[k]) ? 0 : logKSlope(model.reactions[k].logK, stage.celsius);
  };
  const weighted = (terms: readonly [number, number][]): number => terms.reduce((sum, [k, factor]) => sum + factor * slope(k), 0);
  model.forms.forEach((form, k) => { constants.lnK[model.firstForm + k] = LN10 * weighted(form.logK); });
  const firstSolid = model.reactions.length - 1 - model.solids.length;
  model.solidForms.forEach((form, k) => { constants.solidLnK[k] = LN10 * (slope(firstSolid + k) - weighted(form.logK)); });
  constants.gasLnK = LN10 * slope(model.reactions.length - 1);
  if (!isTemperature || model.tableau.gamma.isIdeal) return;
  const { a, b } = debyeTemperatureSlopes(stage.celsius);
  constants.debyeA = a;
  constants.debyeB = b;
}

function fillTotals(solver: CaseSolver, input: SensitivityInput, stage: Stage, before: Tangent | null, seed: Seed): void {
  const { totals } = seed;
  const { facts, traits, model } = solver;
  if (before === null) {
    totals.fill(0);
    if (input.component >= 0) totals[input.component] = 1;
    if (model.organicComponent >= 0) totals[model.organicComponent] = organicSlope(solver, input);
    if (facts.DIC && input.name === "DIC") totals[CARBON] = 1;
    totals[HYDROGEN] = 0;
    if (facts.charge && input.component >= 0) totals[HYDROGEN] = traits.chargeWeights[input.component];
    if (facts.ANC) totals[HYDROGEN] = input.name === "ANC" ? -1 : input.component >= 0 ? traits.ancWeights[input.component] : 0;
    if (facts.alkalinity && input.name === "alkalinity") totals[HYDROGEN] = -1;
    return;
  }
  // Charge or ANC give hydrogen's total outright, and it stays; anything else hands on what the state before holds.
  if (!facts.charge && !facts.ANC) totals[HYDROGEN] = componentSum(model.tableau, before.c, HYDROGEN);
  totals[CARBON] = componentSum(model.tableau, before.c, CARBON);
  if (stage.kind !== "reacted" || input.what !== "supply" || input.solid < 0) return;
  if (!hasSupply(solver, input.solid)) return;
  const { nu } = model.phases[input.solid];
  for (let j = 0; j < nu.length; j++) totals[j] += nu[j];
}

/** Whether the row gives the solid a finite supply. */
export function hasSupply(solver: CaseSolver, solid: number): boolean {
  return solver.input.supplyKind[solver.reaction.solids.indexOf(solid)] === SUPPLY.finite;
}

function organicSlope({ input: row, model }: CaseSolver, input: SensitivityInput): number {
  if (input.name === "DOC") return row.sitesPerMgC / model.organicProtons;
  if (input.name === "organic/sites") return (Number.isNaN(row.DOC) ? 0 : row.DOC) / model.organicProtons;
  return 0;
}

/** d ln p of the held gas. */
function gasSlope(solver: CaseSolver, input: SensitivityInput, stage: Stage): number {
  const { input: row } = solver;
  const isGiven = stage.kind === "reacted" && row.gas === "given";
  const value = isGiven ? row.gasPressure : row.pCO2;
  const isFraction = isGiven ? row.isGasFraction : row.isFraction;
  const altitude = Number.isNaN(row.altitude) ? null : row.altitude;
  const pressure = Number.isNaN(row.pressureAtm) ? null : row.pressureAtm;
  const moist = (celsius: number): number => pressureOfFraction(1, celsius, altitude, pressure);
  const p = isFraction ? value * moist(stage.celsius) : value;
  // "react/gas" is the pressure the reaction meets, also where it is that of the case.
  const isOwn = input.name === "react/gas" ? stage.kind === "reacted" : input.name === "pCO2" && !isGiven;
  if (isOwn) {
    // A pressure in atm is that at the water's own temperature; a fraction is one at both.
    const own = isFraction ? moist(stage.celsius) / moist(row.temperature) : 1;
    return own * (input.isDryFraction ? moist(row.temperature) : 1) / p;
  }
  if (!isFraction) return 0;
  const slopes = fractionSlopes(value, stage.celsius, altitude, pressure);
  if (input.name === stage.temperatureInput) return slopes.temperature / p;
  if (input.name === "altitude") return slopes.altitude / p;
  return input.name === "pressure" ? slopes.pressure / p : 0;
}
