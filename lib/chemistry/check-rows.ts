/** The waters of a document: keys and quantities of each row, without a schema's price per cell. */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { rowFields } from "@/lib/chemistry/fields";
import { isProblem, readQuantity, shorten } from "@/lib/chemistry/quantity";
import { issueOfUnknownKey, issuesOf, pointerTo } from "@/lib/chemistry/spec-issues";
import type { Issue } from "@/lib/errors";
import { schemasOf } from "@/lib/schemas/job-spec";

const QUANTITY_KEYS = ["value", "unit", "as", "below", "sd", "method", "fraction", "log10"];

/**
 * Faults of the rows that would refuse the document: unknown keys, unreadable quantities, unknown units. Values out of range are not
 * faults of the document; they make their row invalid. Stops once `limit` faults are found.
 */
export function checkRows(rows: readonly unknown[], units: Readonly<Record<string, string>>, limit: number, set: ConstantsSet = BUILT_IN): Issue[] {
  const issues: Issue[] = [];
  const keys = Object.keys(schemasOf(set).waterRowSchema.shape);
  const context = { units, issues, limit, set, keys, keySet: new Set(keys) };
  for (let index = 0; index < rows.length && issues.length < limit; index++) checkRow(rows[index], index, context);
  return issues;
}

interface Context { units: Readonly<Record<string, string>>; issues: Issue[]; limit: number; set: ConstantsSet; keys: readonly string[]; keySet: ReadonlySet<string> }

/** Texts up to here are short enough for any column of text. */
const SURE_LENGTH = 40;

function checkRow(row: unknown, index: number, context: Context): void {
  const { units, issues, limit, set, keys, keySet } = context;
  const path = ["waters", "rows", index];
  if (typeof row !== "object" || row === null || Array.isArray(row)) {
    issues.push({ pointer: pointerTo(path), code: "wrong-type", message: "A water is an object of columns and values.", value: shorten(row), remedy: "Write { \"id\": …, \"Ca\": … }." });
    return;
  }
  const given = row as Record<string, unknown>;
  let needsSchema = false;
  for (const key of Object.keys(given)) {
    if (issues.length >= limit) return;
    const value = given[key];
    const field = rowFields(set).get(key);
    if (!field && !keySet.has(key)) { issues.push(issueOfUnknownKey(path, key, keys)); continue; }
    if (value === null) continue;
    if (!field) {
      needsSchema ||= !(typeof value === "string" ? value.length <= SURE_LENGTH : key === "id" && Number.isFinite(value));
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
  const parsed = schemasOf(set).waterRowSchema.safeParse(row);
  if (parsed.success) return;
  const found = issuesOf(parsed.error, row, (at) => (at.length === 0 ? keys : QUANTITY_KEYS)).map((issue) => ({ ...issue, pointer: pointerTo(path) + issue.pointer }));
  const known = new Set(issues.map((issue) => issue.pointer));
  issues.push(...found.filter((issue) => !known.has(issue.pointer)));
}
