/** Faults of a document's shape, as found by its schema, put into words: place, value, and what to write instead. */
import type { z } from "zod";
import type { Issue } from "@/lib/errors";
import { shorten } from "@/lib/chemistry/quantity";
import { nearestName } from "@/lib/schemas/nearest-name";

type Path = readonly PropertyKey[];
type ZodIssue = z.core.$ZodIssue;

/** RFC 6901 pointer of a path. */
export const pointerTo = (path: Path): string => path.map((part) => "/" + String(part).replaceAll("~", "~0").replaceAll("/", "~1")).join("");

/** Keys that the format has named for later versions; known, but not to be taken yet. */
const LATER = new Set(["steps", "keep", "infer", "draws", "judge", "titration", "alkalinityBasis"]);

/** @param keysAt the keys that an object at a path may have. */
export function issueOfUnknownKey(path: Path, key: string, keysAt: readonly string[]): Issue {
  const pointer = pointerTo([...path, key]);
  if (LATER.has(key)) return { pointer, code: "not-available-yet", message: `“${key}” is not available yet.`, value: key, remedy: "Leave it out for now." };
  const nearest = nearestName(key, keysAt);
  const remedy = nearest ? `Did you mean “${nearest}”?` : keysAt.length > 0 ? `Known here: ${keysAt.slice(0, 30).join(", ")}${keysAt.length > 30 ? " …" : ""}.` : "Leave it out.";
  return { pointer, code: "unknown-key", message: `“${shorten(key)}” is not known here.`, value: shorten(key), remedy };
}

/** Faults answered at once; a document with more has the same one many times over. */
export const MOST_ISSUES = 100;

/** At most MOST_ISSUES of them. @param document what was parsed; `keysAt` lists the keys a place may have. */
export function issuesOf(error: z.ZodError, document: unknown, keysAt: (path: Path) => readonly string[]): Issue[] {
  const issues: Issue[] = [];
  for (const issue of error.issues) {
    if (issues.length >= MOST_ISSUES) break;
    issues.push(...translate(issue as ZodIssue, [], document, keysAt));
  }
  return issues.slice(0, MOST_ISSUES);
}

function translate(issue: ZodIssue, base: Path, document: unknown, keysAt: (path: Path) => readonly string[]): Issue[] {
  const path = [...base, ...issue.path];
  const pointer = pointerTo(path);
  const value = valueAt(document, path);
  if (issue.code === "unrecognized_keys") {
    const known = keysAt(path);
    return issue.keys.slice(0, MOST_ISSUES).map((key) => issueOfUnknownKey(path, key, known));
  }
  if (issue.code === "invalid_union") return translateUnion(issue, path, document, keysAt);
  const shown = value === undefined ? {} : { value: shorten(value) };
  if (issue.code === "invalid_value") return [{ pointer, code: "unknown-value", ...wordsForOptions(value, issue.values), ...shown }];
  if (issue.code === "invalid_type" && value === undefined) {
    return [{ pointer, code: "missing", message: `“${String(path[path.length - 1] ?? "the document")}” is missing.`, remedy: `Add it; ${expected(issue.expected)} belongs here.` }];
  }
  if (issue.code === "invalid_type") return [{ pointer, code: "wrong-type", message: `${capital(expected(issue.expected))} belongs here, not ${kindOf(value)}.`, ...shown }];
  if (issue.code === "too_small" || issue.code === "too_big") return [{ pointer, code: "out-of-range", ...wordsForSize(issue), ...shown }];
  return [{ pointer, code: issue.code.replaceAll("_", "-"), message: issue.message, ...shown }];
}

/** Of a choice of shapes, the faults of the one that was meant: the one that got furthest. */
function translateUnion(issue: Extract<ZodIssue, { code: "invalid_union" }>, path: Path, document: unknown, keysAt: (path: Path) => readonly string[]): Issue[] {
  const value = valueAt(document, path);
  const isRootFault = (each: ZodIssue): boolean => each.path.length === 0 && (each.code === "invalid_type" || each.code === "invalid_value");
  const meant = issue.errors.filter((each) => !each.some((one) => isRootFault(one as ZodIssue)));
  if (meant.length > 0) {
    const fewest = meant.reduce((best, each) => (each.length < best.length ? each : best));
    return fewest.flatMap((each) => translate(each as ZodIssue, path, document, keysAt));
  }
  const all = issue.errors.flat() as ZodIssue[];
  const options = all.flatMap((each) => (each.code === "invalid_value" ? each.values : []));
  const pointer = pointerTo(path);
  const shown = value === undefined ? {} : { value: shorten(value) };
  if (options.length > 0 && typeof value === "string") return [{ pointer, code: "unknown-value", ...wordsForOptions(value, options), ...shown }];
  const kinds = [...new Set(all.flatMap((each) => (each.code === "invalid_type" ? [expected(each.expected)] : each.code === "invalid_value" ? each.values.map(String) : [])))];
  return [{ pointer, code: "wrong-type", message: `${kindOf(value) === "nothing" ? "A value" : capital(kindOf(value))} cannot stand here; ${kinds.join(", or ")} can.`, ...shown }];
}

function wordsForOptions(value: unknown, options: readonly unknown[]): Pick<Issue, "message" | "remedy"> {
  const names = options.map(String);
  const nearest = typeof value === "string" ? nearestName(value, names) : null;
  const list = `One of ${names.slice(0, 20).join(", ")}${names.length > 20 ? " …" : ""}.`;
  return {
    message: value === undefined ? "A value is missing here." : `${typeof value === "string" ? `“${shorten(value)}”` : shorten(value)} is not known here.`,
    remedy: nearest ? `Did you mean “${nearest}”? ${list}` : list,
  };
}

function wordsForSize(issue: Extract<ZodIssue, { code: "too_small" | "too_big" }>): Pick<Issue, "message" | "remedy"> {
  const isLow = issue.code === "too_small";
  const bound = String(isLow ? issue.minimum : issue.maximum);
  const what = issue.origin === "string" ? "characters" : issue.origin === "array" ? "entries" : "";
  const limit = `${isLow ? "at least" : "at most"} ${bound}${what ? ` ${what}` : ""}`;
  return { message: what ? `There must be ${limit}.` : `The value must be ${limit}.`, remedy: what && isLow ? "Add what is missing." : `Give ${limit}.` };
}

const WORDS: Record<string, string> = { number: "a number", string: "a text", object: "an object", array: "a list", int: "a whole number", boolean: "true or false", record: "an object" };
const expected = (type: string): string => WORDS[type] ?? type;
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

function kindOf(value: unknown): string {
  if (value === undefined) return "nothing";
  if (value === null) return "null";
  if (Array.isArray(value)) return "a list";
  return { number: "a number", string: "a text", boolean: "true or false", object: "an object" }[typeof value as string] ?? "that";
}

function valueAt(document: unknown, path: Path): unknown {
  let at = document;
  for (const part of path) {
    if (at === null || typeof at !== "object" || !Object.hasOwn(at, part)) return undefined;
    at = (at as Record<PropertyKey, unknown>)[part];
  }
  return at;
}
