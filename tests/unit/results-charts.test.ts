import { describe, expect, it } from "vitest";
import { binsOf } from "@/components/charts/histogram-bins";
import { curvesOver, MOST_CURVES, pointsOf, quantile, suggestsLog } from "@/components/charts/plot-curves";
import { sampleStarts } from "@/components/charts/plot-data";
import { extentOf, linearTicks, logTicks, scaleFor, tickLabel } from "@/components/charts/scale";

const isRound = (value: number): boolean => /^[125]0*$/.test(Math.abs(value).toExponential(9).split("e")[0].replace(".", "").replace(/0+$/, "") || "1");

describe("ticks", () => {
  it.each([[0, 1], [-3, 8.6], [6.81, 6.94], [-5000, 120_000], [1e-9, 7e-9], [-1e-3, -9e-4], [0, 1e12]])("from %d to %d lie inside, are few, and step by 1, 2 or 5", (low, high) => {
    const ticks = linearTicks(low, high, 5);
    expect(ticks.length).toBeGreaterThanOrEqual(3);
    expect(ticks.length).toBeLessThanOrEqual(9);
    const slack = (high - low) * 1e-9;
    expect(ticks.every((tick) => tick >= low - slack && tick <= high + slack)).toBe(true);
    expect(isRound(Number((ticks[1] - ticks[0]).toPrecision(6)))).toBe(true);
  });

  it("know no negative zero and no trailing rubble", () => {
    for (const tick of linearTicks(-0.3, 0.3, 6)) { expect(Object.is(tick, -0)).toBe(false); expect(String(tick).length).toBeLessThan(6); }
  });

  it.each([[200, 20_000, 350], [1e-12, 1, 350], [3, 8, 350], [1e-300, 1e300, 350], [0.5, 5000, 700]])("of a logarithm from %d to %d are 1, 2 or 5 times a power, and not too many", (low, high, pixels) => {
    const ticks = logTicks(low, high, pixels);
    expect(ticks.every(isRound)).toBe(true);
    expect(ticks.length * 30).toBeLessThan(pixels + 60);
  });

  it("are labelled shortly, with a real minus", () => {
    expect([0, -2.5, 1000, 0.2, 20_000, 1e-6, -1.5e-7, 2e7].map(tickLabel)).toEqual(["0", "−2.5", "1000", "0.2", "20000", "10⁻⁶", "−1.5×10⁻⁷", "2×10⁷"]);
  });
});

describe("a scale", () => {
  it.each([[[1, 10], false], [[5, 5], false], [[0, 0], false], [[1e16, 1e16 + 2], false], [[1, 1000], true], [[7, 7], true], [[-1, 0, 5], true], [[], false], [[], true], [[NaN, Infinity, 3], false], [[3, 3.4], true]] as [number[], boolean][])(
    "of %o (logarithm: %s) has ticks, and a place for each of its values", (values, isLog) => {
      for (const isPadded of [false, true]) {
        const scale = scaleFor(values, 60, 460, isLog, isPadded);
        expect(scale.ticks.length).toBeGreaterThan(0);
        for (const value of [...scale.ticks, ...values.filter((each) => Number.isFinite(each) && (!isLog || each > 0))]) {
          expect(scale.at(value)).toBeGreaterThan(59);
          expect(scale.at(value)).toBeLessThan(461);
        }
      }
    });

  it("runs from edge to edge, upwards where it is turned", () => {
    const scale = scaleFor([2, 8], 300, 20, false, false);
    expect([scale.at(2), scale.at(5), scale.at(8)]).toEqual([300, 160, 20]);
    const log = scaleFor([1, 100], 0, 200, true, false);
    expect(log.at(10)).toBeCloseTo(100, 9);
  });
  it("has no extent without a finite value", () => expect(extentOf([NaN, -Infinity])).toBeNull());
});

