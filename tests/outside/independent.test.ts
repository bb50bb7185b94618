/**
 * The kernel against a second way to the same answers (independent-solver.ts): other formulation, other code, other arithmetic, constants
 * typed in a second time. Random waters over every pair of facts, activity and organic model, gas, and solid, 0–90 °C.
 */
import { beforeAll, describe, expect, it } from "vitest";
import { type PlainOutcome, strongIons } from "./independent-reaction";
import { draw, type Draw, PAIRS } from "./random-waters";
import { type SolvedRow, solveSpec } from "./solve-spec";

const SEEDS = 360;
const LEAST_COMPARED = 280;

interface Comparison { draw: Draw; solved: SolvedRow; answer: PlainOutcome | string; misses: string[] }

/** Every figure of the answer against the kernel's. Concentrations to 1e-6 of themselves, pH to 1e-8, sums to 1e-6 of their largest part. */
function compare({ state, dissolved, gasTaken }: PlainOutcome, values: Record<string, number>): string[] {
  const misses: string[] = [];
  const check = (name: string, wanted: number, tolerance: number) => {
    const got = values[name];
    if (!(Math.abs(got - wanted) <= tolerance)) misses.push(`${name}: ${got} instead of ${wanted}`);
  };
  check("pH", state.pH, 1e-8);
  check("pCO2", state.pCO2, 1e-6 * state.pCO2);
  check("DIC", state.DIC, 1e-6 * state.DIC);
  check("ionicStrength", state.ionicStrength, 1e-6 * state.ionicStrength);
  for (const [name, conc] of Object.entries(state.conc)) if (conc > 1e-20) check(`conc:${name}`, conc, 1e-6 * conc);
  const size = state.ionicStrength * 1e6 * 1e-6;
  check("ANC", (strongIons(state.totals) - state.charge) * 1e6, size);
  check("alkalinity", state.alkalinity * 1e6, size);
  check("chargeError", state.charge * 1e6, size);
  for (const [name, SI] of Object.entries(state.SI)) {
    if (SI === null) { if (!Number.isNaN(values[`SI:${name}`])) misses.push(`SI:${name}: ${values[`SI:${name}`]} where its ions are absent`); } else check(`SI:${name}`, SI, 1e-6);
  }
  for (const [name, amount] of Object.entries(dissolved)) check(`solid:${name}`, amount * 1e3, 1e-6 * Math.max(Math.abs(amount), state.ionicStrength) * 1e3);
  check("gas:CO2", gasTaken * 1e3, 1e-6 * Math.max(Math.abs(gasTaken), state.DIC) * 1e3);
  return misses;
}

describe("random waters solved a second way", () => {
  const compared: Comparison[] = [];
  const unsolvable: Comparison[] = [];

  beforeAll(() => {
    for (let seed = 1; seed <= SEEDS; seed++) {
      const each = draw(seed);
      if (!each) continue;
      const answer = each.answer();
      const [solved] = solveSpec(each.spec);
      if (typeof answer === "string") unsolvable.push({ draw: each, solved, answer, misses: [] });
      else compared.push({ draw: each, solved, answer, misses: solved.status === "ok" ? compare(answer, solved.values) : [`${solved.status}: ${solved.message}`] });
    }
  }, 180_000);

  it(`agree in every species above 1e-20 mol/kg to 1e-6 and in pH to 1e-8, over at least ${LEAST_COMPARED} waters`, () => {
    const wrong = compared.filter((each) => each.misses.length > 0);
    expect(wrong.map((each) => `seed ${each.draw.seed} (${each.draw.label}): ${each.misses.slice(0, 3).join("; ")}`)).toEqual([]);
    expect(compared.length).toBeGreaterThanOrEqual(LEAST_COMPARED);
  });

  it("were polished until the last correction was below 1e-20", () => {
    for (const { answer } of compared) expect((answer as PlainOutcome).state.lastStep).toBeLessThan(1e-20);
  });

  it("are refused by the kernel where the second way finds no state", () => {
    const wrong = unsolvable.filter((each) => each.solved.status === "ok");
    expect(wrong.map((each) => `seed ${each.draw.seed} (${each.draw.label}): ok, though ${each.answer}`)).toEqual([]);
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
