/** The one check of a job spec: by the API before a job is taken, by the editor while it is typed, by the console. */
import { checkAxes } from "@/lib/chemistry/check-axes";
import { checkCases } from "@/lib/chemistry/check-cases";
import { checkReport } from "@/lib/chemistry/check-report";
import { checkRows } from "@/lib/chemistry/check-rows";
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { constantsSetOf, extendSet } from "@/lib/chemistry/extension";
import { rowFields } from "@/lib/chemistry/fields";
import { issuesOf, MOST_ISSUES } from "@/lib/chemistry/spec-issues";
import { splitUnit, unitScale } from "@/lib/chemistry/units";
import type { Issue } from "@/lib/errors";
import { extendSchema } from "@/lib/schemas/extend";
import { type JobSpec, jobSpecJsonSchema, schemasOf, WATERS_PER_SPEC } from "@/lib/schemas/job-spec";
import { nearestName } from "@/lib/schemas/nearest-name";

export { MOST_ISSUES } from "@/lib/chemistry/spec-issues";

export interface CheckedSpec {
  /** The document as a spec; null where its shape is no spec's. It may still have issues. */
  spec: JobSpec | null;
  issues: Issue[];
}

/**
 * Finds every fault that would refuse the document, each with JSON Pointer, value and remedy, at most MOST_ISSUES of them. Faults of one
 * row's values are not among them: those make the row invalid. Pure, and never throws, whatever it is given.
 */
export function checkSpec(document: unknown): CheckedSpec {
  const { head, rows } = detachRows(document);
  const { set, issues: own } = ownSet(head);
  const parsed = schemasOf(set).jobSpecSchema.safeParse(head);
  const issues = parsed.success ? [] : issuesOf(parsed.error, head, (path) => keysAt(path.map(String)));
  const waters = watersOf(document);
  const units = unitsOf(waters);
  issues.push(...own);
  if (waters) issues.push(...watersIssues(waters, rows));
  issues.push(...checkTable((rows ?? []).slice(0, WATERS_PER_SPEC), units, set));
  issues.push(...partIssues(head, units, set));
  if (!parsed.success) return { spec: null, issues: limit(issues) };
  const spec = rows ? { ...parsed.data, waters: { ...parsed.data.waters, rows: rows as JobSpec["waters"]["rows"] } } : parsed.data;
  return { spec, issues: limit(issues) };
}

/**
 * A spec that was checked before it was stored. Its rows are taken as they are: looking through 100,000 of them again costs half a second
 * at each place that reads it. Throws where the rest is no spec.
 */
export function readStoredSpec(document: unknown): JobSpec {
  const { head, rows } = detachRows(document);
  const { extend } = isObject(head) ? head : {};
  const set = constantsSetOf(extend === undefined ? undefined : extendSchema.parse(extend));
  const spec = schemasOf(set).jobSpecSchema.parse(head);
  return rows ? { ...spec, waters: { ...spec.waters, rows: rows as JobSpec["waters"]["rows"] } } : spec;
}

/**
 * Faults of waters and their default units, at most MOST_ISSUES of them, with pointers below /waters. Any number of rows.
 * A wrong unit is one fault, not one for each of its rows: it is taken out of `units`, which the caller owns.
 */
export function checkTable(rows: readonly unknown[], units: Record<string, string>, set: ConstantsSet = BUILT_IN): Issue[] {
  const wrong = unitIssues(units, set);
  for (const { pointer } of wrong) delete units[pointer.slice("/waters/units/".length)];
  return limit([...wrong, ...checkRows(rows, units, MOST_ISSUES, set)]);
}

/** Faults of cases, axes and report beyond their shape; each part is looked at though another one is no good. */
function partIssues(head: unknown, units: Record<string, string>, set: ConstantsSet): Issue[] {
  if (!isObject(head)) return [];
  const { cases: casesPart, vary: varyPart, report: reportPart } = schemasOf(set).jobSpecSchema.shape;
  const cases = casesPart.safeParse(head.cases);
  const vary = varyPart.safeParse(head.vary);
  const report = reportPart.safeParse(head.report);
  return [
    ...(cases.success ? checkCases(cases.data, units, set) : []),
    ...(cases.success && vary.success ? checkAxes(vary.data ?? [], cases.data, units, set) : []),
    ...(report.success ? checkReport(report.data ?? [], cases.success ? cases.data : null, set) : []),
  ];
}

/** The constants set with what the document brings, and the faults of that. Its shape is the schema's to judge. */
function ownSet(head: unknown): { set: ConstantsSet; issues: Issue[] } {
  if (!isObject(head) || head.extend === undefined) return { set: BUILT_IN, issues: [] };
  const parsed = extendSchema.safeParse(head.extend);
  return parsed.success ? extendSet(parsed.data) : { set: BUILT_IN, issues: [] };
}

