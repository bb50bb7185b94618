/** Rows for a chart: fetched page by page up to a limit that is said on the chart. */
import { getResults } from "@/lib/client/api";
import type { Job } from "@/lib/schemas/api";

export type PlotRow = Record<string, number | string | null>;
export interface PlotRows {
  rows: PlotRow[];
  /** Rows that answer to the conditions, read or not. */
  rowCount: number;
  /** Runs of consecutive rows that were read, spread over the job; 1 where all of them were. */
  runs: number;
}

const PAGE = 1000;
/** A sample is of this many runs: enough to meet waters from everywhere, few enough to be kind to the server. */
const RUNS = 20;

/** First rows of the runs that a sample of `most` rows takes of `rowCount`, from the very first to the very last row. */
export function sampleStarts(rowCount: number, most: number): { starts: number[]; length: number } {
  if (rowCount <= most) return { starts: Array.from({ length: Math.ceil(rowCount / PAGE) }, (_, k) => k * PAGE), length: PAGE };
  const length = Math.max(1, Math.floor(most / RUNS));
  return { starts: Array.from({ length: RUNS }, (_, k) => Math.round((k / (RUNS - 1)) * (rowCount - length))), length };
}

/** All rows under the conditions, or a sample of `most` of them in runs spread evenly: the first ones alone would be of the first waters. */
export async function readPlotRows(jobId: string, query: { select: readonly string[]; where: readonly string[] }, most: number, signal: AbortSignal): Promise<PlotRows> {
  const select = [...new Set(query.select)].join(",");
  const read = (firstRow: number, limit: number) => getResults(jobId, { select, where: query.where, limit, firstRow }, signal);
  const first = await read(0, Math.min(PAGE, most));
  const { rowCount } = first;
  if (rowCount <= first.rows.length) return { rows: first.rows as PlotRow[], rowCount, runs: 1 };
  const { starts, length } = sampleStarts(rowCount, most);
  const rows: PlotRow[] = [];
  for (const start of starts) {
    const have = start === 0 ? first : await read(start, length);
    rows.push(...(have.rows as PlotRow[]).slice(0, length));
  }
  return { rows, rowCount, runs: rowCount <= most ? 1 : starts.length };
}

export interface Waters { names: string[]; isWhole: boolean }

/** Ids of the job's waters: the rows of its first case at the first point of each axis are one for each water. */
export async function readWaters(job: Job, signal: AbortSignal): Promise<Waters> {
  const axes = (job.columns ?? []).filter((column) => column.group === "axis").map((column) => column.name);
  const { rows: [first] } = await getResults(job.id, { select: ["water", "case", ...axes].join(","), limit: 1 }, signal);
  if (!first) return { names: [], isWhole: false };
  const where = ["case", ...axes].map((name) => `${name} = ${first[name] ?? "null"}`);
  const page = await getResults(job.id, { select: "water", where, limit: PAGE }, signal);
  return { names: [...new Set(page.rows.map((row) => String(row.water)))], isWhole: page.rowCount <= page.rows.length };
}
