/** An entry as text for elsewhere: CSV, a table for a document, curl, Python. */
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { ApiCall } from "./command";
import type { Entry } from "./entry";

export interface Table { columns: Pick<ColumnDescriptor, "name" | "unit" | "type">[]; rows: Record<string, unknown>[] }

/** Rows and columns of an entry that holds numbers; null for the others. */
export function tableOf(entry: Entry): Table | null {
  const body = entry.body;
  if (body.kind === "state" || body.kind === "grid") return body.response;
  if (body.kind === "comparison") {
    const names = [...new Set(body.states.flatMap((state) => state.response.columns.map((column) => column.name)))];
    const all = new Map(body.states.flatMap((state) => state.response.columns.map((column) => [column.name, column] as const)));
    return {
      columns: [{ name: "entry", unit: "", type: "integer" }, ...names.map((name) => all.get(name)!)],
      rows: body.states.map((state) => ({ entry: state.number, ...state.response.rows[0] })),
    };
  }
  return null;
}

/** RFC 4180 with one header row. Text cells that a spreadsheet would run are escaped, numbers never. */
export function csvOf(table: Table): string {
  const header = table.columns.map((column) => csvCell(column.name, true));
  const lines = table.rows.map((row) => table.columns.map((column) => csvCell(row[column.name], column.type === "text")));
  return [header, ...lines].map((cells) => cells.join(",")).join("\r\n") + "\r\n";
}

function csvCell(value: unknown, isText: boolean): string {
  if (value === null || value === undefined) return "";
  let text = String(value);
  if (isText && /^[=+\-@\t\0]/.test(text)) text = `'${text}`;
  return /[",\r\n]/.test(text) ? `"${text.replaceAll("\"", "\"\"")}"` : text;
}

/** Tab-separated text that word processors and spreadsheets paste as a table; units stand behind the names. */
export function pasteTableOf(table: Table): string {
  // One row reads better downwards, many rows as they are.
  if (table.rows.length === 1) {
    const row = table.rows[0];
    return table.columns.filter((column) => row[column.name] !== null && row[column.name] !== "")
      .map((column) => `${column.name}\t${oneLine(row[column.name])}\t${column.unit}`).join("\n") + "\n";
  }
  const header = table.columns.map((column) => (column.unit ? `${column.name} (${column.unit})` : column.name)).join("\t");
  return [header, ...table.rows.map((row) => table.columns.map((column) => oneLine(row[column.name])).join("\t"))].join("\n") + "\n";
}

const oneLine = (value: unknown): string => (value === null || value === undefined ? "" : String(value).replace(/[\t\r\n]+/g, " "));

/** A shell command for the call; the token comes from the environment, never from the screen. */
export function curlFor(call: ApiCall, origin: string): string {
  const lines = [`curl -sS ${shellQuote(origin + call.path)}`, `  -H "Authorization: Bearer $TUFA_TOKEN"`];
  if (call.body !== undefined) {
    lines.push(`  -H "Content-Type: application/json"`, `  -d ${shellQuote(JSON.stringify(call.body, null, 2))}`);
  } else if (call.method === "POST") lines.push("  -X POST");
  return lines.join(" \\\n") + "\n";
}

const shellQuote = (text: string): string => `'${text.replaceAll("'", `'\\''`)}'`;

/** The call in Python with its standard library alone. */
export function pythonFor(call: ApiCall, origin: string): string {
  const hasBody = call.body !== undefined;
  return [
    "import json, os, urllib.request",
    "",
    ...(hasBody ? [`spec = json.loads(${pythonQuote(JSON.stringify(call.body, null, 2))})`, ""] : []),
    "request = urllib.request.Request(",
    `    ${JSON.stringify(origin + call.path)},`,
    ...(hasBody ? ["    data=json.dumps(spec).encode(),"] : []),
    `    method=${JSON.stringify(call.method)},`,
    `    headers={"Authorization": "Bearer " + os.environ["TUFA_TOKEN"]${hasBody ? `, "Content-Type": "application/json"` : ""}},`,
    ")",
    "with urllib.request.urlopen(request) as response:",
    "    answer = json.load(response)",
    hasBody && call.path.endsWith("/solve") ? `print(answer["rows"][0]["pH"])` : "print(json.dumps(answer, indent=2))",
    "",
  ].join("\n");
}

const pythonQuote = (text: string): string => `r'''${text.replaceAll("'''", "\\u0027\\u0027\\u0027")}'''`;
