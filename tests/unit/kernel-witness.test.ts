import { describe, expect, it } from "vitest";
import { makeCaseSolver } from "@/lib/chemistry/case-solver";
import type { ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";
import { provesContradiction, type SolidsWitness } from "@/lib/kernel/witness";
import { BECK, closing, makeCase, makeJob, makeWater, meeting } from "@/tests/unit/kernel-fixtures";

function witnessOf(water: Partial<ResolvedWater>, kase: Partial<ResolvedCase>) {
  const full = makeCase(kase);
  const solver = makeCaseSolver(makeJob([], [full]), full);
  solver.solve(makeWater(water), 0);
  return solver.witness;
}

describe("witnesses", () => {
  it("of solids that contradict: a combination that cancels in composition and not in saturation", () => {
    const sets: Record<string, "excess" | "may-form" | number>[] = [
      { aragonite: "excess", calcite: "may-form" }, { calcite: "excess", celestite: "excess", anhydrite: "excess", strontianite: "excess" }, { vaterite: "excess", aragonite: 1e-3 },
    ];
    for (const set of sets) {
      const witness = witnessOf(BECK, meeting("open", set));
      expect(witness?.kind).toBe("solids");
      expect(provesContradiction(witness as SolidsWitness)).toBe(true);
    }
  });
  it("prove nothing once a coefficient, a target or a sign is another", () => {
    const witness = witnessOf(BECK, meeting("open", { aragonite: "excess", calcite: "may-form" })) as SolidsWitness;
    expect(provesContradiction({ ...witness, coefficients: witness.coefficients.map((v, k) => (k === 0 ? v * 1.1 : v)) })).toBe(false);
    expect(provesContradiction({ ...witness, targets: witness.targets.map(() => witness.targets[0]) })).toBe(false);
    expect(provesContradiction({ ...witness, targets: [...witness.targets].reverse() })).toBe(false); // calcite the more soluble one: nothing forces it
  });
  it("of a fact that no state meets: the errors over the whole bracket, of one sign", () => {
    const witness = witnessOf({ pH: 10, ANC: 1e-5 }, closing("pH", "ANC"));
    expect(witness).toMatchObject({ kind: "scan", unknown: "carbon" });
    if (witness?.kind === "scan") expect(witness.least * witness.most).toBeGreaterThan(0);
  });
  it("of a state without a finite solution, of absent components, of input", () => {
    expect(witnessOf({ pH: 14, pCO2: { atm: 10 } }, { ...closing("pH", "pCO2"), activity: "guntelberg" })).toMatchObject({ kind: "strength", stage: "facts" });
    expect(witnessOf({ totals: { Na: 1e-3 } }, closing("charge", "saturated"))).toEqual({ kind: "absent", components: ["Ca^2+"] });
    expect(witnessOf({ temperature: null, pCO2: { atm: 4e-4 } }, {})).toEqual({ kind: "input" });
    expect(witnessOf({ DIC: 1e-5, pCO2: { atm: 1 } }, { ...closing("DIC", "pCO2"), activity: "ideal" })).toMatchObject({ kind: "gas" });
  });
  it("are not there where the row has a state", () => {
    expect(witnessOf(BECK, {})).toBeNull();
  });
});
