import { extentOf, roundStep } from "./scale";

export interface Bins { edges: number[]; counts: number[][] }

/** About this many bins; their width is a round number. */
const WANTED = 24;

/** Counts of values in bins of equal, round width; one list of counts for each list of values. The last bin holds its upper edge; what is not finite is not counted. */
export function binsOf(lists: readonly (readonly number[])[]): Bins | null {
  const extent = extentOf(lists.flat());
  if (!extent) return null;
  const { low, high } = extent;
  const step = roundStep((high - low) / WANTED);
  const start = Math.floor(low / step + 1e-9) * step;
  const count = Math.max(1, Math.ceil((high - start) / step - 1e-9));
  const edges = Array.from({ length: count + 1 }, (_, k) => Number((start + k * step).toPrecision(12)) + 0);
  const counts = lists.map((list) => {
    const bins = new Array<number>(count).fill(0);
    for (const value of list) if (Number.isFinite(value)) bins[Math.min(count - 1, Math.max(0, Math.floor((value - start) / step + 1e-9)))]++;
    return bins;
  });
  return { edges, counts };
}
