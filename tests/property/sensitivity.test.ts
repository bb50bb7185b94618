/** Exact derivatives against central differences of the solver itself, five points, so that the difference's own error is near 1e-9. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { inputUnit } from "@/lib/chemistry/sensitivity-names";
import type { ActivityModel, ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";
import { type Fact, makeAxis, makeCase, makeJob, makeWater, solveAll } from "@/tests/unit/kernel-fixtures";

const seed = 20261203;
const amount = (low: number, high: number) => fc.double({ min: Math.log10(low), max: Math.log10(high), noNaN: true }).map((v) => 10 ** v);
const KEYS = ["Na", "K", "NH4", "Ca", "Mg", "Sr", "Al", "Cl", "NO3", "SO4", "F", "PO4", "Si"] as const;
const water: fc.Arbitrary<Partial<ResolvedWater>> = fc.record({
  totals: fc.record(Object.fromEntries(KEYS.map((k) => [k, k === "Al" || k === "F" || k === "PO4" ? amount(1e-7, 1e-4) : amount(1e-5, 5e-3)])), { requiredKeys: ["Ca", "Na", "Cl"] }) as fc.Arbitrary<Record<string, number>>,
  temperature: fc.double({ min: 2, max: 60, noNaN: true }), pCO2: amount(1e-4, 0.05).map((atm) => ({ atm })), DIC: amount(1e-4, 0.01), DOC: amount(0.5, 20),
  ANC: amount(1e-4, 5e-3), alkalinity: amount(1e-4, 5e-3), pH: fc.double({ min: 5.8, max: 9, noNaN: true }),
  pHTemperature: fc.oneof(fc.constant(null), fc.double({ min: 5, max: 30, noNaN: true })),
});
const activity = fc.constantFrom<ActivityModel>("ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones");
const organic = fc.constantFrom<ResolvedCase["organic"]>(
  { model: "none", pKa: [], sitesPerMgC: 0 }, { model: "oliver-1983", pKa: [], sitesPerMgC: 1e-5 }, { model: "hruska-2003", pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 },
);
const pair = fc.constantFrom<[Fact, Fact]>(
  ["charge", "pCO2"], ["charge", "DIC"], ["ANC", "pCO2"], ["ANC", "DIC"], ["alkalinity", "pCO2"], ["alkalinity", "DIC"], ["pH", "pCO2"], ["pH", "DIC"],
  ["pH", "alkalinity"], ["pH", "ANC"], ["DIC", "pCO2"], ["alkalinity", "saturated"], ["pH", "saturated"],
);
const react = fc.oneof(
  fc.constant<ResolvedCase["react"]>(null),
  fc.record({
    gas: fc.constantFrom<"closed" | { atm: number }>("closed", { atm: 5e-4 }, { atm: 0.01 }),
    solids: fc.subarray(["calcite", "gypsum", "gibbsite", "amorphous silica", "fluorite"], { maxLength: 3 }).chain((names) => fc.tuple(...names.map((name) => fc.record({
      name: fc.constant(name), supply: fc.oneof(fc.constantFrom<"excess" | "may-form">("may-form", "excess"), amount(1e-5, 1e-3)), saturation: fc.constantFrom(0, 0.2), logK: fc.constant(null),
    })))),
  }),
);
const COLUMNS = [
  "pH", "ANC", "ANCions", "conservedANC", "alkalinity", "chargeError", "balanceError", "DIC", "ionicStrength", "pCO2", "conductivity", "conc:CO3^2-", "conc:Ca^2+",
  "lgActivity:CaHCO3^+", "SI:calcite", "SI:gypsum", "dissolved:Ca", "solid:calcite", "solid:gibbsite", "gas:CO2",
];
/** Inputs with a step in base units, relative or absolute. */
const INPUTS: { name: string; step: (value: number) => number; value: (w: ResolvedWater, k: ResolvedCase) => number | null }[] = [
  ...KEYS.map((key) => ({ name: key as string, step: (v: number) => 1e-3 * v, value: (w: ResolvedWater) => w.totals[key] ?? null })),
  ...(["alkalinity", "ANC", "DIC", "DOC"] as const).map((key) => ({ name: key as string, step: (v: number) => 1e-3 * v, value: (w: ResolvedWater) => w[key] })),
  { name: "pCO2", step: (v) => 2e-3 * v, value: (w) => (w.pCO2 as { atm: number }).atm },
  { name: "pH", step: () => 2e-3, value: (w) => w.pH },
  { name: "temperature", step: () => 0.05, value: (w) => w.temperature },
  { name: "pHTemperature", step: () => 0.05, value: (w) => w.pHTemperature },
  { name: "close/SI", step: () => 2e-3, value: (_, k) => k.close.saturated?.SI ?? null },
  { name: "react/gas", step: (v) => 2e-3 * v, value: (_, k) => (k.react && typeof k.react.gas === "object" && "atm" in k.react.gas ? k.react.gas.atm : null) },
  { name: "organic/sites", step: (v) => 2e-3 * v, value: (_, k) => (k.organic.model === "none" ? null : k.organic.sitesPerMgC) },
  { name: "react/solids/calcite/saturation", step: () => 2e-3, value: (_, k) => k.react?.solids.find((s) => s.name === "calcite")?.saturation ?? null },
  { name: "react/solids/calcite/supply", step: (v) => 1e-3 * v, value: (_, k) => { const s = k.react?.solids.find((each) => each.name === "calcite")?.supply; return typeof s === "number" ? s : null; } },
  { name: "constants/calcite/logK", step: () => 2e-3, value: () => -8.45 },
  { name: "constants/HCO3^-/logK", step: () => 2e-3, value: () => -6.4 },
  { name: "constants/CO3^2-/logK", step: () => 2e-3, value: () => -10.4 },
  { name: "constants/CO2(g)/logK", step: () => 2e-3, value: () => -1.4 },
  { name: "constants/CaSO4(aq)/logK", step: () => 2e-3, value: () => 2.25 },
];

