/**
 * A job spec from bytes to what a submission needs. Runs in the request for small bodies and in a thread for large ones
 * (parse-thread.ts), so what it returns is cheap to hand over: the document as one text, and a head without the rows.
 */
import { checkSpec } from "@/lib/chemistry/check-spec";
import type { Issue } from "@/lib/errors";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { canonicalJson, hasUnstorableText, sha256Hex } from "./canonical-json";
import { parseJson } from "./parse-json";

export interface PreparedSpec {
  issues: Issue[];
  /** The checked spec with an empty list in place of inline rows; null when there are issues. */
  head: JobSpec | null;
  /** Number of inline waters; null when the spec names a sample set. */
  inlineWaters: number | null;
  /** The document as sent, without its white space. */
  json: string;
  /** SHA-256 of its canonical JSON, hex. */
  hash: string;
  /** The whole checked spec, where it was read in this thread. */
  spec?: JobSpec;
}

/** Reads and checks a spec. Throws `bad-request` where the bytes are no JSON. */
export function prepareSpec(bytes: Uint8Array): PreparedSpec {
  const document = parseJson(bytes);
  const { spec, issues } = checkSpec(document);
  if (!spec) return { issues, head: null, inlineWaters: null, json: "", hash: "" };
  const json = JSON.stringify(document);
  if (hasUnstorableText(json)) {
    const fault = { pointer: "", code: "unstorable-text", message: "A text holds U+0000 or half of a surrogate pair.", remedy: "Take such characters out." };
    return { issues: [...issues, fault], head: null, inlineWaters: null, json: "", hash: "" };
  }
  const rows = "rows" in spec.waters ? spec.waters.rows : undefined;
  return {
    issues, json, hash: sha256Hex(canonicalJson(document)), spec, inlineWaters: Array.isArray(rows) ? rows.length : null,
    head: Array.isArray(rows) ? { ...spec, waters: { ...spec.waters, rows: [] } } : spec,
  };
}
