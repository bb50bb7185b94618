/** Whatever is thrown at the readers of specs and lines comes back as an answer, and what they pass can be solved. Seeded. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { checkSpec, MOST_ISSUES } from "@/lib/chemistry/check-spec";
import { compileJob } from "@/lib/chemistry/compile-job";
import { ANALYTES, SOLIDS, SPECIES } from "@/lib/chemistry/data";
import { parseWaterLine, specForLine } from "@/lib/chemistry/parse-water";
import { countRows, resolveJob } from "@/lib/chemistry/resolve-job";
import { completeLine, readLine } from "@/lib/commands/read-line";
import { consoleView } from "../unit/commands-fixtures";

const seeded = (numRuns: number): { seed: number; numRuns: number } => ({ seed: 20261014, numRuns });

type Plain = Record<string, unknown>;
const optional = <T>(arbitrary: fc.Arbitrary<T>): fc.Arbitrary<T | undefined> => fc.option(arbitrary, { nil: undefined, freq: 2 });
const pick = <T>(...all: T[]): fc.Arbitrary<T> => fc.constantFrom(...all);

/** Mostly a sound value, now and then an absurd one. */
const mostly = (sound: fc.Arbitrary<unknown>, ...absurd: unknown[]): fc.Arbitrary<unknown> => fc.oneof({ weight: 60, arbitrary: sound }, { weight: 1, arbitrary: pick(...absurd) });

const amount = mostly(fc.oneof(
  fc.double({ min: 0, max: 50, noNaN: true }), pick<unknown>(0, 1e-300, 5e-324, "<0.05 mg/L", "0.2 mmol/L", "1 µg/L", "3 mg/L", { value: 2, unit: "mg/L" }, { value: 0.1, below: true }),
), -1, 1e6, 1e300);
const pressure = mostly(pick<unknown>("420 ppm", "1 Pa", 0.0004, { log10: -3.4 }, "2 bar", "1e-9 atm", "<400 ppm"), { log10: 2 });
const temperature = mostly(fc.oneof(pick<unknown>(0, 10, 25, 90, "281 K"), fc.double({ min: 0, max: 90, noNaN: true })), 300, -4);
const pH = mostly(fc.double({ min: -2, max: 16, noNaN: true }), 40);
const equivalents = pick<unknown>(2.71, -0.3, "135 mg/L as CaCO3", "200 ueq/L", 0);

const row: fc.Arbitrary<Plain> = fc.record({
  id: pick<unknown>("A", "B", 3, null), temperature, pH, pHTemperature: optional(temperature), alkalinity: equivalents, ANC: equivalents, DIC: amount, pCO2: pressure,
  altitude: optional(mostly(pick<unknown>(0, 310, 8000, "1 km"), 99999)), pressure: optional(mostly(pick<unknown>("101.3 kPa", 0.5), 0)), conductivity: optional(mostly(pick<unknown>(352), -1)),
  ...Object.fromEntries(ANALYTES.filter(({ kind }) => kind === "total" || kind === "organic").map(({ key }) => [key, optional(amount)])),
}, { requiredKeys: ["temperature", "pH", "alkalinity", "ANC", "DIC", "pCO2"] }) as fc.Arbitrary<Plain>;

