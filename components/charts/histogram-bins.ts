import { linearTicks } from "./scale";

export interface Bins { edges: number[]; counts: number[][] }

/** About this many bins; their width is a round number. */
const WANTED = 24;

/** Counts of values in bins of equal, round width; one list of counts for each list of values. The last bin holds its upper edge. */
export function binsOf(lists: readonly (readonly number[])[]): Bins | null {
  const all = lists.flat().filter(Number.isFinite);
  if (all.length === 0) return null;
  let low = all.reduce((a, b) => Math.min(a, b));
  let high = all.reduce((a, b) => Math.max(a, b));
  if (low === high) { low -= Math.abs(low) * 0.05 || 0.5; high += Math.abs(high) * 0.05 || 0.5; }
  const ticks = linearTicks(low, high, WANTED);
  const step = ticks.length > 1 ? ticks[1] - ticks[0] : high - low;
  const start = Math.floor(low / step + 1e-9) * step;
  const count = Math.max(1, Math.ceil((high - start) / step - 1e-9));
  const edges = Array.from({ length: count + 1 }, (_, k) => Number((start + k * step).toPrecision(12)));
  const counts = lists.map((list) => {
    const bins = new Array<number>(count).fill(0);
    for (const value of list) if (Number.isFinite(value)) bins[Math.min(count - 1, Math.max(0, Math.floor((value - start) / step + 1e-9)))]++;
    return bins;
  });
  return { edges, counts };
}
