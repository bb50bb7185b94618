import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { SPECIES } from "@/lib/chemistry/data";
import type { ActivityModel, ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";
import { bindGamma } from "@/lib/kernel/evaluate";
import { CLOSURE, makeKernel } from "@/lib/kernel/kernel";
import { makeSettleResult, settle } from "@/lib/kernel/settle";
import type { Tableau } from "@/lib/kernel/tableau";
import { closing, isClose, makeCase, makeJob, makeWater, meeting, solveAll, solveOne } from "@/tests/unit/kernel-fixtures";

const seed = 20261201;
const amount = (low: number, high: number) => fc.double({ min: Math.log10(low), max: Math.log10(high), noNaN: true }).map((v) => 10 ** v);
const KEYS = ["Na", "K", "NH4", "Ca", "Mg", "Sr", "Ba", "Al", "Cl", "NO3", "NO2", "SO4", "F", "PO4", "Si"] as const;
const totals = fc.record(Object.fromEntries(KEYS.map((k) => [k, amount(1e-12, 0.02)])), { requiredKeys: [] }) as fc.Arbitrary<Record<string, number>>;
const activity = fc.constantFrom<ActivityModel>("ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones");
const water: fc.Arbitrary<Partial<ResolvedWater>> = fc.record({
  totals, temperature: fc.double({ min: 0, max: 90, noNaN: true }), pCO2: amount(1e-6, 1).map((atm) => ({ atm })), DIC: amount(1e-8, 0.02),
  DOC: amount(0.1, 40), ANC: fc.double({ min: -0.005, max: 0.02, noNaN: true }), pH: fc.double({ min: 3, max: 10, noNaN: true }),
});
const organic = fc.constantFrom<ResolvedCase["organic"]>(
  { model: "none", pKa: [], sitesPerMgC: 0 }, { model: "oliver-1983", pKa: [], sitesPerMgC: 1e-5 },
  { model: "hruska-2003", pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 },
);
const pair = fc.constantFrom<["charge" | "ANC" | "pH", "pCO2" | "DIC"]>(["charge", "pCO2"], ["charge", "DIC"], ["ANC", "pCO2"], ["ANC", "DIC"], ["pH", "pCO2"], ["pH", "DIC"]);
const runs = (numRuns: number) => ({ seed, numRuns });

/** Charge of a species by name, for sums that share nothing with the solver. */
const chargeOf = (name: string) => Object.values(SPECIES).find((s) => s.name === name)?.charge ?? Number.NaN;
const atomsOf = (name: string, element: string) => Object.values(SPECIES).find((s) => s.name === name)?.composition[element] ?? 0;

describe("every water that has a state", () => {
  it("gets one, certified, from any convex pair of facts, activity model and organic model", () => {
    fc.assert(fc.property(water, pair, activity, organic, (w, [a, b], model, acids) => {
      const row = solveOne(w, { ...closing(a, b), activity: model, organic: acids }, ["pH"]);
      if (row.status === "invalid") expect(row.message).toContain("no finite solution"); // a held pH and pCO2 may ask for more than water holds
      else { expect(row.status).toBe("ok"); expect(row.residual).toBeLessThan(1e-10); }
    }), runs(300));
  });
  it("gets the same one from the sure path as from Newton's method", () => {
    fc.assert(fc.property(water, pair, activity, organic, (w, [a, b], model, acids) => {
      const kase = { ...closing(a, b), activity: model, organic: acids };
      const fast = solveOne(w, kase, ["pH", "DIC", "ionicStrength"]);
      // Two steps are too few for Newton, so the nested search answers.
      const sure = solveOne(w, kase, ["pH", "DIC", "ionicStrength"], { solver: { tolerance: 1e-10, maxIterations: 2 } });
      expect(sure.status).toBe(fast.status);
      if (fast.status !== "ok") return;
      expect(Math.abs(sure.values.pH - fast.values.pH)).toBeLessThan(1e-8);
      expect(isClose(sure.values.ionicStrength, fast.values.ionicStrength, 1e-8)).toBe(true);
    }), runs(150));
  });
  it("is electroneutral when closed on charge", () => {
    fc.assert(fc.property(water, activity, (w, model) => {
      const row = solveOne(w, { ...closing("charge", "DIC"), activity: model }, ["species"]);
      let sum = 0;
      let size = 0;
      for (const [column, c] of Object.entries(row.values)) {
        const z = chargeOf(column.slice("conc:".length));
        sum += z * c;
        size += Math.abs(z) * c;
      }
      expect(Math.abs(sum)).toBeLessThan(1e-11 * size);
    }), runs(100));
  });
  it("keeps every element", () => {
    fc.assert(fc.property(water, activity, (w, model) => {
      const row = solveOne(w, { ...closing("charge", "DIC"), activity: model }, ["species"]);
      for (const [key, element] of [["Ca", "Ca"], ["Mg", "Mg"], ["Al", "Al"], ["F", "F"], ["SO4", "S"], ["PO4", "P"], ["Si", "Si"], ["Na", "Na"]] as const) {
        const given = w.totals?.[key] ?? 0;
        let sum = 0;
        for (const [column, c] of Object.entries(row.values)) sum += atomsOf(column.slice("conc:".length), element) * c;
        expect(isClose(sum, given, 1e-10), `${key}: ${sum}, not ${given}`).toBe(true);
      }
    }), runs(100));
  });
});

describe("reactions", () => {
  const solids = fc.dictionary(fc.constantFrom("calcite", "gypsum", "fluorite", "gibbsite", "barite", "amorphous silica", "celestite"), fc.oneof(fc.constantFrom("excess" as const, "may-form" as const), amount(1e-6, 1e-2)), { maxKeys: 4 });
  it("keep the charge of all species, and every metal apart from what solids brought or took", () => {
    fc.assert(fc.property(water, solids, fc.constantFrom("open" as const, "closed" as const), activity, (w, set, gas, model) => {
      const kase = { ...closing("charge", "pCO2"), activity: model, ...meeting(gas, set) };
      const row = solveOne(w, kase, ["dissolved", "solids", "SI", "DIC", "gas:CO2", "chargeError", "ionicStrength"]);
      if (row.status !== "ok") { expect(row.message).toMatch(/solids contradict|no finite solution/); return; }
      const before = solveOne(w, { ...kase, react: null }, ["DIC"]);
      const of = (name: string) => (row.values[`solid:${name}`] ?? 0) / 1e3;
      const scale = (x: number) => 1e-9 * (x + Math.abs(of("calcite")) + Math.abs(of("gypsum")) + Math.abs(of("fluorite")));
      const calcium = row.values["dissolved:Ca"] - (w.totals?.Ca ?? 0) - of("calcite") - of("gypsum") - of("fluorite");
      expect(Math.abs(calcium)).toBeLessThanOrEqual(scale(row.values["dissolved:Ca"]));
      const carbon = row.values.DIC - before.values.DIC - of("calcite") - row.values["gas:CO2"] / 1e3;
      expect(Math.abs(carbon)).toBeLessThanOrEqual(scale(row.values.DIC + before.values.DIC + Math.abs(row.values["gas:CO2"]) / 1e3));
      for (const [name, supply] of Object.entries(set)) {
        const SI = row.values[`SI:${name}`];
        if (supply === "excess") expect(SI).toBeCloseTo(0, 8);
        else if (!Number.isNaN(SI)) expect(SI).toBeLessThan(1e-9);
        if (supply === "may-form") expect(of(name)).toBeLessThanOrEqual(0);
        if (typeof supply === "number") expect(of(name)).toBeLessThanOrEqual(supply * (1 + 1e-9));
      }
    }), runs(150));
  });
  it("end where they end whatever was there first: what dissolved from nothing does not dissolve further", () => {
    fc.assert(fc.property(water, (w) => {
      const first = solveOne(w, meeting("open", { calcite: "excess", gibbsite: "may-form" }), ["solid:calcite", "pH"]);
      const supplied = Math.max(first.values["solid:calcite"] / 1e3, 0);
      const again = solveOne(w, meeting("open", { calcite: supplied * 2 + 1e-9, gibbsite: "may-form" }), ["pH"]);
      expect(Math.abs(again.values.pH - first.values.pH)).toBeLessThan(1e-8);
    }), runs(60));
  });
});

describe("order and units", () => {
  it("rows know nothing of each other: any order of waters gives the same bytes", () => {
    fc.assert(fc.property(fc.array(water, { minLength: 2, maxLength: 6 }), fc.nat(), (waters, turn) => {
      const list = waters.map((w, k) => makeWater({ ...w, id: `${k}` }));
      const turned = list.map((_, k) => list[(k + turn) % list.length]);
      const kase = makeCase(meeting("open", { calcite: "may-form" }));
      const straight = solveAll(makeJob(list, [kase], { report: ["pH", "species"] }));
      const other = solveAll(makeJob(turned, [kase], { report: ["pH", "species"] }));
      expect(other).toEqual(turned.map((w) => straight[Number(w.id)]));
    }), runs(30));
  });
  it("the kernel has no scale of its own: other units of amount give the same chemistry", () => {
    // H, C, a metal M with pairs M + C and M + 2C − H, hydroxide, all ideal.
    const nu = Float64Array.from([1, 0, 0, 0, 1, 0, 0, 0, 1, -1, 0, 0, -1, 1, 0, 0, 1, 1, -1, 2, 1]);
    const classes = { count: 1, isIdeal: true, squaredCharge: new Float64Array(1), ionSize: new Float64Array(1), slope: new Float64Array(1), relativeSlope: 0, hydrogenMultiple: new Float64Array(1), hydrogenClass: 0 };
    const tableau: Tableau = {
      componentCount: 3, speciesCount: 7, nu, water: new Float64Array(7), charge: Float64Array.from([1, 0, 2, -1, -1, 2, 1]), componentCharge: Float64Array.from([1, 0, 2]),
      alkalinity: new Float64Array(7), gammaClass: new Int32Array(7), gamma: classes, varying: -1, varyingAcid: -1, varyingFit: [0, 0, 0],
    };
    const solve = (lnK: number[], T: number[]) => {
      const kernel = makeKernel(tableau, []);
      kernel.ws.constants = { lnK: Float64Array.from(lnK), solidLnK: new Float64Array(0), gasLnK: 0, debyeA: 0.5, debyeB: 0.33 };
      bindGamma(tableau, kernel.ws);
      kernel.ws.totals.set(T);
      const result = makeSettleResult();
      settle(kernel, {
        closure: CLOSURE.balanceTotal, present: Uint8Array.from([1, 1, 1]), usesAlkalinity: false, xH: NaN, xC: NaN, solid: -1, solidTarget: NaN, maxIterations: 100,
      }, result);
      expect(result.outcome).toBe("solved");
      return Array.from(kernel.ws.c);
    };
    const lnK = fc.tuple(fc.double({ min: -40, max: -25, noNaN: true }), fc.double({ min: -20, max: -10, noNaN: true }), fc.double({ min: 0, max: 10, noNaN: true }), fc.double({ min: -15, max: 5, noNaN: true }));
    fc.assert(fc.property(lnK, amount(1e-6, 1e-2), amount(1e-9, 1e-2), fc.double({ min: -1e-3, max: 1e-3, noNaN: true }), amount(1e-2, 1e2), (k, C, M, H, s) => {
      const K = [0, 0, 0, ...k];
      const plain = solve(K, [H, C, M]);
      // c' = s·c needs K' = K·s^(1 − Σν).
      const scaled = solve(K.map((v, i) => v + (1 - (nu[i * 3] + nu[i * 3 + 1] + nu[i * 3 + 2])) * Math.log(s)), [H * s, C * s, M * s]);
      scaled.forEach((c, i) => expect(isClose(c, plain[i] * s, 1e-8)).toBe(true));
    }), runs(200));
  });
});