/** What rounding in a column is relative to, where it is a sum or a logarithm that may come to nothing: the water's ions, or 1. */
function sizeOf(column: string, ionicStrength: number): number {
  if (["ANC", "ANCions", "conservedANC", "alkalinity", "chargeError"].includes(column)) return 1e6 * ionicStrength;
  if (/^(solid|gas):/.test(column)) return 1e3 * ionicStrength;
  return column === "balanceError" ? 100 : /^(pH|SI:.*|lgActivity:.*)$/.test(column) ? 1 : 0;
}

interface Checked { compared: number; misses: string[] }

function compareWater(w: Partial<ResolvedWater>, kase: ResolvedCase, inputs: typeof INPUTS): Checked {
  const full = makeWater(w);
  const found: Checked = { compared: 0, misses: [] };
  for (const input of inputs) {
    const value = input.value(full, kase);
    if (value === null) continue;
    const h = input.step(value);
    const rows = solveAll(makeJob([full], [kase], {
      axes: [makeAxis(input.name, [value - 2 * h, value - h, value, value + h, value + 2 * h])],
      report: [...COLUMNS, ...COLUMNS.map((column) => `d:${column}/${input.name}`)], solver: { tolerance: 1e-10, maxIterations: 100 },
    }));
    if (rows.some((row) => row.status !== "ok")) continue;
    // Saturation may ask for hundreds of atmospheres; near where it stops being possible a difference says nothing.
    if (rows[2].values.pCO2 > 1 || rows[2].values.ionicStrength > 0.5) continue;
    const { factor } = inputUnit(input.name, {}).scale;
    // Where a solid comes or goes within the stencil, the function has a corner there and no derivative.
    const kinds = rows.map((row) => ["calcite", "gypsum", "gibbsite", "amorphous silica", "fluorite"].map((s) => `${Math.abs(row.values[`SI:${s}`] ?? 1) < 1e-8}`).join());
    if (kase.react && new Set(kinds).size > 1) continue;
    for (const column of COLUMNS) {
      const at = rows.map((row) => row.values[column]);
      const exact = rows[2].values[`d:${column}/${input.name}`] / factor;
      if (at.some(Number.isNaN)) continue;
      const difference = (at[0] - 8 * at[1] + 8 * at[3] - at[4]) / (12 * h);
      const coarse = (at[3] - at[1]) / (2 * h);
      // What rounding leaves in a difference, and what the stencil's own order leaves.
      const noise = 2e-12 * Math.max(...at.map(Math.abs), sizeOf(column, rows[2].values.ionicStrength)) / h;
      const scale = Math.max(Math.abs(difference), Math.abs(exact));
      const allowed = 1e-6 * scale + noise + 2e-4 * Math.abs(difference - coarse);
      found.compared++;
      if (!(Math.abs(exact - difference) <= allowed)) found.misses.push(`d:${column}/${input.name}: ${exact} exact, ${difference} by differences (noise ${noise.toExponential(1)})`);
    }
  }
  return found;
}

describe("derivatives", () => {
  it("equal central differences of the solver to 1e-6, over random waters, pairs, models, organics, gas and solids", () => {
    let compared = 0;
    fc.assert(fc.property(water, pair, activity, organic, react, fc.subarray(INPUTS, { minLength: 5, maxLength: 7 }), (w, [a, b], model, acids, met, inputs) => {
      const kase = makeCase({
        close: { facts: [a, b], saturated: b === "saturated" ? { solid: "calcite", SI: 0.1 } : null }, activity: model, organic: acids, react: met,
      });
      const { misses, compared: count } = compareWater(w, kase, inputs);
      compared += count;
      expect(misses).toEqual([]);
    }), { seed, numRuns: 150 });
    expect(compared).toBeGreaterThan(5000);
  });
});
