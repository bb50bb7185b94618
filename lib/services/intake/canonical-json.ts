import { createHash } from "node:crypto";

/** JSON with the keys of every object sorted and no spaces: equal documents give equal text, whatever their order was. */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return "[" + value.map(canonicalJson).join(",") + "]";
  if (value !== null && typeof value === "object") {
    const members = Object.entries(value).filter(([, member]) => member !== undefined).sort(([a], [b]) => (a < b ? -1 : 1));
    return "{" + members.map(([key, member]) => JSON.stringify(key) + ":" + canonicalJson(member)).join(",") + "}";
  }
  return JSON.stringify(value) ?? "null";
}

/** SHA-256 of a text, hex. */
export const sha256Hex = (text: string): string => createHash("sha256").update(text, "utf8").digest("hex");

/**
 * Whether PostgreSQL's jsonb would refuse the text: it cannot hold U+0000 nor half of a surrogate pair, and both come
 * out of JSON.stringify as \u escapes.
 */
export const hasUnstorableText = (json: string): boolean => /(?<!\\)(?:\\\\)*\\u(?:0000|d[89a-f][\da-f]{2})/i.test(json);
