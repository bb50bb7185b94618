import { z } from "zod";

/** What a result column is, for every format's header and for the docs. */
export const columnDescriptor = z.strictObject({
  name: z.string().meta({ description: "Column name as used in `select`, `where` and `sort`" }),
  type: z.enum(["number", "integer", "text"]),
  unit: z.string().meta({ description: "Unit; empty for numbers without one" }),
  basis: z.string().nullable().meta({ description: "What an amount is counted in, e.g. `as ions`" }),
  description: z.string(),
  group: z.enum(["row", "main", "species", "activities", "SI", "solids", "dissolved", "axis"]),
});
export type ColumnDescriptor = z.infer<typeof columnDescriptor>;

/** Columns that every job has, before the value columns; axis columns stand between `case` and `status`. */
export const LEADING_COLUMNS: readonly ColumnDescriptor[] = [
  { name: "water", type: "text", unit: "", basis: null, description: "Id of the water", group: "row" },
  { name: "case", type: "text", unit: "", basis: null, description: "Name of the case", group: "row" },
  { name: "status", type: "text", unit: "", basis: null, description: "ok, not-converged or invalid", group: "row" },
  { name: "message", type: "text", unit: "", basis: null, description: "Why the row is not ok; empty for ok rows", group: "row" },
  { name: "warnings", type: "text", unit: "", basis: null, description: "Warnings, separated by `; `", group: "row" },
  { name: "iterations", type: "integer", unit: "", basis: null, description: "Newton iterations spent on the row", group: "row" },
  { name: "residual", type: "number", unit: "", basis: null, description: "Largest relative error of the returned state, computed afresh", group: "row" },
];
