import { describe, expect, it } from "vitest";
import { makeCaseSolver } from "@/lib/chemistry/case-solver";
import { assembleJacobian, evaluateSystem } from "@/lib/kernel/evaluate";
import { generateCode, SOLVES_BEFORE_CODE } from "@/lib/kernel/generated";
import { buildSystem, type System } from "@/lib/kernel/system";
import { BECK, makeCase, makeJob, makeWater, meeting, solveAll } from "@/tests/unit/kernel-fixtures";

/** A solver with the beck's state in its workspace, and a system over its tableau. */
function settled(given: Parameters<typeof makeCase>[0]) {
  const kase = makeCase(given);
  const solver = makeCaseSolver(makeJob([makeWater(BECK)], [kase]), kase);
  solver.solve(makeWater(BECK), 0);
  const { kernel } = solver;
  const system = buildSystem(kernel.tableau, { present: Uint8Array.from(solver.present), phases: [kernel.holdsCarbon], sources: [kernel.holdsCarbon.nu], usesAlkalinity: false, pivots: [] });
  if ("dependent" in system) throw new Error("dependent");
  return { solver, system };
}

describe("generated code", () => {
  it.each([["davies", {}], ["ideal activities", { activity: "ideal" as const }], ["Truesdell–Jones", { activity: "truesdell-jones" as const }], ["organic acids", { organic: { model: "hruska-2003" as const, pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 } }]])(
    "gives the bits of the loops it stands for: %s", (_name, given) => {
      const { solver, system } = settled(given);
      const { ws } = solver.kernel;
      for (let s = 0; s < system.species.length; s++) ws.base[s] = ws.constants.lnK[system.species[s]];
      for (let a = 0; a < system.size; a++) { ws.balanceTotal[a] = ws.totals[system.rowComponent[a]]; ws.y[a] = ws.x[system.free[a]]; }
      const read = (form: "log" | "bordered", each: System) => {
        evaluateSystem(each, ws);
        const order = assembleJacobian(each, ws, form);
        return { cs: ws.cs.slice(0, each.species.length), plus: ws.plus.slice(), minus: ws.minus.slice(), matrix: ws.matrix.slice(0, order * order), I: ws.sumI, M: ws.sumM };
      };
      for (const form of ["log", "bordered"] as const) expect(read(form, { ...system, code: generateCode(system) })).toEqual(read(form, { ...system, code: null }));
    });

  it("is made after some hundred solves, and rows before and after are the same", () => {
    const waters = Array.from({ length: SOLVES_BEFORE_CODE * 2 }, () => makeWater(BECK));
    const rows = solveAll(makeJob(waters, [makeCase(meeting("open", { calcite: "excess" }))], { report: ["species", "pH", "SI"] }));
    for (const row of rows) expect(row).toEqual(rows[0]);
  });

  it("is not made where an exponent follows the pH", () => {
    const { system } = settled({ organic: { model: "oliver-1983", pKa: [], sitesPerMgC: 1e-5 } });
    expect(generateCode(system)).toBeNull();
  });
});
