import { resultColumns } from "@/lib/results/result-columns";
import { type CompiledJob, type SolvedRows, STATUS, STATUS_NAMES } from "@/lib/chemistry/types";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

export type Cell = number | string | null;

/** All columns of a compiled job's rows, in order. */
export const columnsOf = (compiled: CompiledJob): ColumnDescriptor[] => resultColumns(compiled.axes, compiled.columns);

const numberOrNull = (value: number): number | null => (Number.isFinite(value) ? value : null);

/** Solved rows as objects keyed by column name; NaN and infinite values become null. */
export function rowObjects(compiled: CompiledJob, solved: SolvedRows): Record<string, Cell>[] {
  const names = columnsOf(compiled).map((column) => column.name);
  const axisNames = names.slice(2, 2 + compiled.axes.length);
  const caseCount = compiled.caseNames.length;
  const points = compiled.pointsPerCase;
  return Array.from({ length: solved.count }, (_, at) => {
    const row = solved.from + at;
    const out: Record<string, Cell> = {
      water: compiled.waterIds[Math.floor(row / (points * caseCount))],
      case: compiled.caseNames[Math.floor(row / points) % caseCount],
    };
    let stride = points;
    compiled.axes.forEach((axis, index) => {
      stride /= axis.shown.length;
      out[axisNames[index]] = numberOrNull(axis.shown[Math.floor((row % points) / stride) % axis.shown.length]);
    });
    out.status = STATUS_NAMES[solved.status[at]];
    out.message = solved.texts[solved.message[at]];
    out.warnings = solved.texts[solved.warnings[at]];
    out.iterations = solved.iterations[at];
    out.residual = numberOrNull(solved.residual[at]);
    compiled.columns.forEach((column, index) => { out[column.name] = numberOrNull(solved.values[index][at]); });
    return out;
  });
}

/** Counts by status, and the distinct warnings with how many rows bear each. */
export function summarise(solved: SolvedRows): { rows: number; ok: number; invalid: number; notConverged: number; warned: number; warnings: string[] } {
  const count = (status: number): number => solved.status.reduce((sum, each) => sum + (each === status ? 1 : 0), 0);
  const tally = new Map<string, number>();
  let warned = 0;
  for (let at = 0; at < solved.count; at++) {
    const text = solved.texts[solved.warnings[at]];
    if (!text) continue;
    warned++;
    for (const each of text.split("; ")) tally.set(each, (tally.get(each) ?? 0) + 1);
  }
  return {
    rows: solved.count, ok: count(STATUS.ok), invalid: count(STATUS.invalid), notConverged: count(STATUS.notConverged), warned,
    warnings: [...tally].map(([text, rows]) => (solved.count === 1 ? text : `${text} (${rows} ${rows === 1 ? "row" : "rows"})`)),
  };
}
