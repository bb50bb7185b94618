/**
 * Opaque cursors of lists. A cursor holds the sort key of the last row shown (creation time and id, newest first) and
 * a fingerprint of the list's other arguments, so it stays right while rows are added and is refused with other arguments.
 */
import { createHash } from "node:crypto";
import { AppError } from "@/lib/errors";

export interface CursorKey { at: string; id: string }

const fingerprint = (bound: unknown): string =>
  createHash("sha256").update(JSON.stringify(bound)).digest("base64url").slice(0, 12);

/** The cursor that continues after `last`. `bound` is everything that shapes the list, the caller included. */
export function encodeCursor(last: CursorKey, bound: unknown): string {
  return Buffer.from(JSON.stringify([last.at, last.id, fingerprint(bound)])).toString("base64url");
}

/** Reads a cursor. Throws `bad-request` for one that is damaged or belongs to other arguments. */
export function decodeCursor(cursor: string, bound: unknown): CursorKey {
  let parts: unknown;
  try {
    parts = JSON.parse(Buffer.from(cursor, "base64url").toString("utf8"));
  } catch {
    parts = null;
  }
  if (!Array.isArray(parts) || parts.length !== 3 || parts.some((part) => typeof part !== "string")
    || Number.isNaN(Date.parse(parts[0] as string))) {
    throw new AppError("bad-request", "The cursor is damaged; take `nextCursor` of the page before, or leave it out.");
  }
  const [at, id, print] = parts as [string, string, string];
  if (print !== fingerprint(bound)) {
    throw new AppError("bad-request", "The cursor belongs to a list with other arguments; keep them, or leave the cursor out.");
  }
  return { at, id };
}
