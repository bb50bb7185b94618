// @vitest-environment jsdom
import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { standaloneSvg } from "@/components/charts/chart-frame";
import { CurveChart, type DrawnCurve } from "@/components/charts/curve-chart";
import { Histogram } from "@/components/charts/histogram";
import { FilterBar } from "@/components/results/filter-bar";
import { LEADING_COLUMNS } from "@/lib/schemas/columns";

class StillObserver { observe(): void {} disconnect(): void {} unobserve(): void {} }
beforeEach(() => vi.stubGlobal("ResizeObserver", StillObserver));
afterEach(() => { cleanup(); vi.unstubAllGlobals(); });

const picture = () => screen.getByRole("img");
const UNFIT = /NaN|Infinity|undefined/;
const curve = (label: string, ...points: [number, number][]): DrawnCurve => ({ label, points: points.map(([x, y]) => ({ x, y })) });
const draw = (curves: DrawnCurve[], more = {}) => render(<CurveChart curves={curves} xLabel="pCO2, ppm" yLabel="pH" isLogX={false} mark={null} title="pH over pCO2" {...more} />);

describe("a chart of curves", () => {
  it.each([
    ["one point", [curve("a", [3, 7])], {}], ["the same value throughout", [curve("a", [1, 7], [2, 7])], {}], ["missing numbers", [curve("a", [1, 7], [NaN, 8], [3, NaN], [4, Infinity], [5, 6])], {}],
    ["zero on a logarithm", [curve("a", [0, 7], [10, 8], [100, 7])], { isLogX: true }], ["below zero on both logarithms", [curve("a", [-1, -7], [10, 8], [100, 7])], { isLogX: true, isLogY: true }],
    ["an empty case beside a full one", [curve("a"), curve("b", [1, 2], [2, 3])], {}], ["points", [curve("a", [1, 2], [2, 3])], { asPoints: true }], ["numbers far apart", [curve("a", [1e-300, 1e300], [1e300, 1e-300])], { isLogX: true, isLogY: true }],
    ["a band", [{ ...curve("a", [1, 2], [2, 3]), band: [{ x: 1, low: 1, high: NaN }, { x: 1, low: 1, high: 3 }, { x: 2, low: 2, high: 4 }] }], {}],
  ] as [string, DrawnCurve[], object][])("draws %s with finite coordinates", (_, curves, more) => {
    draw(curves, more);
    expect(picture().innerHTML).not.toMatch(UNFIT);
    expect(picture().querySelectorAll("path").length).toBeGreaterThan(0);
  });

  it.each([["nothing", []], ["only missing numbers", [curve("a", [NaN, NaN])]]])("says so where there is %s to draw", (_, curves) => {
    draw(curves);
    expect(screen.queryByRole("img")).toBeNull();
    expect(screen.getByText(/No point/)).toBeTruthy();
  });

  it("tells cases apart by dash or by mark, not by colour alone, in the picture and in its legend", () => {
    const curves = ["a", "b", "c", "d", "e", "f", "g", "h"].map((label, k) => curve(label, [1, k], [2, k + 1]));
    const styles = (selector: string, of: (element: Element) => string): string[] => [...picture().querySelectorAll(selector)].map(of);
    draw(curves);
    const dashes = styles("path[stroke-width='1.8']", (path) => path.getAttribute("stroke-dasharray") ?? "");
    expect(new Set(dashes).size).toBe(curves.length);
    expect(styles("line[stroke-width='1.8']", (line) => line.getAttribute("stroke-dasharray") ?? "")).toEqual(dashes);
    cleanup();
    draw(curves, { asPoints: true });
    const marks = styles("path", (path) => `${path.getAttribute("d")?.replace(/-?[\d.]+ -?[\d.]+/, "")} ${path.getAttribute("fill") === "none"}`);
    expect(new Set(marks.slice(0, 4).map((mark) => mark.slice(0, 24) + mark.slice(-5))).size).toBe(4);
  });

  it("has a name and is told in words", () => {
    draw([curve("no solid", [400, 8.2], [4000, 7.1]), curve("with calcite", [400, 8], [4000, 7.3])]);
    expect(screen.getByRole("img", { name: "pH over pCO2" })).toBeTruthy();
    const told = document.getElementById(picture().getAttribute("aria-describedby") ?? "")?.textContent;
    expect(told).toMatch(/2 curves \(no solid; with calcite\): pH from 7.1 to 8.2 over pCO2, ppm from 400 to 4000/);
    expect(told).toMatch(/table/);
  });

  it("is saved as a document that needs no stylesheet, with its legend in it", () => {
    document.documentElement.classList.add("dark");
    draw([curve("no solid", [400, 8.2], [4000, 7.1]), curve("with calcite", [400, 8], [4000, 7.3])]);
    const text = standaloneSvg(picture() as unknown as SVGSVGElement);
    const saved = new DOMParser().parseFromString(text, "image/svg+xml");
    expect(saved.querySelector("parsererror")).toBeNull();
    expect(text).not.toMatch(/var\(/);
    expect(saved.documentElement.textContent).toContain("with calcite");
    expect(document.documentElement.classList.contains("dark")).toBe(true);
  });
});

describe("a histogram", () => {
  it("draws finite outlines, marks equilibrium, and counts in words", () => {
    render(<Histogram lists={[[-1, -0.5, 0.2, 0.4, NaN], [1.2]]} labels={["a", "b"]} xLabel="SI:calcite" title="Counts" isZeroMarked />);
    expect(picture().innerHTML).not.toMatch(UNFIT);
    expect(picture().querySelectorAll("line[stroke-dasharray='1 3']")).toHaveLength(1);
    expect(picture().querySelector("desc")?.textContent).toMatch(/^5 values/);
  });
});

describe("the conditions above the table", () => {
  const COLUMNS = [...LEADING_COLUMNS, { name: "pH", type: "number", unit: "", basis: null, description: "", group: "main" } as const];
  const bar = (where: string[] = [], serverError: string | null = null) => {
    const onChange = vi.fn();
    render(<FilterBar columns={COLUMNS} where={where} rowCount={12} total={400} isPartial={false} serverError={serverError} onChange={onChange} />);
    const field = screen.getByLabelText<HTMLInputElement>("Rows where");
    const enter = (text: string): void => { fireEvent.change(field, { target: { value: text } }); fireEvent.submit(field.form!); };
    return { field, enter, onChange };
  };

  it("takes a sound condition on Enter and is empty again; one that stands already is not doubled", () => {
    const { field, enter, onChange } = bar(["pH > 7"]);
    enter("ph>7");
    expect(onChange).not.toHaveBeenCalled();
    enter("status = invalid");
    expect(onChange).toHaveBeenCalledWith(["pH > 7", "status = invalid"]);
    expect(field.value).toBe("");
  });
  it("keeps a faulty one and says why, until it is changed", () => {
    const { field, enter, onChange } = bar();
    enter("pX > 7");
    expect(screen.getByRole("alert").textContent).toMatch(/Did you mean “pH”/);
    expect(field.getAttribute("aria-invalid")).toBe("true");
    expect(field.value).toBe("pX > 7");
    expect(onChange).not.toHaveBeenCalled();
    fireEvent.change(field, { target: { value: "p" } });
    expect(screen.getByRole("alert").textContent).toBe("");
  });
  it("shows what the server says against one", () => {
    bar(["pX > 7"], "There is no column \"pX\".");
    expect(screen.getByRole("alert").textContent).toBe("There is no column \"pX\".");
  });
  it("counts the rows that match, and takes a condition out with the focus back in the field", () => {
    const { field, onChange } = bar(["pH > 7", "status = ok"]);
    expect(screen.getByRole("status").textContent).toBe("12 of 400 rows");
    fireEvent.click(screen.getByRole("button", { name: "Take out: pH > 7" }));
    expect(onChange).toHaveBeenCalledWith(["status = ok"]);
    expect(document.activeElement).toBe(field);
  });
});
