/** The waters of a document: keys and quantities of each row, without a schema's price per cell. */
import { ROW_FIELDS } from "@/lib/chemistry/fields";
import { isProblem, readQuantity, shorten } from "@/lib/chemistry/quantity";
import { issueOfUnknownKey, issuesOf, pointerTo } from "@/lib/chemistry/spec-issues";
import type { Issue } from "@/lib/errors";
import { waterRowSchema } from "@/lib/schemas/job-spec";

const ROW_KEYS = Object.keys(waterRowSchema.shape);
const QUANTITY_KEYS = ["value", "unit", "as", "below", "sd", "method", "fraction", "log10"];

/**
 * Faults of the rows that would refuse the document: unknown keys, unreadable quantities, unknown units. Values out of range are not
 * faults of the document; they make their row invalid. Stops once `limit` faults are found.
 */
export function checkRows(rows: readonly unknown[], units: Readonly<Record<string, string>>, limit: number): Issue[] {
  const issues: Issue[] = [];
  for (let index = 0; index < rows.length && issues.length < limit; index++) checkRow(rows[index], index, units, issues);
  return issues;
}

function checkRow(row: unknown, index: number, units: Readonly<Record<string, string>>, issues: Issue[]): void {
  const path = ["waters", "rows", index];
  if (typeof row !== "object" || row === null || Array.isArray(row)) {
    issues.push({ pointer: pointerTo(path), code: "wrong-type", message: "A water is an object of columns and values.", value: shorten(row), remedy: "Write { \"id\": …, \"Ca\": … }." });
    return;
  }
  const given = row as Record<string, unknown>;
  let needsSchema = false;
  for (const key of Object.keys(given)) {
    const value = given[key];
    if (value === null) { if (!ROW_KEYS.includes(key)) issues.push(issueOfUnknownKey(path, key, ROW_KEYS)); continue; }
    const field = ROW_FIELDS.get(key);
    if (!field) {
      if (ROW_KEYS.includes(key)) needsSchema ||= typeof value !== "string" || value.length > 40;
      else issues.push(issueOfUnknownKey(path, key, ROW_KEYS));
      continue;
    }
    if (typeof value === "object") needsSchema = true;
    const read = readQuantity(value, field, Object.hasOwn(units, key) ? units[key] : null);
    // An object's own shape is the schema's to judge, which names the key that is wrong.
    if (isProblem(read) && !(typeof value === "object" && read.code === "unreadable-quantity")) {
      issues.push({ pointer: pointerTo([...path, key]), code: read.code, message: read.message, value: shorten(value), remedy: read.remedy });
    }
  }
  if (!needsSchema) return;
  const parsed = waterRowSchema.safeParse(row);
  if (parsed.success) return;
  const found = issuesOf(parsed.error, row, (at) => (at.length === 0 ? ROW_KEYS : QUANTITY_KEYS)).map((issue) => ({ ...issue, pointer: pointerTo(path) + issue.pointer }));
  const known = new Set(issues.map((issue) => issue.pointer));
  issues.push(...found.filter((issue) => !known.has(issue.pointer)));
}
