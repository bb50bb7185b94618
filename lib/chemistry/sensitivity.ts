/**
 * Derivatives of result columns by inputs, exact at the solution: the tangent of an input is carried through every state of the row
 * (settled, brought to its own temperature, reacted), each linearised once (lib/kernel/derivative.ts). Nothing is solved again.
 *
 * Buffer intensity β = dC_B/dpH (Van Slyke 1922, J. Biol. Chem. 52:525; Stumm & Morgan 1996): strong base for one unit of pH, its cation
 * left out of ionic strength and pairs. A sampled water is closed meanwhile (DIC constant); a reacted one keeps its gas and its solids.
 */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { columnSlope, type Moved } from "@/lib/chemistry/sensitivity-columns";
import { BUFFER_INTENSITY, inputUnit, parseDerivative } from "@/lib/chemistry/sensitivity-names";
import { fillSeed, makeSeed, readInput, type SensitivityInput } from "@/lib/chemistry/sensitivity-seeds";
import { closedStage, recordStages, type Stage } from "@/lib/chemistry/sensitivity-stages";
import { type Linearisation, linearise, makeLinearisation, makeTangent, solveTangent } from "@/lib/kernel/derivative";
import { HYDROGEN } from "@/lib/kernel/kernel";

export { isSensitivity } from "@/lib/chemistry/sensitivity-names";

export interface Sensitivity {
  /** Value of a "d:…/…" column, or of bufferIntensity, for the row solved last. */
  column(name: string): () => number;
}

const MILLI = 1e3;
/** A base pH slope this small, per eq/kg, is rounding: two solids and a gas hold the pH. */
const HELD = 1e-9;

/** Starts recording the rows of a solver. @param units default unit per column, as the spec gives them. */
export function makeSensitivity(solver: CaseSolver, units: Readonly<Record<string, string>>): Sensitivity {
  const { model } = solver;
  const mostTies = model.solids.length + 3;
  const readStages = recordStages(solver);
  const pool: Linearisation[] = [];
  let serial = -1;
  let stages: Stage[] = [];
  const moved = new Map<string, Moved>();
  const refresh = (): void => {
    if (serial === solver.serial) return;
    serial = solver.serial;
    stages = readStages();
    moved.clear();
    stages.forEach((stage, k) => linearise((pool[k] ??= makeLinearisation(model.tableau, mostTies)), stage.state));
  };
  const move = (input: SensitivityInput): Moved => {
    const known = moved.get(input.name);
    if (known) return known;
    const seed = makeSeed(solver, mostTies);
    let tangent = makeTangent(model.tableau, mostTies);
    stages.forEach((stage, k) => {
      fillSeed(solver, input, stage, k === 0 ? null : tangent, seed);
      const next = makeTangent(model.tableau, mostTies);
      solveTangent(pool[k], seed, next);
      tangent = next;
    });
    const result: Moved = { stage: stages[stages.length - 1], tangent, constants: seed.constants, input };
    moved.set(input.name, result);
    return result;
  };
  const bufferLinearisation = makeLinearisation(model.tableau, mostTies);
  const bufferTangent = makeTangent(model.tableau, mostTies);
  const base = makeSeed(solver, mostTies);
  base.totals[HYDROGEN] = -1;
  const bufferIntensity = (): number => {
    refresh();
    const last = stages[stages.length - 1];
    const stage = last.kind === "reacted" ? last : closedStage(solver, last);
    linearise(bufferLinearisation, stage.state);
    solveTangent(bufferLinearisation, base, bufferTangent);
    const slope = -bufferTangent.x[HYDROGEN] / Math.LN10;
    return Math.abs(slope) > HELD ? MILLI / slope : NaN;
  };
  return {
    column: (name) => {
      if (name === BUFFER_INTENSITY) return bufferIntensity;
      const { column, input } = parseDerivative(name)!;
      const { scale } = inputUnit(input, units, model.set);
      const read = readInput(solver, input, scale.isDryFraction);
      const slope = columnSlope(column, solver);
      return () => { refresh(); return slope(move(read)) * scale.factor; };
    },
  };
}
