import { describe, expect, it } from "vitest";
import { constantsQuery, constantsTable } from "@/lib/schemas/api";
import { listConstants } from "@/lib/services/constants/list";

const T0 = 273.15;

describe("the constants as data", () => {
  const table = listConstants(25, [0, 10, 25, 40]);

  it("have the shape that the API promises", () => {
    expect(constantsTable.parse(JSON.parse(JSON.stringify(table)))).toEqual(JSON.parse(JSON.stringify(table)));
    expect(table.reference).toMatchObject({ temperature: 25, pressure: "1 atm" });
    expect(table.methods.length).toBeGreaterThan(15);
  });
  it("give log K over the temperatures asked for, which their form and coefficients reproduce", () => {
    const withForm = table.entries.filter((each) => each.form !== null);
    expect(withForm.length).toBeGreaterThan(50);
    for (const { form, logKs, name } of withForm) {
      table.temperatures.forEach((celsius, k) => {
        const t = celsius + T0;
        const logK = form!.kind === "analytic" ? form!.a + form!.bT * t + form!["c/T"] / t + form!["d·log10T"] * Math.log10(t) + form!["e/T2"] / t / t
          : form!.logK25 - form!.reactionEnthalpy / (Math.LN10 * 8.314462618e-3) * (1 / t - 1 / 298.15);
        expect(Math.abs(logKs![k] - logK), name).toBeLessThan(6e-5);
      });
    }
  });
  it("are asked for by a list of temperatures, checked", () => {
    expect(constantsQuery.parse({}).temperatures).toBe("0,10,25,40");
    expect(constantsQuery.safeParse({ temperatures: "0,10,25.5" }).success).toBe(true);
    for (const wrong of ["", "0,,10", "hot", "0,91", "-1", Array.from({ length: 51 }, () => "1").join()]) expect(constantsQuery.safeParse({ temperatures: wrong }).success, wrong).toBe(false);
  });
});
