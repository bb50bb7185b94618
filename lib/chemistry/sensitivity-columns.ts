/** The derivative of each result column from a tangent of the last state of the row, in the column's own unit per base unit of the input. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { conductivityIons, unconservedMetals } from "@/lib/chemistry/column-weights";
import { totalAnalytes } from "@/lib/chemistry/row-inputs";
import { hasSupply, type SensitivityInput } from "@/lib/chemistry/sensitivity-seeds";
import type { Stage } from "@/lib/chemistry/sensitivity-stages";
import type { Constants } from "@/lib/kernel/tableau";
import { componentSum } from "@/lib/kernel/evaluate";
import { CARBON, HYDROGEN } from "@/lib/kernel/kernel";
import type { Tangent } from "@/lib/kernel/derivative";

const LN10 = Math.LN10;
const MICRO = 1e6;
const MILLI = 1e3;

/** Everything a column's derivative is read from. */
export interface Moved { stage: Stage; tangent: Tangent; constants: Constants; input: SensitivityInput }
export type ColumnSlope = (moved: Moved) => number;

/** @throws Error for a name that is no column: the spec's check lets none through. */
export function columnSlope(name: string, solver: CaseSolver): ColumnSlope {
  const main = mainSlopes(solver)[name];
  if (main) return main;
  const colon = name.indexOf(":");
  const of = name.slice(colon + 1);
  const { model } = solver;
  const i = model.species.indexOf(of);
  switch (name.slice(0, colon)) {
    case "conc": return i < 0 ? () => 0 : ({ tangent }) => tangent.c[i];
    case "lgActivity": return i < 0 ? () => NaN : activitySlope(i, solver);
    case "SI": return saturationSlope(model.solids.indexOf(of), solver);
    case "solid": return solidSlope(model.solids.indexOf(of), solver);
    case "gas": return ({ stage, tangent }) => 0 - amountSlope(stage, tangent, (tie) => tie.holds === "gas") * MILLI;
    case "dissolved": {
      const component = of === "DIC" ? CARBON : totalAnalytes(model).find((a) => a.key === of)?.component ?? -1;
      return ({ tangent }) => componentSum(model.tableau, tangent.c, component);
    }
    default: throw new Error(`report: ${name} is no column`);
  }
}

const amountSlope = (stage: Stage, tangent: Tangent, isIt: (tie: Stage["ties"][number]) => boolean): number => {
  const k = stage.kind === "reacted" ? stage.ties.findIndex(isIt) : -1;
  return k < 0 ? 0 : tangent.amounts[k];
};

function solidSlope(solid: number, solver: CaseSolver): ColumnSlope {
  return ({ stage, tangent, input }) => {
    if (stage.kind !== "reacted") return 0;
    const supplied = input.what === "supply" && input.solid === solid && hasSupply(solver, solid) ? 1 : 0;
    return (supplied - amountSlope(stage, tangent, (tie) => tie.holds === "solid" && tie.solid === solid)) * MILLI;
  };
}

function activitySlope(i: number, { model }: CaseSolver): ColumnSlope {
  const { tableau } = model;
  const n = tableau.componentCount;
  if (model.data[i] === null) return ({ stage, tangent }) => tangent.c[i] / stage.state.c[i] / LN10;
  return ({ tangent, constants }) => {
    let v = constants.lnK[i] + tableau.water[i] * tangent.lnWater;
    for (let j = 0; j < n; j++) if (tableau.nu[i * n + j] !== 0) v += tableau.nu[i * n + j] * tangent.x[j];
    return v / LN10;
  };
}

function saturationSlope(k: number, { model }: CaseSolver): ColumnSlope {
  const phase = model.phases[k];
  if (!phase) return () => NaN;
  return ({ tangent, constants }) => {
    let v = phase.water * tangent.lnWater - constants.solidLnK[k];
    for (let j = 0; j < phase.nu.length; j++) if (phase.nu[j] !== 0) v += phase.nu[j] * tangent.x[j];
    return v / LN10;
  };
}

function mainSlopes(solver: CaseSolver): Record<string, ColumnSlope> {
  const { model, traits } = solver;
  const { tableau } = model;
  const total = (weights: (i: number) => number, c: Float64Array): number => {
    let v = 0;
    for (let i = 0; i < tableau.speciesCount; i++) v += weights(i) * c[i];
    return v;
  };
  const charge = (i: number) => tableau.charge[i];
  const size = (i: number) => Math.abs(tableau.charge[i]);
  const dissolved = (tangent: Tangent, component: number) => componentSum(tableau, tangent.c, component);
  const anc = (tangent: Tangent): number => {
    let v = -dissolved(tangent, HYDROGEN);
    for (let j = 1; j < traits.ancWeights.length; j++) if (traits.ancWeights[j] !== 0) v += traits.ancWeights[j] * dissolved(tangent, j);
    return v;
  };
  const sumOf = (metals: readonly { component: number; strongCharge: number }[]) => (tangent: Tangent): number =>
    metals.reduce((sum, a) => sum + a.strongCharge * dissolved(tangent, a.component), 0);
  const strong = sumOf(totalAnalytes(model).filter((a) => a.strongCharge !== 0));
  const unconserved = sumOf(unconservedMetals(solver));
  return {
    pH: ({ tangent }) => 0 - tangent.x[HYDROGEN] / LN10,
    ANC: ({ tangent }) => anc(tangent) * MICRO,
    ANCions: ({ tangent }) => strong(tangent) * MICRO,
    conservedANC: ({ tangent }) => (anc(tangent) - unconserved(tangent)) * MICRO,
    alkalinity: ({ tangent }) => total((i) => tableau.alkalinity[i], tangent.c) * MICRO,
    chargeError: ({ tangent }) => total(charge, tangent.c) * MICRO,
    balanceError: ({ stage: { state }, tangent }) => {
      const all = total(size, state.c);
      return 100 * (total(charge, tangent.c) / all - total(charge, state.c) * total(size, tangent.c) / (all * all));
    },
    DIC: ({ tangent }) => dissolved(tangent, CARBON),
    ionicStrength: ({ tangent }) => 0.5 * total((i) => tableau.charge[i] ** 2, tangent.c),
    pCO2: ({ stage: { state }, tangent, constants }) => Math.exp(state.x[CARBON] - state.constants.gasLnK) * (tangent.x[CARBON] - constants.gasLnK),
    conductivity: conductivitySlope(solver),
  };
}

function conductivitySlope({ model }: CaseSolver): ColumnSlope {
  const ions = conductivityIons(model);
  const { charge } = model.tableau;
  return ({ stage: { state }, tangent }) => {
    let strength = 0;
    let strengthSlope = 0;
    for (let i = 0; i < charge.length; i++) { strength += 0.5 * charge[i] ** 2 * state.c[i]; strengthSlope += 0.5 * charge[i] ** 2 * tangent.c[i]; }
    let sum = 0;
    let slope = 0;
    for (const ion of ions) { sum += ion.weight * state.c[ion.index]; slope += ion.weight * tangent.c[ion.index]; }
    const root = Math.sqrt(strength);
    const exponentSlope = -(0.5 / (root * (1 + root) ** 2) - 0.3) * strengthSlope;
    return (slope + sum * LN10 * exponentSlope) * 10 ** -(root / (1 + root) - 0.3 * strength);
  };
}
