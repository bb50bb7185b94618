/** Headings of laboratory tables, with the formula that a name counts its masses in. */
import { describe, expect, it, test } from "vitest";
import { readCsv } from "@/lib/services/intake/read-csv";
import { readHeading } from "@/lib/services/intake/csv-header";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import type { JobSpec } from "@/lib/schemas/job-spec";

describe("a heading", () => {
  test.each<[string, string, string | null]>([
    ["Ca (mg/L)", "Ca", "mg/L"], ["Ca [mg/l]", "Ca", "mg/L"], ["Ca mg/L", "Ca", "mg/L"], ["Ca", "Ca", null], ["Ca2+ (mmol/L)", "Ca", "mmol/L"], ["Ca (ppm)", "Ca", "ppm"], ["Calcium (mg L-1)", "Ca", "mg/L"], ["Ca_mg/L", "Ca", "mg/L"], ["Mg (µmol/l)", "Mg", "umol/L"], ["Na (mval/L)", "Na", "meq/L"], ["K (mg/dm3)", "K", "mg/L"],
    ["SiO2 (mg/L)", "Si", "mg/L as SiO2"], ["Silica (mg/L)", "Si", "mg/L as SiO2"], ["Si (mg/L)", "Si", "mg/L"], ["SiO2 (mmol/L)", "Si", "mmol/L"], ["SiO2 (mg/L as Si)", "Si", "mg/L as Si"], ["SiO2", "Si", "mg/L as SiO2"], ["dissolved silica (ug/L)", "Si", "ug/L as SiO2"],
    ["HCO3 (mg/L)", "alkalinity", "mg/L as HCO3"], ["HCO3- (mg/L)", "alkalinity", "mg/L as HCO3"], ["Bicarbonate mg/L", "alkalinity", "mg/L as HCO3"], ["HCO3 (meq/L)", "alkalinity", "meq/L"], ["HCO3 (mmol/L)", "alkalinity", "mmol/L"], ["HCO3 (mg/L as CaCO3)", "alkalinity", "mg/L as CaCO3"], ["HCO3 (ppm)", "alkalinity", "ppm as HCO3"],
    ["Alkalinity (mg CaCO3/L)", "alkalinity", "mg/L as CaCO3"], ["Alk as CaCO3 (mg/L)", "alkalinity", "mg/L as CaCO3"], ["Alkalinity (meq/L)", "alkalinity", "meq/L"], ["NO3-N (mg/L)", "NO3", "mg/L as N"], ["NO3 (mg N/L)", "NO3", "mg/L as N"], ["NO3 (mg/L)", "NO3", "mg/L"], ["Ammonia (mg/L)", "NH4", "mg/L as NH3"], ["NH4-N", "NH4", "mg/L as N"],
  ])("%j is %s in %j", (heading, key, unit) => expect(readHeading(heading)).toEqual({ key, kind: "quantity", unit }));

  test.each([["pH", "pH"], ["Temp (°C)", "temperature"], ["EC (µS/cm)", "conductivity"], ["Sample", "id"], ["Sampling date", "date"]])("%j is the row's %s", (heading, key) => expect(readHeading(heading)).toMatchObject({ key, unit: null }));

  it("that names nothing known is null", () => expect(readHeading("Turbidity (NTU)")).toBeNull());
});

describe("a table", () => {
  it("comes out in moles counted as its headings say", () => {
    const { rows, units, issues } = readCsv(new TextEncoder().encode("Sample,Temp (°C),SiO2 (mg/L),HCO3 (mg/L),NO3-N (mg/L),F (mg/L)\nB-03,8.4,8,165,1.4,<0.05\n"));
    expect(issues).toEqual([]);
    const spec = { spec: 1, waters: { units }, cases: [] } as unknown as JobSpec;
    const [water] = resolveJob(spec, rows).waters;
    expect(water.faults).toEqual([]);
    expect(water.totals.Si).toBeCloseTo(8e-3 / 60.083, 12);
    expect(water.alkalinity).toBeCloseTo(165e-3 / 61.016, 12);
    expect(water.totals.NO3).toBeCloseTo(1.4e-3 / 14.007, 12);
    expect(water.totals.F).toBeCloseTo(0.025e-3 / 18.998, 12);
  });
});
