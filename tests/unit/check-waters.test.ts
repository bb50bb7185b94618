/** Findings about analyses on their way in, which never alter or refuse data. */
import { describe, expect, it, test } from "vitest";
import { checkWaters } from "@/lib/chemistry/resolve-job";

type Row = Record<string, unknown>;

/** Cations and anions in meq/L, half of each in calcium and alkalinity. */
const balanced = (cations: number, anions: number): Row => ({
  temperature: 10, pH: 7.5, Ca: `${cations / 2} meq/L`, Mg: `${cations / 4} meq/L`, Na: `${cations / 4} meq/L`, Cl: `${anions / 4} meq/L`, SO4: `${anions / 4} meq/L`, alkalinity: anions / 2,
});
const codes = (row: Row, units?: Record<string, string>): string[] => checkWaters([row], units).map(({ code }) => code);

describe("the ion balance", () => {
  // Standard Methods 1030 E: anions 0–3 meq/L ±0.2 meq/L, 3–10 meq/L ±2 %, 10–800 meq/L ±5 % of the sum.
  test.each<[number, number, boolean]>([
    [2.19, 2, true], [2.21, 2, false], [1.81, 2, true], [1.79, 2, false], [0.25, 0.1, true], [3.15, 2.96, true], [3.17, 2.96, false], [5.19, 5, true], [5.22, 5, false], [4.82, 5, true], [4.79, 5, false], [22, 20, true], [22.2, 20, false], [18.2, 20, true], [18, 20, false],
  ])("of %d meq/L cations to %d meq/L anions is acceptable: %s", (cations, anions, isAcceptable) => {
    expect(codes(balanced(cations, anions)).includes("ion-balance")).toBe(!isAcceptable);
  });

  it("says how poor it is, in per cent of the sum, with both sums and the side to look at", () => {
    const [issue] = checkWaters([{}, balanced(6, 4)]).filter(({ code }) => code === "ion-balance");
    expect(issue.pointer).toBe("/1");
    expect(issue.message).toContain("20.0 % of the sum (cations 6.00, anions 4.00 meq/L). Anions are missing");
    expect(checkWaters([balanced(4, 6)])[0].message).toContain("-20.0 % of the sum (cations 4.00, anions 6.00 meq/L). Cations are missing");
  });

  it("counts hydrogen ions, labile aluminium of acid water and organic anions", () => {
    const acid = { temperature: 8, pH: 4, Ca: "0.1 meq/L", Mg: "0.1 meq/L", Na: "0.1 meq/L", Cl: "0.2 meq/L", SO4: "0.45 meq/L" };
    expect(codes(acid)).toContain("ion-balance");
    expect(codes({ ...acid, Al: "60 umol/L" })).toEqual([]);
    expect(codes({ ...balanced(2.4, 2), DOC: 50 })).toEqual([]);
  });

  it("is not judged without alkalinity, save of acid water", () => {
    expect(codes({ ...balanced(6, 4), alkalinity: null })).toEqual([]);
  });
});

describe("an incomplete analysis", () => {
  it("is named with what is missing", () => {
    const [issue] = checkWaters([{ ...balanced(4, 4), Na: null, Cl: undefined }]);
    expect(issue).toMatchObject({ pointer: "/0", code: "incomplete" });
    expect(issue.message).toContain("Na, Cl are not given");
  });

  it("is none where the water is given by pH and alkalinity alone", () => expect(codes({ temperature: 8, pH: 7.9, alkalinity: 2.7 })).toEqual([]));
});

describe("the conductivity", () => {
  test.each<[number, boolean]>([[400, true], [300, true], [540, true], [290, false], [545, false], [4, false]])("of %d µS/cm goes with 4 meq/L of either side: %s", (conductivity, isFitting) => {
    expect(codes({ ...balanced(4, 4), conductivity }).includes("conductivity")).toBe(!isFitting);
  });
});

describe("single values", () => {
  test.each<[Row, string, string]>([
    [{ temperature: 8, Ca: -3 }, "/0/Ca", "negative-amount"], [{ temperature: 8, Ca: "x" }, "/0/Ca", "unreadable-quantity"], [{ temperature: 8, pCO2: 0 }, "/0/pCO2", "out-of-range"], [{ temperature: 8, pressure: 0 }, "/0/pressure", "out-of-range"],
    [{}, "/0", "no-temperature"], [{ temperature: 60 }, "/0/temperature", "unusual-temperature"], [{ temperature: 8, pH: 2 }, "/0/pH", "unusual-pH"], [{ temperature: 8, pH: 12 }, "/0/pH", "unusual-pH"],
  ])("of %j are pointed at", (row, pointer, code) => expect(checkWaters([row])).toMatchObject([{ pointer, code }]));

  it("are read in the columns' default units, and the rows stay as they were", () => {
    const rows = [Object.freeze({ ...balanced(4, 4), Ca: 1 })];
    expect(checkWaters(rows, { Ca: "mmol/L" })).toEqual([]);
    expect(codes(rows[0])).toContain("ion-balance");
  });
});
