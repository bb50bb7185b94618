/**
 * The kernel against a second way to the same answers (independent-solver.ts): other formulation, other code, other arithmetic, constants
 * typed in a second time. Random waters over every pair of facts, activity and organic model, gas, and solid, 0–90 °C.
 */
import { beforeAll, describe, expect, it } from "vitest";
import { type Comparison, compareSeed } from "./independent-compare";
import type { PlainOutcome } from "./independent-reaction";
import { PAIRS } from "./random-waters";

/** The first seeds here; `npm run verify` goes on to 2,000 waters. */
const SEEDS = 128;
const LEAST_COMPARED = 100;

describe("random waters solved a second way", () => {
  const compared: Comparison[] = [];
  const unsolvable: Comparison[] = [];

  beforeAll(() => {
    for (let seed = 1; seed <= SEEDS; seed++) {
      const each = compareSeed(seed);
      if (each) (typeof each.answer === "string" ? unsolvable : compared).push(each);
    }
  }, 180_000);

  it(`agree to 1e-8 in every species above 1e-20 mol/kg, in pH and every other column, over at least ${LEAST_COMPARED} waters`, () => {
    const wrong = compared.filter((each) => each.misses.length > 0);
    expect(wrong.map((each) => `seed ${each.seed} (${each.label}): ${each.misses.slice(0, 3).join("; ")}`)).toEqual([]);
    expect(compared.length).toBeGreaterThanOrEqual(LEAST_COMPARED);
  });

  it("were polished until the last correction was below 1e-20", () => {
    for (const { answer } of compared) expect((answer as PlainOutcome).state.lastStep).toBeLessThan(1e-20);
  });

  it("are refused by the kernel where the second way finds no state", () => {
    expect(unsolvable.filter((each) => each.misses.length > 0).map((each) => `seed ${each.seed} (${each.label}): ${each.misses[0]}`)).toEqual([]);
  });

  it("cover every pair of facts, every model and organic model, gas and kind of supply", () => {
    const text = compared.map((each) => JSON.stringify(each.draw.spec)).join("\n");
    for (const [a, b] of PAIRS) {
      const pair = [a, b].map((name) => (name === "saturated" ? `\\{"saturated":[^}]*\\}` : `"${name}"`)).join(",");
      expect(text, `${a} with ${b}`).toMatch(new RegExp(`"close":\\[${pair}\\]`));
    }
    for (const word of ["ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones", "oliver-1983", "hruska-2003", "driscoll-1994", "pKa"]) expect(text).toContain(`"${word}"`);
    for (const word of ['"gas":"closed"', '"gas":"open"', " atm", '"supply":"excess"', '"supply":"may-form"', "mmol/L", '"calcite"', '"gypsum"', '"gibbsite"', '"pHTemperature"']) expect(text).toContain(word);
  });
});
