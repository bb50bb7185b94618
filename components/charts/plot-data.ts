/** Rows for a chart: fetched page by page up to a limit that is said on the chart. */
import { getResults } from "@/lib/client/api";

export type PlotRow = Record<string, number | string | null>;
export interface PlotRows { rows: PlotRow[]; rowCount: number }

const PAGE = 1000;

/** @param most rows read at most; a chart with more marks than pixels shows nothing more. */
export async function readPlotRows(jobId: string, query: { select: readonly string[]; where: readonly string[] }, most: number, signal: AbortSignal): Promise<PlotRows> {
  const rows: PlotRow[] = [];
  let rowCount = 0;
  while (rows.length < most) {
    const page = await getResults(jobId, { select: [...new Set(query.select)].join(","), where: query.where, limit: Math.min(PAGE, most - rows.length), firstRow: rows.length }, signal);
    rows.push(...(page.rows as PlotRow[]));
    rowCount = page.rowCount;
    if (page.rows.length === 0 || rows.length >= rowCount) break;
  }
  return { rows, rowCount };
}

/** One list for each case, in order of appearance. */
export function byCase<T>(rows: readonly PlotRow[], pick: (row: PlotRow) => T | null): { labels: string[]; lists: T[][] } {
  const lists = new Map<string, T[]>();
  for (const row of rows) {
    const value = pick(row);
    if (value === null) continue;
    const label = String(row.case ?? "");
    const list = lists.get(label);
    if (list) list.push(value); else lists.set(label, [value]);
  }
  return { labels: [...lists.keys()], lists: [...lists.values()] };
}