describe("a histogram", () => {
  it("counts every finite value once, edges included", () => {
    const values = Array.from({ length: 997 }, (_, k) => Math.sin(k) * 3 - 1);
    const bins = binsOf([values, [values[0], NaN, 2]])!;
    expect(bins.counts.map((own) => own.reduce((a, b) => a + b, 0))).toEqual([997, 2]);
    expect(bins.edges).toHaveLength(bins.counts[0].length + 1);
    expect(bins.edges[0]).toBeLessThanOrEqual(Math.min(...values));
    expect(bins.edges[bins.edges.length - 1]).toBeGreaterThanOrEqual(2);
  });
  it("puts a value on an edge into the class it begins", () => {
    const bins = binsOf([[0, 0.1, 0.17, 0.2, 0.3, 0.3, 2.4]])!;
    expect(bins.edges.slice(0, 4)).toEqual([0, 0.1, 0.2, 0.3]);
    expect(bins.counts[0].slice(0, 4)).toEqual([1, 2, 1, 2]);
    expect(bins.counts[0].at(-1)).toBe(1);
  });
  it.each([[[7.9, 7.9, 7.9]], [[0]], [[1e16, 1e16 + 2]]])("stands for values that are all the same: %o", (list) => {
    const bins = binsOf([list])!;
    expect(bins.counts[0].reduce((a, b) => a + b, 0)).toBe(list.length);
    expect(bins.edges.every(Number.isFinite)).toBe(true);
  });
  it("is none without values", () => expect(binsOf([[], [NaN]])).toBeNull());
});

describe("what is drawn of a job's rows", () => {
  const rows = ["A", "B", "C"].flatMap((water, w) => ["no solid", "with calcite"].flatMap((name, c) => [400, 100, 200].map((pCO2) => ({ water, case: name, pCO2, pH: 8 + w - c - pCO2 / 1000 }))));

  it("is a curve for each case, along the axis, of one water", () => {
    const { curves, left } = curvesOver(rows.filter((row) => row.water === "A"), "pCO2", "pH", [], false);
    expect(curves.map((curve) => [curve.label, curve.points.map((point) => point.x)])).toEqual([["no solid", [100, 200, 400]], ["with calcite", [100, 200, 400]]]);
    expect(left).toBe(0);
  });
  it("is the median with its range, of many", () => {
    const [curve] = curvesOver(rows, "pCO2", "pH", [], true).curves;
    expect(curve.points[0]).toEqual({ x: 100, y: 8.9 });
    expect(curve.band?.[0].low).toBeCloseTo(8.1, 9);
    expect(curve.band?.[0].high).toBeCloseTo(9.7, 9);
  });
  it("keeps the values of a second axis apart, and says how many curves it left out", () => {
    const second = { name: "T", type: "number", unit: "°C", basis: null, description: "", group: "axis" } as const;
    const crossed = Array.from({ length: 12 }, (_, T) => rows.slice(0, 3).map((row) => ({ ...row, T: T + 1e-13 * T }))).flat();
    const { curves, left } = curvesOver(crossed, "pCO2", "pH", [second], false);
    expect([curves.length, left]).toEqual([MOST_CURVES, 12 - MOST_CURVES]);
    expect([curves[0].label, curves[7].label]).toEqual(["no solid, T 0 °C", "no solid, T 11 °C"]);
    expect(curves[1].points).toHaveLength(3);
  });
  it("leaves out rows without one of the two numbers", () => expect(pointsOf([{ case: "a", x: null, y: 1 }, { case: "a", x: 2, y: 3 }], "x", "y")).toEqual([{ label: "a", points: [{ x: 2, y: 3 }] }]));
  it("takes quantiles between neighbours", () => expect([0, 0.5, 0.9, 1].map((share) => quantile([1, 2, 3, 4], share))).toEqual([1, 2.5, 3.7, 4]));
  it("takes a logarithm only of what is positive and wide", () => {
    expect(suggestsLog([200, 20_000], 30)).toBe(true);
    expect(suggestsLog([6, 9], 30)).toBe(false);
    expect(suggestsLog([-1, 1000], 30)).toBe(false);
    expect(suggestsLog([], 30)).toBe(false);
  });

  it.each([[4001, 4000], [1_000_000, 20_000], [20_001, 20_000]])("samples %d rows for %d from the first to the last, without reading one twice", (rowCount, most) => {
    const { starts, length } = sampleStarts(rowCount, most);
    expect(starts[0]).toBe(0);
    expect(starts[starts.length - 1] + length).toBe(rowCount);
    for (let k = 1; k < starts.length; k++) expect(starts[k]).toBeGreaterThanOrEqual(starts[k - 1] + length);
    expect(starts.length * length).toBeLessThanOrEqual(most);
  });
  it("reads all rows where they are few enough", () => expect(sampleStarts(2500, 4000)).toEqual({ starts: [0, 1000, 2000], length: 1000 }));
});
