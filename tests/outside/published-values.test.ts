/**
 * The product against values from outside (published-checks.ts), and the table of them with the deviations found, written for the docs to
 * lib/chemistry/data/checks.json. The file changes only where a figure does.
 */
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { CONSTANTS_VERSION } from "@/lib/chemistry/data";
import { allowed, PUBLISHED_CHECKS } from "./published-checks";
import { solveOneWater } from "./solve-spec";

const TABLE = path.resolve("lib/chemistry/data/checks.json");
const digits = (value: number, count: number) => Number(value.toPrecision(count));
const results = PUBLISHED_CHECKS.map((check) => ({ check, found: check.find() }));

describe.each([...new Set(PUBLISHED_CHECKS.map(({ topic }) => topic))])("published: %s", (topic) => {
  const own = results.filter(({ check }) => check.topic === topic);
  it.each(own.map(({ check, found }) => [`${check.what}: ${digits(check.value, 5)} ${check.unit} ± ${digits(allowed(check), 2)}`, check, found] as const))("%s", (_, check, found) => {
    expect(Math.abs(found - check.value), `found ${found}`).toBeLessThanOrEqual(allowed(check));
  });
});

describe("the table of published values", () => {
  it("names each check once, with source, tolerance and the reason for it, and stands beside the constants for the docs", () => {
    expect(new Set(PUBLISHED_CHECKS.map(({ what }) => what)).size).toBe(PUBLISHED_CHECKS.length);
    for (const { source, because } of PUBLISHED_CHECKS) { expect(source.length).toBeGreaterThan(2); expect(because.length).toBeGreaterThan(10); }
    const rows = results.map(({ check, found }) => ({
      topic: check.topic, what: check.what, unit: check.unit, source: check.source, fromMemory: check.fromMemory, value: digits(check.value, 6), tolerance: digits(allowed(check), 3),
      because: check.because, found: digits(found, 5), deviation: digits(found - check.value, 2),
    }));
    const text = `{\n"constantsVersion": ${JSON.stringify(CONSTANTS_VERSION)},\n"checks": [\n${rows.map((row) => JSON.stringify(row)).join(",\n")}\n]\n}\n`;
    if (!existsSync(TABLE) || readFileSync(TABLE, "utf8") !== text) writeFileSync(TABLE, text);
    expect(JSON.parse(readFileSync(TABLE, "utf8")).checks).toHaveLength(PUBLISHED_CHECKS.length);
  });
});

describe("what the published figures do not go together with", () => {
  it.each([[0, 10.317], [10, 10.179], [25, 10.012], [30, 9.966]])("the tabulated sodium–carbonate pairs bring the carbonate buffer down by up to 0.18 at %d °C (pH %d)", (temperature, pH) => {
    const found = solveOneWater({ temperature, Na: "75 mmol/L", DIC: "50 mmol/L" }, { close: ["charge", "DIC"], activity: "davies", complexes: "all" }, ["pH"]).pH;
    expect(found).toBeLessThan(pH);
    expect(found).toBeGreaterThan(pH - 0.185);
  });
});

describe("a stream over limestone (common practice, no source), ideal activities, open to 10^-3.38 atm", () => {
  it.each([8, 9, 10])("strong-ion ANC 2358 µeq/L and no solid at %d °C: pH about 8.4", (temperature) => {
    const found = solveOneWater({ temperature, ANC: "2358 ueq/L" }, { close: ["ANC", "pCO2"], pCO2: { log10: -3.38 }, activity: "ideal" }, ["pH", "ANC"]);
    expect(Math.abs(found.pH - 8.4)).toBeLessThan(0.1);
    expect(found.ANC).toBeCloseTo(2358, 6);
  });

  it.each([8, 9, 10])("at equilibrium with calcite (log K −8.4), conserved sum −260.6 µeq/L, at %d °C: pH about 8.15", (temperature) => {
    const found = solveOneWater({ temperature, ANC: "-260.6 ueq/L" }, {
      close: ["ANC", "pCO2"], pCO2: { log10: -3.38 }, activity: "ideal", constants: { calcite: { logK: -8.4 } },
      react: { gas: "open", solids: { calcite: { supply: "excess" } } },
    }, ["pH", "ANC", "conservedANC", "dissolved:Ca"]);
    expect(Math.abs(found.pH - 8.15)).toBeLessThan(0.05);
    expect(found.conservedANC).toBeCloseTo(-260.6, 6);
    expect(found.ANC).toBeCloseTo(found["dissolved:Ca"] * 2e6 - 260.6, 6);
  });
});
