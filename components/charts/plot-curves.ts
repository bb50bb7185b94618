/** From rows to what is drawn: a list for each case, curves over an axis, the middle of many waters. Pure. */
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { DrawnCurve } from "./curve-chart";
import type { PlotRow } from "./plot-data";
import { tickLabel } from "./scale";

/** More curves than this are a thicket. */
export const MOST_CURVES = 8;

/** One list for each label, in order of appearance. */
export function byLabel<T>(rows: readonly PlotRow[], labelOf: (row: PlotRow) => string, pick: (row: PlotRow) => T | null): { labels: string[]; lists: T[][] } {
  const lists = new Map<string, T[]>();
  for (const row of rows) {
    const value = pick(row);
    if (value === null) continue;
    const label = labelOf(row);
    const list = lists.get(label);
    if (list) list.push(value); else lists.set(label, [value]);
  }
  return { labels: [...lists.keys()], lists: [...lists.values()] };
}

export const caseOf = (row: PlotRow): string => String(row.case ?? "");

const valueText = (value: PlotRow[string]): string => (typeof value === "number" ? tickLabel(Number(value.toPrecision(4))) : String(value ?? ""));

const pairOf = (x: string, y: string) => (row: PlotRow): { x: number; y: number } | null => {
  const [a, b] = [row[x], row[y]];
  return typeof a === "number" && typeof b === "number" ? { x: a, y: b } : null;
};

/** Points of each case. */
export function pointsOf(rows: readonly PlotRow[], x: string, y: string): DrawnCurve[] {
  const { labels, lists } = byLabel(rows, caseOf, pairOf(x, y));
  return labels.map((label, k) => ({ label, points: lists[k] }));
}

/** The value at a share of a sorted list, between its neighbours. */
export function quantile(sorted: readonly number[], share: number): number {
  const at = share * (sorted.length - 1);
  const below = Math.floor(at);
  const next = sorted[Math.min(sorted.length - 1, below + 1)];
  return sorted[below] + (at - below) * (next - sorted[below]);
}

/** Middle of the values at each x, and the range that eight of ten lie in. */
function middleOf(points: readonly { x: number; y: number }[]): Pick<DrawnCurve, "points" | "band"> {
  const columns = new Map<number, number[]>();
  for (const { x, y } of points) {
    const list = columns.get(x);
    if (list) list.push(y); else columns.set(x, [y]);
  }
  const sorted = [...columns].sort(([a], [b]) => a - b).map(([x, values]) => ({ x, values: values.sort((a, b) => a - b) }));
  return {
    points: sorted.map(({ x, values }) => ({ x, y: quantile(values, 0.5) })),
    band: sorted.map(({ x, values }) => ({ x, low: quantile(values, 0.1), high: quantile(values, 0.9) })),
  };
}

/**
 * Curves over an axis, one for each case and, where the job has further axes, each of their values. Rows of several waters become their
 * median with the range of eight in ten; rows of one water are joined as they are.
 */
export function curvesOver(rows: readonly PlotRow[], x: string, y: string, otherAxes: readonly ColumnDescriptor[], isMiddle: boolean): { curves: DrawnCurve[]; left: number } {
  const labelOf = (row: PlotRow): string => [caseOf(row), ...otherAxes.map((axis) => `${axis.name} ${valueText(row[axis.name])}${axis.unit ? ` ${axis.unit}` : ""}`)].filter(Boolean).join(", ");
  const { labels, lists } = byLabel(rows, labelOf, pairOf(x, y));
  // Of too many, some from everywhere: the first ones would all be of one case.
  const chosen = labels.length <= MOST_CURVES ? labels.map((_, k) => k) : Array.from({ length: MOST_CURVES }, (_, k) => Math.round((k * (labels.length - 1)) / (MOST_CURVES - 1)));
  const curves = chosen.map((k): DrawnCurve => (isMiddle
    ? { label: labels[k], ...middleOf(lists[k]) } : { label: labels[k], points: [...lists[k]].sort((a, b) => a.x - b.x) }));
  return { curves, left: labels.length - curves.length };
}

/** Whether an axis reads better on a logarithm: everything positive, and the largest many times the smallest. */
export function suggestsLog(values: readonly number[], ratio: number): boolean {
  let low = Infinity;
  let high = -Infinity;
  for (const value of values) { if (value < low) low = value; if (value > high) high = value; }
  return low > 0 && high > low * ratio;
}
