/**
 * An upload of waters, JSON or CSV, from bytes to what is stored. Runs in the request for small uploads and in a thread
 * for large ones: the waters leave it as ready JSON texts, one per stored chunk.
 */
import { checkTable, MOST_ISSUES } from "@/lib/chemistry/check-spec";
import { checkWaters } from "@/lib/chemistry/resolve-job";
import type { Issue } from "@/lib/errors";
import { sampleSetCreate, sampleSetVersionCreate } from "@/lib/schemas/api";
import { hasUnstorableText } from "./canonical-json";
import { parseJson } from "./parse-json";
import { readCsv, type SampleFlag } from "./read-csv";
import { bodyIssues } from "./body-issues";

/** Waters in one row of `sample_chunk`. */
export const WATERS_PER_CHUNK = 1000;
export const WATERS_MAX = 200_000;
/** Flags kept of one version; the last one says how many more there are. */
const FLAGS_MAX = 2000;

export interface SampleDocument {
  purpose: "set" | "version";
  format: "json" | "csv";
  bytes: Uint8Array;
  /** For CSV, from the query, the form or the file name. A JSON body says these itself. */
  name: string | null;
  description: string;
  visibility: "private" | "team";
  note: string;
  rawName: string | null;
}

export interface PreparedSamples {
  issues: Issue[];
  name: string | null;
  description: string;
  visibility: "private" | "team";
  note: string;
  waterCount: number;
  columns: string[];
  units: Record<string, string>;
  flags: SampleFlag[];
  /** JSON texts of 1,000 waters each. */
  chunks: string[];
}

interface Draft extends Omit<PreparedSamples, "waterCount" | "columns" | "chunks"> {
  rows: Record<string, unknown>[];
  lines: number[] | null;
}

const nothing = { rows: [], lines: null, units: {}, flags: [] };

function draftOf(document: SampleDocument): Draft {
  const meta = { name: document.name, description: document.description, visibility: document.visibility, note: document.note };
  if (document.format === "csv") {
    const read = readCsv(document.bytes);
    if (document.purpose === "set" && !document.name) {
      read.issues.push({ pointer: "/name", code: "missing", message: "The sample set has no name.", remedy: "Add ?name=… to the address." });
    }
    return { ...meta, ...read };
  }
  const body = parseJson(document.bytes);
  if (document.purpose === "set") {
    const result = sampleSetCreate.safeParse(body);
    return result.success ? { ...result.data, ...noFindings() } : { ...meta, ...nothing, issues: bodyIssues(result.error, body) };
  }
  const result = sampleSetVersionCreate.safeParse(body);
  return result.success ? { ...meta, ...result.data, ...noFindings() } : { ...meta, ...nothing, issues: bodyIssues(result.error, body) };
}

const noFindings = (): Pick<Draft, "lines" | "flags" | "issues"> => ({ lines: null, flags: [], issues: [] });

/** Waters without an id are named by their place, so that results and flags can name them. */
function nameWaters(rows: Record<string, unknown>[]): void {
  rows.forEach((row, index) => {
    if (row.id === undefined || row.id === null || row.id === "") row.id = `W${index + 1}`;
    else if (typeof row.id === "number") row.id = String(row.id);
  });
}

/** Faults that would refuse a job over these waters: found by the job spec's own check, with pointers of this document. */
function documentIssues(draft: Draft): Issue[] {
  return checkTable(draft.rows, { ...draft.units }).map((issue) => {
    const pointer = issue.pointer.slice("/waters".length);
    const index = /^\/rows\/(\d+)/.exec(pointer);
    const line = index && draft.lines ? draft.lines[Number(index[1])] : null;
    return { ...issue, pointer, message: line === null ? issue.message : `Line ${line}: ${issue.message}` };
  });
}

function duplicateFlags(rows: Record<string, unknown>[]): SampleFlag[] {
  const flags: SampleFlag[] = [];
  const seen = new Map<string, number>();
  const values = new Map<string, string>();
  rows.forEach((row, index) => {
    const id = String(row.id);
    const before = seen.get(id);
    if (before !== undefined) flags.push({ water: id, code: "duplicate-id", column: "id", message: `Rows ${before + 1} and ${index + 1} have the same id.` });
    else seen.set(id, index);
    const { id: _id, ...rest } = row;
    void _id;
    const content = JSON.stringify(Object.entries(rest).sort(([a], [b]) => (a < b ? -1 : 1)));
    const twin = values.get(content);
    if (twin !== undefined && twin !== id) flags.push({ water: id, code: "duplicate-values", column: null, message: `All values are those of ${twin}.` });
    else values.set(content, id);
  });
  return flags;
}

/** Findings of the chemistry's checks (ion balance, impossible values), by water. */
function chemistryFlags(draft: Draft): SampleFlag[] {
  return checkWaters(draft.rows, draft.units).map((issue) => {
    const [, index, column] = /^(?:\/rows)?\/(\d+)(?:\/([^/]+))?/.exec(issue.pointer) ?? [];
    const row = index === undefined ? undefined : draft.rows[Number(index)];
    return { water: row ? String(row.id) : "", code: issue.code, column: column ?? null, message: issue.message };
  });
}

function limitFlags(flags: SampleFlag[]): SampleFlag[] {
  if (flags.length <= FLAGS_MAX) return flags;
  const rest = flags.length - FLAGS_MAX + 1;
  return [...flags.slice(0, FLAGS_MAX - 1), { water: "", code: "more-flags", column: null, message: `${rest} more findings are not kept.` }];
}

/** Reads, checks and cuts an upload. Throws `bad-request` for JSON that is none, `invalid-samples` for CSV that is none. */
export function prepareSamples(document: SampleDocument): PreparedSamples {
  const draft = draftOf(document);
  const { rows, lines: _lines, ...kept } = draft;
  void _lines;
  const empty = { waterCount: 0, columns: [], chunks: [] };
  if (rows.length > WATERS_MAX) {
    draft.issues.push({ pointer: "/rows", code: "too-many-waters", message: `The upload has ${rows.length} waters; a sample set holds up to ${WATERS_MAX}.`, remedy: "Split it." });
  }
  nameWaters(rows);
  // Faults of reading and faults of what was read come at once, as far as both can be told.
  const issues = [...draft.issues, ...(rows.length <= WATERS_MAX ? documentIssues(draft) : [])].slice(0, MOST_ISSUES);
  if (issues.length > 0) return { ...kept, ...empty, issues };
  const chunks: string[] = [];
  for (let at = 0; at < rows.length; at += WATERS_PER_CHUNK) chunks.push(JSON.stringify(rows.slice(at, at + WATERS_PER_CHUNK)));
  if (chunks.some(hasUnstorableText)) {
    return { ...kept, ...empty, issues: [{ pointer: "/rows", code: "unstorable-text", message: "A text holds U+0000 or half of a surrogate pair.", remedy: "Take such characters out." }] };
  }
  const columns = new Set<string>();
  for (const row of rows) for (const key of Object.keys(row)) columns.add(key);
  const flags = limitFlags([...draft.flags, ...duplicateFlags(rows), ...chemistryFlags(draft)]);
  return { ...kept, issues: [], flags, waterCount: rows.length, columns: [...columns], chunks };
}