const solid = fc.record({
  supply: optional(pick<unknown>("excess", "may-form", "0.2 mmol/L", 0, "5 mg/L")), saturation: optional(pick(0, 0.3, -1)), logK: optional(pick(-8.4, 3)),
}, { requiredKeys: [] });
const balance = pick<unknown>("charge", "ANC", "alkalinity");
const carbon = pick<unknown>("pCO2", "DIC", { saturated: "calcite" }, { saturated: "gypsum", SI: 0.2 }, { saturated: "gibbsite" });
const pair = fc.oneof({ weight: 4, arbitrary: fc.tuple(fc.oneof(balance, pick("pH")), carbon) }, { weight: 2, arbitrary: fc.tuple(pick("pH"), balance) }, { weight: 1, arbitrary: pick<[unknown, unknown]>(["DIC", "pCO2"], ["pCO2", "DIC"]) });
const kase = fc.record({
  close: pair, activity: optional(pick("ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones")),
  organic: optional(pick<unknown>({ model: "none" }, { model: "oliver-1983" }, { model: "hruska-2003", sites: "9 ueq/mg" }, { pKa: [3, 5], sites: 8.6 }, { pKa: [4], sites: "0.05 mol/mol" })),
  complexes: optional(pick<unknown>("all", "none", ["CaHCO3^+", "AlF^2+"], [])), temperature: optional(pick<unknown>(10, 25, "290 K")), pCO2: optional(pressure),
  Ca: optional(pick<unknown>("62 mg/L", "<1 mg/L")), DOC: optional(pick(4.2, 0)), pH: optional(pick(5, 8)), DIC: optional(pick(2, 0)), altitude: optional(pick(0, 3000)),
  constants: optional(pick<unknown>({ calcite: { logK: -8.4 } }, { "CO2(g)": { logK: -1.4 }, "CaHCO3^+": { logK: 1.2 } }, { "OH^-": { logK: -14 }, quartz: { logK: -4 } })),
  react: optional(fc.record({ gas: optional(pick<unknown>("open", "closed", "420 ppm", 0.001)), solids: optional(fc.dictionary(pick("calcite", "gypsum", "gibbsite", "dolomite", "quartz", "fluorite"), solid, { maxKeys: 2, noNullPrototype: true })) }, { requiredKeys: [] })),
}, { requiredKeys: ["close"] });
const axis = pick<unknown>(
  { field: "pCO2", from: "200 ppm", to: "20000 ppm", points: 3, scale: "log" }, { field: "pCO2", values: [{ log10: -3 }, 0.1] }, { field: "Na", values: [0, 1, 10], unit: "mmol/L" },
  { field: "temperature", from: 0, to: 90, points: 3 }, { field: "pH", from: 4, to: 10, points: 2 }, { field: "ANC", from: -500, to: 500, points: 3 }, { field: "pressure", values: ["98 kPa"] },
  { field: "react/solids/calcite/saturation", values: [0, 0.5] }, { field: "react/solids/calcite/supply", values: [0, 1], unit: "mmol/L" }, { field: "react/solids/gypsum/logK", values: [-4, -5] },
  { field: "constants/calcite/logK", values: [-8, -9] }, { field: "constants/HF2^-/logK", values: [3] }, { field: "close/SI", values: [0, 1] }, { field: "organic/sites", values: [5, 10], unit: "ueq/mg" },
  { field: "react/gas", values: ["300 ppm", "500 ppm"] }, { field: "DOC", values: [0, 9] }, { field: "altitude", values: [0, 1000] }, { field: "pHTemperature", values: [5, 25] }, { field: "DIC", values: [0.5, 3] },
);
const column = pick("pH", "ANC", "ANCions", "conservedANC", "species", "activities", "SI", "solids", "dissolved", "gas:CO2", "dissolved:DIC", "dissolved:Ca", "conc:HF2^-", "solid:quartz", "lgActivity:CO3^2-", "conductivity");

/** Sound specs, whose values range from usual to absurd; an axis that would change nothing is left out. */
const spec: fc.Arbitrary<Plain> = fc.record({
  spec: fc.constant(1),
  waters: fc.record({
    rows: fc.array(row, { minLength: 1, maxLength: 3 }), missing: pick("refuse", "zero"), belowLimit: optional(pick("half", "zero", "limit")), units: optional(pick({ Ca: "mmol/L", pCO2: "ppm" }, { alkalinity: "ueq/L" })),
  }, { requiredKeys: ["rows", "missing"] }),
  cases: fc.array(kase, { minLength: 1, maxLength: 2 }).map((all) => all.map((each, index) => ({ name: `case ${index}`, ...each }))),
  vary: optional(fc.uniqueArray(axis, { maxLength: 2, selector: (each) => (each as { field: string }).field })), report: optional(fc.array(column, { maxLength: 6 })),
}, { requiredKeys: ["spec", "waters", "cases"] }).map((each) => {
  const document = JSON.parse(JSON.stringify(each)) as Plain;
  const idle = new Set(checkSpec(document).issues.map(({ pointer }) => /^\/vary\/(\d+)/.exec(pointer)?.[1]));
  return document.vary ? { ...document, vary: (document.vary as unknown[]).filter((_, index) => !idle.has(String(index))) } : document;
});

/** The same document with one place of it replaced, doubled or taken out. */
function bend(document: Plain, where: number, what: unknown): unknown {
  const copy = structuredClone(document);
  const places: [Plain, string][] = [];
  const walk = (at: unknown): void => {
    if (typeof at !== "object" || at === null) return;
    for (const key of Object.keys(at)) { places.push([at as Plain, key]); walk((at as Plain)[key]); }
  };
  walk(copy);
  const [holder, key] = places[where % places.length];
  if (what === undefined) delete holder[key];
  else holder[key] = what;
  return copy;
}

function expectIssues(document: unknown): ReturnType<typeof checkSpec> {
  const checked = checkSpec(document);
  expect(checked.issues.length).toBeLessThanOrEqual(MOST_ISSUES);
  for (const issue of checked.issues) {
    expect(issue.pointer === "" || issue.pointer.startsWith("/"), JSON.stringify(issue)).toBe(true);
    expect(issue.message.length).toBeGreaterThan(3);
    expect((issue.value ?? "").length).toBeLessThanOrEqual(80);
  }
  return checked;
}

