import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { nearestName } from "@/lib/schemas/nearest-name";

const FORM = /^\s*(.+?)\s*(!=|<=|>=|=|<|>)\s*(.*?)\s*$/;
const NULL_FORM = /^\s*([^=<>!]+?)\s*(!=|=|\s)\s*null\s*$/i;

/** A typed condition in the API's form, or why it is none. Values are the server's to judge. */
export function readCondition(text: string, columns: readonly ColumnDescriptor[]): { condition: string } | { problem: string } {
  const nothing = NULL_FORM.exec(text);
  const match = nothing ?? FORM.exec(text);
  if (!match) return { problem: "Write a column, a sign and a value: SI:calcite > 0.5, status = invalid, or pH = null." };
  const [, name, sign, value] = match;
  const column = columns.find((each) => each.name === name) ?? columns.find((each) => each.name.toLowerCase() === name.toLowerCase());
  if (!column) {
    const nearest = nearestName(name, columns.map((each) => each.name));
    return { problem: `No column is called “${name}”.${nearest ? ` Did you mean “${nearest}”?` : ""}` };
  }
  if (nothing) return { condition: `${column.name} ${sign === "!=" ? "!=" : "="} null` };
  if (value === "") return { problem: "A value is missing behind the sign." };
  // A minus copied from the table is the typographic one.
  const written = value.replace(/^−/, "-").replace(/e−/i, "e-");
  if (column.type !== "text" && !Number.isFinite(Number(written))) return { problem: `“${value}” is not a number.` };
  return { condition: `${column.name} ${sign} ${column.type === "text" ? value : written}` };
}
