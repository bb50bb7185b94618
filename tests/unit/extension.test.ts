import { describe, expect, it } from "vitest";
import { checkSpec, readStoredSpec } from "@/lib/chemistry/check-spec";
import { compileJob } from "@/lib/chemistry/compile-job";
import { BUILT_IN } from "@/lib/chemistry/data/constants-set";
import { constantsSetOf } from "@/lib/chemistry/extension";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import { STATUS_NAMES } from "@/lib/chemistry/types";
import type { Extend } from "@/lib/schemas/extend";

type Document = Record<string, unknown>;
const ROW = { id: "a", temperature: 15, Ca: "1 mmol/L", Mg: 5, Na: "2 mmol/L", Cl: "1.2 mmol/L", SO4: "0.3 mmol/L", pCO2: "800 ppm" };
const specOf = (extend: unknown, row: Document = {}, kase: Document = {}, rest: Document = {}): Document => ({
  spec: 1, waters: { rows: [{ ...ROW, ...row }] }, cases: [{ name: "c", close: ["charge", "pCO2"], ...kase }], extend, report: ["pH", "species", "SI"], ...rest,
});

function solve(document: Document): Record<string, number>[] {
  const { issues } = checkSpec(document);
  expect(issues).toEqual([]);
  const spec = readStoredSpec(document);
  const job = compileJob(resolveJob(spec, spec.waters.rows!));
  const rows = job.solve(0, job.rowCount);
  return Array.from({ length: rows.count }, (_, at) => {
    expect(`${STATUS_NAMES[rows.status[at]]} ${rows.texts[rows.message[at]]}`).toBe("ok ");
    expect(rows.residual[at]).toBeLessThan(1e-10);
    return Object.fromEntries(job.columns.map(({ name }, k) => [name, rows.values[k][at]]));
  });
}

/** An invented ligand X with a weak acid, a pair with calcium and a solid. */
const LIGAND = {
  analytes: { X: { species: "X^-", molarMass: 120, description: "An invented ligand" } },
  species: {
    "CaX^+": { from: { "Ca^2+": 1, "X^-": 1 }, logK: 2.1, reactionEnthalpy: "5 kJ/mol", source: "invented" },
    HX: { from: { "H^+": 1, "X^-": 1 }, a: 4.2, bT: 0.001 },
  },
  solids: { xite: { into: { "Ca^2+": 1, "X^-": 2 }, formula: "CaX2", logK: -7, reactionEnthalpy: "1 kcal/mol" } },
};

