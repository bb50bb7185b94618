import { describe, expect, it } from "vitest";
import { buildModel } from "@/lib/chemistry/chemistry-model";
import { certify, type Claim, makeClaim, TIE } from "@/lib/kernel/certificate";
import { makeCaseSolver } from "@/lib/chemistry/case-solver";
import { BECK, makeCase, makeJob, makeWater, meeting } from "@/tests/unit/kernel-fixtures";

/** A solved state with calcite held, as a claim, so that each part of it can be spoiled in turn. */
function solvedClaim(): { claim: Claim; check: () => number } {
  const kase = makeCase(meeting("open", { calcite: "excess", gibbsite: "may-form", gypsum: "may-form" }));
  const solver = makeCaseSolver(makeJob([makeWater(BECK)], [kase]), kase);
  solver.solve(makeWater(BECK), 0);
  expect(solver.message).toBe("");
  const { claim } = solver.reaction;
  return { claim, check: () => certify(solver.model.tableau, solver.kernel.ws.constants, claim) };
}

describe("the certificate", () => {
  it("passes a solved state", () => {
    expect(solvedClaim().check()).toBeLessThan(1e-12);
  });
  it("shows any concentration that is off by one part in a million", () => {
    const { claim, check } = solvedClaim();
    for (let i = 0; i < claim.c.length; i++) {
      if (claim.c[i] === 0) continue;
      const kept = claim.c[i];
      claim.c[i] *= 1 + 1e-6;
      expect(check(), `species ${i}`).toBeGreaterThan(9e-7);
      claim.c[i] = kept;
    }
  });
  it("shows any activity, total or amount that is off", () => {
    const { claim, check } = solvedClaim();
    for (let j = 0; j < claim.x.length; j++) {
      if (!claim.present[j]) continue;
      claim.x[j] += 1e-6;
      expect(check(), `activity ${j}`).toBeGreaterThan(9e-7);
      claim.x[j] -= 1e-6;
      const total = claim.totals[j];
      claim.totals[j] += 1e-6 * Math.max(Math.abs(total), 1e-3);
      expect(check(), `total ${j}`).toBeGreaterThan(1e-8);
      claim.totals[j] = total;
    }
    claim.sourceAmount[1] *= 1 + 1e-6; // calcite
    expect(check()).toBeGreaterThan(1e-8);
  });
  it("shows a solid above its target, a negative amount, and a solid there below its target", () => {
    const { claim, check } = solvedClaim();
    const gypsum = claim.tieKind.indexOf(TIE.bounded); // undersaturated: none of it there
    const target = claim.tieTarget[gypsum];
    const amount = claim.tieAmount[gypsum];
    claim.tieTarget[gypsum] = target - 100;
    expect(check()).toBeGreaterThan(1);
    claim.tieTarget[gypsum] = target;
    claim.tieAmount[gypsum] = -1e-3;
    expect(check()).toBeGreaterThan(0.1);
    claim.tieAmount[gypsum] = 1e-3;
    expect(check()).toBeGreaterThan(0.1);
    claim.tieAmount[gypsum] = amount;
    expect(check()).toBeLessThan(1e-12);
  });
  it("is not a number where a concentration is none", () => {
    const { claim, check } = solvedClaim();
    claim.c[1] = NaN;
    expect(check()).toBeNaN();
  });
  it("starts empty and of the tableau's size", () => {
    const { tableau } = buildModel(makeCase());
    const claim = makeClaim(tableau, 3);
    expect([claim.c.length, claim.x.length, claim.tieAmount.length]).toEqual([tableau.speciesCount, tableau.componentCount, 3]);
  });
});
