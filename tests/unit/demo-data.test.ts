import { describe, expect, it } from "vitest";
import people from "@/db/demo/people.json";
import { type DemoRow, sallowmereSets } from "@/db/demo/sallowmere";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { checkWaters } from "@/lib/chemistry/resolve-job";
import { passwordIssues } from "@/lib/services/users/password-rules";
import { solveSpec } from "@/tests/outside/solve-spec";

const sets = sallowmereSets();
const rowsOf = (word: string): DemoRow[] => sets.find((set) => set.name.includes(word))?.rows ?? [];
const PLANTED = { imbalance: ["OB", "MS", "QU", "QL"], missing: ["QL", "HW"] };

describe("the demo data", () => {
  it("are the same each time", () => expect(sallowmereSets()).toEqual(sets));

  it("are about 240 analyses over three years, in four sets whose names and descriptions say that they are invented", () => {
    const rows = sets.flatMap((set) => set.rows);
    expect(rows.length).toBeGreaterThan(230);
    expect(rows.length).toBeLessThan(250);
    expect(new Set(rows.map((row) => row.id)).size).toBe(rows.length);
    expect(rows.every((row) => row.date >= "2023-11-01" && row.date <= "2026-10-31")).toBe(true);
    for (const set of sets) { expect(set.name).toContain("invented"); expect(set.description).toContain("Invented data"); }
  });

  it("are waters that a spec accepts", () => {
    for (const set of sets) {
      const { issues } = checkSpec({ spec: 1, title: "demo", waters: { rows: set.rows, units: set.units }, cases: [{ name: "c", close: ["pH", "alkalinity"], activity: "davies" }] });
      expect(issues).toEqual([]);
    }
  });

  it("hang together: by the product's own constants the ions balance, and the ions' pH under the settled CO2 is the measured one", () => {
    for (const set of sets) {
      const solved = solveSpec({
        spec: 1, title: "demo", waters: { rows: set.rows, units: set.units, missing: "zero" },
        cases: [{ name: "c", close: ["pH", "alkalinity"], activity: "davies", organic: { model: "hruska-2003" } }], report: ["balanceError", "pCO2"],
      });
      const failed = solved.filter((row) => row.status !== "ok" && !(set.name.includes("peat") || row.water.startsWith("LT")));
      expect(failed.map((row) => `${row.water}: ${row.message}`)).toEqual([]);
      const poor = solved.filter((row) => row.status === "ok" && Math.abs(row.values.balanceError) > 6);
      expect(poor.length, poor.map((row) => `${row.water} ${row.values.balanceError.toFixed(1)} %`).join(", ")).toBeLessThanOrEqual(4);
    }
  });

  it("have springs under soil CO2 that are near saturation with calcite, and brown acid peat streams", () => {
    const solved = solveSpec({
      spec: 1, title: "demo", waters: { rows: rowsOf("springs").filter((row) => Number(row.alkalinity) < 20), units: sets[0].units },
      cases: [{ name: "c", close: ["pH", "alkalinity"], activity: "davies" }], report: ["SI:calcite", "pCO2"],
    });
    for (const row of solved) { expect(Math.abs(row.values["SI:calcite"])).toBeLessThan(0.45); expect(row.values.pCO2).toBeGreaterThan(4e-3); }
    for (const row of rowsOf("peat")) expect(Number(row.pH)).toBeLessThan(6.5);
  });

  it("have planted faults that the checks find: poor balances by unit and slip, missing values, values below their limit", () => {
    const flags = sets.flatMap((set) => checkWaters(set.rows, set.units).map((issue) => set.rows[Number(/(\d+)/.exec(issue.pointer)?.[1])]));
    const flagged = new Set(flags.map((row) => row.id.slice(0, 2)));
    for (const code of PLANTED.imbalance) expect(flagged, code).toContain(code);
    const lacking = sets.flatMap((set) => set.rows).filter((row) => row.Cl === undefined || row.Mg === undefined);
    expect(lacking.map((row) => row.id.slice(0, 2)).sort()).toEqual([...PLANTED.missing].sort());
    expect(JSON.stringify(sets)).toContain("<0.05 mg/L");
  });
});

describe("the demo people", () => {
  it("have passwords of 15 characters or more that the rules take", () => {
    expect(people.map((person) => person.role).sort()).toEqual(["administrator", "analyst", "modeller"]);
    for (const { password, email } of people) { expect(password.length).toBeGreaterThanOrEqual(15); expect(passwordIssues(password, email)).toEqual([]); }
  });
});