describe("own species, solids and analytes", () => {
  it("stand in rows, units, cases, axes, complexes, constants, solids, saturation and report like built-in ones", () => {
    const rows = solve(specOf(LIGAND, { X: 24 }, {
      constants: { "CaX^+": { logK: 2.3 } }, complexes: ["CaX^+", "CaSO4(aq)"], react: { gas: "open", solids: { xite: { supply: "5 mg/L", saturation: 0.1 } } },
    }, { waters: { units: { X: "mg/L" }, rows: [{ ...ROW, X: 24 }] }, vary: [{ field: "X", values: [12, 24], unit: "mg/L" }], report: ["pH", "species", "activities", "SI:xite", "dissolved:X", "solid:xite", "d:pH/X", "d:SI:xite/constants/xite/logK"] }));
    expect(rows).toHaveLength(2);
    expect(rows[1]["dissolved:X"]).toBeCloseTo(24 / 120e3 + 2 * 5 / (40.078 + 240) / 1e3, 12);
    expect(rows[0]["dissolved:X"]).toBeLessThan(rows[1]["dissolved:X"]);
    expect(rows[1]["lgActivity:CaX^+"] - rows[1]["lgActivity:Ca^2+"] - rows[1]["lgActivity:X^-"]).toBeCloseTo(2.3, 10);
    expect(rows[1]).not.toHaveProperty("conc:MgSO4(aq)");
    expect(rows[1]["SI:xite"]).toBeCloseTo(2 * rows[1]["lgActivity:X^-"] + rows[1]["lgActivity:Ca^2+"] + 7 - 4.184 / (Math.LN10 * 8.314462618e-3) * (1 / 298.15 - 1 / 288.15), 9);
    expect(rows[1]["solid:xite"]).toBeCloseTo(5 / (40.078 + 240), 9);
    expect(rows[1]["d:SI:xite/constants/xite/logK"]).toBeCloseTo(-1, 9);
  });
  it("an excess solid brings its analyte, and a water may be settled by its saturation", () => {
    const [row] = solve(specOf(LIGAND, {}, { react: { gas: "open", solids: { xite: { supply: "excess" } } } }, { report: ["SI:xite", "solid:xite", "dissolved:X"] }));
    expect(row["SI:xite"]).toBeCloseTo(0, 9);
    expect(row["dissolved:X"]).toBeCloseTo(2 * row["solid:xite"] / 1e3, 12);
    const [settled] = solve(specOf({ ...LIGAND, solids: { carbonate: { into: { "Zn^2+": 1, "CO3^2-": 1 }, formula: "ZnCO3", logK: -10 } }, analytes: { Zn: { species: "Zn^2+" } }, species: {} }, { Zn: "0.02 mmol/L", pH: 7 }, { close: ["pH", { saturated: "carbonate" }] }, { report: ["SI:carbonate", "pCO2"] }));
    expect(settled["SI:carbonate"]).toBeCloseTo(0, 9);
  });
  it("give what the built-in ones give where they say the same", () => {
    // Strontium and its pairs under another name, with the built-in figures.
    const twin = {
      analytes: { Rt: { species: "Rt^2+", molarMass: 87.62, ionSize: 5, conductance: 59.5 } },
      species: { "RtHCO3^+": { from: { "Rt^2+": 1, "HCO3^-": 1 }, logK: 1.18, reactionEnthalpy: "6.05 kcal/mol" }, "RtCO3(aq)": { from: { "Rt^2+": 1, "CO3^2-": 1 }, logK: 2.81, reactionEnthalpy: "5.22 kcal/mol" } },
      solids: { rtite: { into: { "Rt^2+": 1, "CO3^2-": 1 }, formula: "RtCO3", logK: -9.271, reactionEnthalpy: "-0.4 kcal/mol" } },
    };
    const report = ["pH", "ANC", "alkalinity", "conductivity", "conservedANC"];
    const react = (name: string) => ({ activity: "debye-huckel", react: { gas: "open", solids: { [name]: { supply: "excess" } } } });
    const [own] = solve(specOf(twin, { Rt: "20 mg/L" }, react("rtite"), { report: [...report, "solid:rtite"] }));
    const [builtIn] = solve(specOf(undefined, { Sr: "20 mg/L" }, react("strontianite"), { report: [...report, "solid:strontianite"] }));
    for (const name of report) expect(Math.abs(own[name] / builtIn[name] - 1), name).toBeLessThan(1e-9);
    expect(own["solid:rtite"]).toBeCloseTo(builtIn["solid:strontianite"], 9);
  });
  it("take coefficients by name, and an anion that takes up protons for a weak one", () => {
    const set = constantsSetOf(LIGAND as Extend);
    const { logK } = set.species.find((s) => s.name === "HX")!;
    expect(logK).toMatchObject({ form: "analytic", a: 4.2, bT: 0.001 });
    expect(logK!.logK25).toBeCloseTo(4.2 + 0.29815, 10);
    expect(set.analytes.find((a) => a.key === "X")).toMatchObject({ strongCharge: 0, molarMass: 120 });
    expect(constantsSetOf({ analytes: { Br: { species: "Br^-" } } }).analytes.find((a) => a.key === "Br")).toMatchObject({ strongCharge: -1, molarMass: 79.904 });
    expect(set.species.find((s) => s.name === "CaX^+")!.isComplex).toBe(true);
    expect(set.species.find((s) => s.name === "HX")!.isComplex).toBe(false);
    expect(BUILT_IN.species.some((s) => s.name === "HX")).toBe(false);
  });
  it("do not change what a spec without them gets, nor what another spec calls by the same name", () => {
    const light = solve(specOf(LIGAND, { X: "12 mg/L" }, {}, { report: ["dissolved:X"] }))[0];
    const heavy = solve(specOf({ ...LIGAND, analytes: { X: { species: "X^-", molarMass: 240 } } }, { X: "12 mg/L" }, {}, { report: ["dissolved:X"] }))[0];
    expect(light["dissolved:X"]).toBeCloseTo(2 * heavy["dissolved:X"], 12);
    expect(checkSpec(specOf(undefined, { X: 1 })).issues.map(({ pointer, code }) => [pointer, code])).toEqual([["/waters/rows/0/X", "unknown-key"]]);
  });
});

