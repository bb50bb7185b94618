/** Why no state satisfies a pair of facts, with the figures that prove it: the errors met over the whole bracket, all of one sign. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { CLOSURE } from "@/lib/kernel/kernel";
import type { SettleResult } from "@/lib/kernel/settle";

export function noStateReason(solver: CaseSolver, settled: Pick<SettleResult, "least" | "most">): string {
  const { traits, input, facts, model } = solver;
  const isAbove = settled.least > 0;
  const balance = facts.alkalinity ? `alkalinity ${figure(input.alkalinity)} eq/kg` : facts.ANC ? `ANC ${figure(input.ANC)} eq/kg` : "electroneutrality";
  switch (traits.closure) {
    case CLOSURE.pHBalance:
      return isAbove
        ? `no state: at pH ${figure(input.pH)} the water exceeds ${balance} even without any carbon, its bases ${figure(Math.exp(settled.least))} times its acids`
        : `no state: at pH ${figure(input.pH)} no CO2 pressure brings the water to ${balance}`;
    case CLOSURE.gasTotal:
      return isAbove
        ? `no state: this pCO2 dissolves at least ${figure(Math.exp(settled.least))} times the DIC of ${figure(input.DIC)} mol/kg at any pH`
        : `no state: at no pH up to 16 does this pCO2 dissolve the DIC of ${figure(input.DIC)} mol/kg`;
    case CLOSURE.balanceSaturated: case CLOSURE.pHSaturated: {
      const name = model.solids[traits.saturatedSolid];
      const extreme = input.closeSI + (isAbove ? settled.least : settled.most) / Math.LN10;
      return isAbove
        ? `no state: ${name} is at SI ${figure(extreme)} or more at every CO2 pressure, above the SI ${figure(input.closeSI)} given`
        : `no state: ${name} reaches at most SI ${figure(extreme)} at any CO2 pressure, below the SI ${figure(input.closeSI)} given`;
    }
    default:
      return `no state: no pH between −2 and 16 gives ${balance}`;
  }
}

function figure(value: number): string {
  return Number(value.toPrecision(4)).toString();
}
