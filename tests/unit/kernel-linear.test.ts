import { describe, expect, it } from "vitest";
import { compensatedDot, eliminate, solveDense } from "@/lib/kernel/linear";

describe("dense elimination", () => {
  it("solves a system whose first pivot is zero", () => {
    const a = Float64Array.from([0, 2, 1, 1, 1, 1, 4, 0, -1]);
    const b = Float64Array.from([7, 6, 1]);
    expect(solveDense(a, b, 3, 3)).toBe(true);
    expect(Array.from(b)).toEqual([1, 2, 3].map((v) => expect.closeTo(v, 12)));
  });
  it("says so when the matrix is singular", () => {
    expect(solveDense(Float64Array.from([1, 2, 2, 4]), Float64Array.from([1, 2]), 2, 2)).toBe(false);
  });
});

describe("elimination of held phases", () => {
  it("prefers the wanted pivot and reduces to the identity there", () => {
    const rows = [Float64Array.from([-2, 1, 1, 0]), Float64Array.from([-4, 2, 1, 1])];
    const result = eliminate(rows, 4, [2, 3, 1, 0], [2, 3]);
    if ("dependentRow" in result) throw new Error("independent rows were called dependent");
    expect(result.pivots).toEqual([2, 3]);
    expect(result.free).toEqual([0, 1]);
    expect([result.reduced[2], result.reduced[3], result.reduced[6], result.reduced[7]]).toEqual([1, 0, 0, 1]);
  });
  it("names the row that depends on the others, with its coefficients", () => {
    // calcite + celestite = gypsum + strontianite, in Ca, Sr, C, SO4
    const rows = [[1, 0, 1, 0], [0, 1, 0, 1], [1, 0, 0, 1], [0, 1, 1, 0]].map((r) => Float64Array.from(r));
    const result = eliminate(rows, 4, [0, 1, 2, 3]);
    if (!("dependentRow" in result)) throw new Error("dependent rows were called independent");
    expect(result.dependentRow).toBe(3);
    expect(Array.from(result.coefficients)).toEqual([1, 1, -1]);
  });
});

describe("compensated sums", () => {
  it("keep a trace beside totals that cancel", () => {
    const a = Float64Array.from([0.1, 1e-19, -0.1, 0.3, -0.3]);
    expect(compensatedDot(a, new Float64Array(5).fill(1), 5)).toBe(1e-19);
  });
});
