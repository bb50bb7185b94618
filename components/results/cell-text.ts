import { fixed, significant } from "@/lib/commands/numbers";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { Row } from "./row-pages";

/** A cell as shown; the whole number stands in the cell's title. */
export function cellText(row: Row, column: ColumnDescriptor): string {
  const value = row[column.name];
  if (value === null || value === undefined) return "";
  if (typeof value === "string") return value;
  if (column.type === "integer") return String(value);
  if (column.name === "pH") return fixed(value, 3);
  if (column.group === "SI" || column.name === "balanceError") return fixed(value, 2);
  if (column.name === "residual") return value === 0 ? "0" : value.toExponential(1).replace("-", "−");
  return significant(value, 5);
}

export const STATUS_COLOURS: Record<string, string> = { ok: "text-good", invalid: "text-bad", "not-converged": "text-bad" };
