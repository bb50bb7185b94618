/** Cells of one column for some rows: NaN is a missing number, "" a missing text. */
export type CellColumn = { kind: "number"; data: Float64Array } | { kind: "text"; data: string[] };

/** Rows [from, to) of columns, without copying the numbers. */
export const sliceCells = (columns: readonly CellColumn[], from: number, to: number): CellColumn[] =>
  columns.map((column) => (column.kind === "number"
    ? { kind: "number", data: column.data.subarray(from, to) }
    : { kind: "text", data: column.data.slice(from, to) }));

/** The shortest text that reads back to the same double; "-0" keeps its sign. Callers have dealt with NaN. */
export const numberText = (value: number): string => (value === 0 && 1 / value < 0 ? "-0" : String(value));
