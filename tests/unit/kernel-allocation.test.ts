import { setFlagsFromString } from "node:v8";
import { runInNewContext } from "node:vm";
import { expect, it } from "vitest";
import { makeCaseSolver } from "@/lib/chemistry/case-solver";
import { CLOSURE } from "@/lib/kernel/kernel";
import { type Facts, makeSettleResult, settle } from "@/lib/kernel/settle";
import { BECK, makeCase, makeJob, makeWater } from "@/tests/unit/kernel-fixtures";

setFlagsFromString("--expose-gc");
const collect = runInNewContext("gc") as () => void;

it("the kernel's loop allocates nothing per row beyond a few boxed numbers", () => {
  const kase = makeCase();
  const solver = makeCaseSolver(makeJob([makeWater(BECK)], [kase]), kase);
  solver.solve(makeWater(BECK), 0); // fills constants, totals and presence
  const { kernel, present } = solver;
  const xC = kernel.ws.x[1];
  const facts: Facts = { closure: CLOSURE.balanceGas, present, usesAlkalinity: false, xH: NaN, xC, solid: -1, solidTarget: NaN, maxIterations: 100 };
  const result = makeSettleResult();
  const run = (rows: number) => {
    for (let k = 0; k < rows; k++) {
      facts.xC = xC + 1e-3 * (k % 100);
      settle(kernel, facts, result);
      if (result.outcome !== "solved") throw new Error(result.outcome);
    }
  };
  run(20000); // until compiled
  // The least of three: what else the process does meanwhile can only add.
  const perRow = Math.min(...Array.from({ length: 3 }, () => {
    collect();
    const before = process.memoryUsage().heapUsed;
    run(2000);
    return (process.memoryUsage().heapUsed - before) / 2000;
  }));
  // One array per row of the smallest useful size would be above 200 bytes; a workspace per row some 10,000.
  expect(perRow).toBeLessThan(150);
});
