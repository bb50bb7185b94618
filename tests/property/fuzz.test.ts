/** The fuzz of `npm run fuzz`, 20,000 rows of it: no row false or thrown, and next to none left unsolved. */
import { expect, it } from "vitest";
import { drawCase, drawWater } from "@/tests/fuzz/draw";
import { fuzz } from "@/tests/fuzz/fuzz";

const SEED = 20261201;
const ROWS = 20_000;

it(`${ROWS} rows over the whole allowed input: every ok certified anew, every invalid upheld, next to none left unsolved`, () => {
  const { tally, offenders } = fuzz({ rows: ROWS, seed: SEED });
  // Two rows of this seed (five solids at once in a brine beyond every activity model) are honestly not converged; more would be a step back.
  expect(offenders.filter((each) => each.what !== "notConverged")).toEqual([]);
  expect(tally).toMatchObject({ rows: ROWS, falseOk: 0, falseInvalid: 0, thrown: 0 });
  expect(tally.notConverged).toBeLessThanOrEqual(2);
  expect(tally.ok + tally.invalid + tally.notConverged).toBe(ROWS);
  expect(tally.ok).toBeGreaterThan(ROWS / 2);
  expect(tally.invalid).toBeGreaterThan(ROWS / 10);
}, 900_000);

it("the same seed draws the same rows", () => {
  expect(JSON.stringify([drawCase(3, 17), drawWater(3, 140)])).toBe(JSON.stringify([drawCase(3, 17), drawWater(3, 140)]));
  expect(JSON.stringify(drawWater(3, 140))).not.toBe(JSON.stringify(drawWater(4, 140)));
});
