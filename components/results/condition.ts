import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { nearestName } from "@/lib/schemas/nearest-name";

const FORM = /^\s*(.+?)\s*(!=|<=|>=|=|<|>)\s*(.*?)\s*$/;

/** A typed condition in the API's form, or why it is none. Values are the server's to judge. */
export function readCondition(text: string, columns: readonly ColumnDescriptor[]): { condition: string } | { problem: string } {
  const nothing = /^\s*(.+?)\s+null\s*$/.exec(text);
  const match = nothing ?? FORM.exec(text);
  if (!match) return { problem: "Write a column, a sign and a value: SI:calcite > 0.5, status = invalid, or pH null." };
  const name = match[1];
  const column = columns.find((each) => each.name === name) ?? columns.find((each) => each.name.toLowerCase() === name.toLowerCase());
  if (!column) {
    const nearest = nearestName(name, columns.map((each) => each.name));
    return { problem: `No column is called “${name}”.${nearest ? ` Did you mean “${nearest}”?` : ""}` };
  }
  if (nothing) return { condition: `${column.name} null` };
  if (match[3] === "") return { problem: "A value is missing behind the sign." };
  if (column.type !== "text" && !Number.isFinite(Number(match[3].replace("−", "-")))) return { problem: `“${match[3]}” is not a number.` };
  return { condition: `${column.name} ${match[2]} ${match[3].replace("−", "-")}` };
}