describe("faults of an extension are all told, each at its place", () => {
  const faults = (extend: unknown) => checkSpec(specOf(extend)).issues.map(({ pointer, code }) => `${pointer} ${code}`);
  const X = { X: { species: "X^-", molarMass: 120 } };
  it.each<[string, unknown, string[]]>([
    ["charge", { analytes: X, species: { CaX: { from: { "Ca^2+": 1, "X^-": 1 }, logK: 1 } } }, ["/extend/species/CaX/from unbalanced-charge"]],
    ["elements", { analytes: X, species: { "CaX2^+": { from: { "Ca^2+": 1, "X^-": 1 }, logK: 1 } } }, ["/extend/species/CaX2^+/from unbalanced-elements"]],
    ["an unknown reactant", { species: { "CaX^+": { from: { "Ca^2+": 1, "X^-": 1 }, logK: 1 } } }, ["/extend/species/CaX^+/from/X^- unknown-species"]],
    ["a circle", { species: { "CaBr^+": { from: { "CaBr2": 1, "Br^-": -1 }, logK: 1 }, CaBr2: { from: { "CaBr^+": 1, "Br^-": 1 }, logK: 1 } }, analytes: { Br: { species: "Br^-" } } }, ["/extend/species/CaBr^+/from circular", "/extend/species/CaBr2/from circular"]],
    ["a species formed from itself", { species: { "CaNO3^+": { from: { "CaNO3^+": 1 }, logK: 1 } } }, ["/extend/species/CaNO3^+/from circular"]],
    ["a name that is taken", { species: { "CaHCO3^+": { from: { "Ca^2+": 1, "HCO3^-": 1 }, logK: 1 } }, solids: { calcite: { into: { "Ca^2+": 1, "CO3^2-": 1 }, logK: -8 } }, analytes: { pH: { species: "Br^-" }, Ca: { species: "Li^+" }, Y: { species: "Ca^2+" } } }, ["/extend/analytes/pH name-clash", "/extend/analytes/Ca name-clash", "/extend/analytes/Y/species name-clash", "/extend/species/CaHCO3^+ name-clash", "/extend/solids/calcite name-clash"]],
    ["an unknown element", { analytes: { Q: { species: "Q^-" } }, species: { "CaZz^+": { from: { "Ca^2+": 1, "Cl^-": 1 }, logK: 1 } } }, ["/extend/analytes/Q/species unknown-element", "/extend/species/CaZz^+ unknown-element"]],
    ["no log K", { species: { "CaNO3^+": { from: { "Ca^2+": 1, "NO3^-": 1 } } } }, ["/extend/species/CaNO3^+ missing"]],
    ["log K said twice", { species: { "CaNO3^+": { from: { "Ca^2+": 1, "NO3^-": 1 }, logK: 0.5, a: 2, reactionEnthalpy: 3 } } }, ["/extend/species/CaNO3^+/reactionEnthalpy contradiction", "/extend/species/CaNO3^+/logK contradiction"]],
    ["an unreadable enthalpy", { species: { "CaNO3^+": { from: { "Ca^2+": 1, "NO3^-": 1 }, logK: 0.5, reactionEnthalpy: "5 eV" } } }, ["/extend/species/CaNO3^+/reactionEnthalpy unreadable-quantity"]],
    ["coefficients by position or by a wrong name", { species: { "CaNO3^+": { from: { "Ca^2+": 1, "NO3^-": 1 }, logK: 0.5, analytic: [1, 2] } } }, ["/extend/species/CaNO3^+/analytic unknown-key"]],
    ["a name with a slash", { solids: { "a/b": { into: { "Ca^2+": 1, "CO3^2-": 1 }, logK: -8 } } }, ["/extend/solids/a~1b unreadable-name"]],
    ["an empty reaction", { solids: { nil: { into: {}, logK: -8 } } }, ["/extend/solids/nil/into missing"]],
    ["a molar mass that is not the formula's", { analytes: { Br: { species: "Br^-", molarMass: 99 } } }, ["/extend/analytes/Br/molarMass contradiction"]],
    ["a default unit that is none", { analytes: { Br: { species: "Br^-", defaultUnit: "lumps/L" } } }, ["/extend/analytes/Br/defaultUnit unknown-unit"]],
    ["a part that is not known", { minerals: {} }, ["/extend/minerals unknown-key"]],
  ])("%s", (_, extend, wanted) => { expect(faults(extend)).toEqual(wanted); });
});