const limit = (issues: Issue[]): Issue[] => issues.slice(0, MOST_ISSUES);

type Plain = Record<string, unknown>;
const isObject = (value: unknown): value is Plain => typeof value === "object" && value !== null && !Array.isArray(value);

function watersOf(document: unknown): Plain | null {
  return isObject(document) && isObject(document.waters) ? document.waters : null;
}

/** The document without its rows, which are looked at by a loop: a schema's pass over 100,000 of them takes seconds. */
function detachRows(document: unknown): { head: unknown; rows: unknown[] | null } {
  const waters = watersOf(document);
  if (!waters || !Array.isArray(waters.rows)) return { head: document, rows: null };
  const rest = Object.fromEntries(Object.entries(waters).filter(([key]) => key !== "rows"));
  return { head: { ...(document as Plain), waters: rest }, rows: waters.rows };
}

/** Units that are texts; anything else is the schema's to name. */
function unitsOf(waters: Plain | null): Record<string, string> {
  if (!waters || !isObject(waters.units)) return {};
  return Object.fromEntries(Object.entries(waters.units).filter((entry): entry is [string, string] => typeof entry[1] === "string"));
}

function watersIssues(waters: Plain, rows: unknown[] | null): Issue[] {
  const pointer = "/waters";
  const hasSet = waters.set !== undefined;
  const hasRows = waters.rows !== undefined;
  if (hasSet && hasRows) return [{ pointer, code: "contradiction", message: "Both a sample set and rows are given.", remedy: "Keep one of set and rows." }];
  if (!hasSet && !hasRows) return [{ pointer, code: "missing", message: "There are no waters.", remedy: "Add \"set\" or \"rows\"." }];
  if (hasSet && typeof waters.set === "string" && !/^set_[0-9A-Za-z]*(@\d{1,9})?$/.test(waters.set) && waters.set !== "set_…") {
    return [{ pointer: "/waters/set", code: "unreadable-reference", message: "This does not name a sample set.", value: waters.set.slice(0, 80), remedy: "Write set_… or set_…@3." }];
  }
  if (rows && rows.length === 0) return [{ pointer: "/waters/rows", code: "out-of-range", message: "There must be at least 1 water.", remedy: "Add one, or name a sample set." }];
  if (rows && rows.length > WATERS_PER_SPEC) {
    return [{ pointer: "/waters/rows", code: "too-many-waters", message: `There are ${rows.length} waters; a spec holds up to ${WATERS_PER_SPEC}.`, value: String(rows.length), remedy: "Upload them as a sample set and name it, or send several jobs." }];
  }
  return [];
}

/** More columns than there are fields name most of them wrongly. */
const MOST_UNITS = 2 * MOST_ISSUES;

function unitIssues(units: Record<string, string>, set: ConstantsSet): Issue[] {
  return limit(Object.entries(units).slice(0, MOST_UNITS).flatMap(([key, text]): Issue[] => {
    const pointer = `/waters/units/${key.replaceAll("~", "~0").replaceAll("/", "~1")}`;
    const field = rowFields(set).get(key);
    if (!field) {
      const nearest = nearestName(key, rowFields(set).keys());
      return [{ pointer, code: "unknown-column", message: `No column is called “${key.slice(0, 80)}”.`, value: key.slice(0, 80), remedy: nearest ? `Did you mean “${nearest}”?` : `Columns: ${[...rowFields(set).keys()].join(", ")}.` }];
    }
    const { unit, as } = splitUnit(text);
    const scale = unitScale(field, unit, as);
    return "message" in scale ? [{ pointer, code: "unknown-unit", message: scale.message, value: text, remedy: scale.remedy }] : [];
  }));
}

interface SchemaNode { properties?: Record<string, SchemaNode>; items?: SchemaNode; additionalProperties?: SchemaNode | boolean; propertyNames?: { enum?: string[] }; anyOf?: SchemaNode[] }

/** Keys that the schema knows at a path, for “did you mean”. */
function keysAt(path: readonly string[]): string[] {
  let nodes: SchemaNode[] = [jobSpecJsonSchema() as SchemaNode];
  const open = (all: SchemaNode[]): SchemaNode[] => all.flatMap((node) => [node, ...open(node.anyOf ?? [])]);
  for (const part of path) {
    nodes = open(nodes).flatMap((node) => {
      const own = node.properties && Object.hasOwn(node.properties, part) ? node.properties[part] : null;
      if (own) return [own];
      if (/^\d+$/.test(part) && node.items) return [node.items];
      return typeof node.additionalProperties === "object" ? [node.additionalProperties] : [];
    });
  }
  return [...new Set(open(nodes).flatMap((node) => [...Object.keys(node.properties ?? {}), ...(node.propertyNames?.enum ?? [])]))];
}