/** @returns how many rows came out ok. */
function solveAll(document: unknown): number {
  const { spec: checked, issues } = checkSpec(document);
  if (!checked || issues.length > 0) return 0;
  const rows = (checked.waters.rows ?? []) as Plain[];
  const job = compileJob(resolveJob(checked, rows));
  expect(job.rowCount).toBe(countRows(checked, rows.length));
  const solved = job.solve(0, job.rowCount);
  for (let at = 0; at < solved.count; at++) {
    const text = solved.texts[solved.message[at]];
    expect(solved.status[at] === 0, text).toBe(text === "");
    if (solved.status[at] === 0) expect(solved.residual[at]).toBeLessThanOrEqual(1e-9);
  }
  return solved.status.filter((status) => status === 0).length;
}

describe("checkSpec", () => {
  it("answers any JSON with at most a hundred faults, each with its place", () => {
    fc.assert(fc.property(fc.json({ maxDepth: 6 }), (text) => { expect(expectIssues(JSON.parse(text)).issues.length).toBeGreaterThan(0); }), seeded(500));
  });

  it("answers a spec with any one place of it replaced or taken out", () => {
    const what = fc.oneof(fc.jsonValue({ maxDepth: 2 }), fc.constant(undefined), fc.string(), fc.bigInt().map(String), pick<unknown>(Infinity, "1e999 mg/L", { log10: 1e9 }, { value: 1, as: "constructor" }, { value: 1, unit: "toString" }, "__proto__"));
    fc.assert(fc.property(spec, fc.nat(), what, (document, where, value) => { expectIssues(bend(document, where, value)); }), seeded(500));
  });

  it("answers documents nested deeper than the stack reaches", () => {
    const deep = JSON.parse(`${"[".repeat(200_000)}${"]".repeat(200_000)}`) as unknown;
    for (const document of [deep, { spec: 1, waters: { rows: [deep, { Ca: deep }] }, cases: deep }, { spec: 1, waters: deep, cases: [deep], vary: [{ values: [deep] }] }]) expectIssues(document);
  });
});

describe("what checkSpec passes", () => {
  it("is compiled and solved without throwing, every row with a state or a reason", () => {
    let ok = 0;
    fc.assert(fc.property(spec, (document) => {
      expect(checkSpec(document).issues).toEqual([]);
      ok += solveAll(document);
    }), seeded(400));
    // Specs that all came out invalid would say nothing of the rest.
    expect(ok).toBeGreaterThan(400);
  }, 120_000);

  it("is so too when a place of it was replaced by another sound value", () => {
    const what = fc.oneof(amount, pressure, temperature, balance, carbon, column, axis);
    fc.assert(fc.property(spec, fc.nat(), what, (document, where, value) => { solveAll(bend(document, where, value)); }), seeded(400));
  }, 120_000);

  it("takes every column and every axis over a constant or a solid that exists", () => {
    const base = { spec: 1, waters: { missing: "zero", rows: [{ temperature: 10, Ca: 60, alkalinity: 3, pH: 8 }] }, cases: [{ name: "c", close: ["pH", "alkalinity"], react: { solids: Object.fromEntries(SOLIDS.map(({ name }) => [name, { supply: "may-form", saturation: 5 }])) } }] };
    const fields = [...[...SPECIES, ...SOLIDS].filter((each) => each.logK).map(({ name }) => `constants/${name}/logK`), ...SOLIDS.flatMap(({ name }) => ["saturation", "logK", "supply"].map((part) => `react/solids/${name}/${part}`))];
    for (const field of fields) {
      const document = { ...base, vary: [{ field, values: [1] }] };
      expect(checkSpec(document).issues, field).toEqual([]);
      solveAll(document);
    }
  });
});

describe("a typed line", () => {
  const word = fc.oneof(pick(...ANALYTES.flatMap(({ key, synonyms }) => [key, ...synonyms]), "pH", "pCO2", "°C", "mg/L", "as", "N", "CaCO3", "<", "=", ":", ",", ";", "\n", "8,4", "62", "-1", "try", "range", "#1", "\"", "ppm"), fc.string({ unit: "grapheme", maxLength: 8 }), fc.double().map(String));
  const line = fc.oneof(fc.array(word, { maxLength: 14 }).map((all) => all.join(" ")), fc.array(word, { maxLength: 8 }).map((all) => all.join("")), fc.string({ unit: "binary", maxLength: 60 }));

  it("is read without throwing into tokens in order within the line, and a sound spec that can be solved", () => {
    fc.assert(fc.property(line, (text) => {
      const read = parseWaterLine(text);
      let end = 0;
      for (const token of read.tokens) {
        expect(token.start).toBeGreaterThanOrEqual(end);
        expect(token.end).toBeGreaterThan(token.start);
        end = token.end;
      }
      expect(end).toBeLessThanOrEqual(text.length);
      const document = specForLine(read);
      expect(checkSpec(document).issues).toEqual([]);
      solveAll(document);
    }), seeded(600));
  }, 120_000);

  it("is completed at any caret without throwing", () => {
    const view = consoleView();
    fc.assert(fc.property(line, fc.nat(80), (text, caret) => { completeLine(text, Math.min(caret, text.length), view); readLine(text, view); }), seeded(600));
  });
});
