import { createHash } from "node:crypto";
import { z } from "zod";
import { AppError } from "@/lib/errors";

/**
 * Where the next page starts: in the job's own order the index of its first row, which no later chunk can shift; in a
 * stored order its id and a position. `print` binds the cursor to job, where and sort.
 */
const shape = z.union([
  z.strictObject({ row: z.int().min(0), print: z.string() }),
  z.strictObject({ order: z.string(), position: z.int().min(0), print: z.string() }),
]);
export type ResultCursor = z.infer<typeof shape>;

export const cursorPrint = (jobId: string, orderKey: string): string =>
  createHash("sha256").update(JSON.stringify([jobId, orderKey])).digest("base64url").slice(0, 12);

export const encodeResultCursor = (cursor: ResultCursor): string => Buffer.from(JSON.stringify(cursor)).toString("base64url");

/** Throws AppError("bad-request") for a cursor that is damaged or belongs to another job, where or sort. */
export function decodeResultCursor(text: string, print: string): ResultCursor {
  let value: unknown;
  try {
    value = JSON.parse(Buffer.from(text, "base64url").toString("utf8"));
  } catch {
    value = null;
  }
  const parsed = shape.safeParse(value);
  if (parsed.success && parsed.data.print === print) return parsed.data;
  const [message, code] = parsed.success
    ? ["This cursor belongs to another job, `where` or `sort`; keep them, or leave the cursor out.", "foreign-cursor"]
    : ["This cursor is damaged; take `nextCursor` of the page before, or leave it out.", "damaged-cursor"];
  throw new AppError("bad-request", message, { errors: [{ pointer: "/cursor", code, message }] });
}
