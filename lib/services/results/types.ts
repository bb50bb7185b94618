import type { job } from "@/db/schema";

/** A job as stored; callers have checked that the actor may read it. */
export type JobRow = Omit<typeof job.$inferSelect, "spec">;

/** What part of a job's rows is asked for and in what order; the words come from the query string as they are. */
export interface ResultQuery {
  /** Column names or groups (`main`, `species`, `SI`, …); empty or absent: all columns. */
  select?: readonly string[];
  /** Conditions `<column> <op> <value>` with = != < <= > >=, or `<column> null`; all must hold. */
  where?: readonly string[];
  /** `column` or `-column`, several separated by commas; absent: the job's own order. */
  sort?: string | null;
}

export interface PageQuery extends ResultQuery {
  /** `nextCursor` of the page before. Bound to job, where and sort. */
  cursor?: string | null;
  /** Position in the ordering at which the page starts, for tables that jump; with a cursor, within the cursor's order. */
  offset?: number | null;
  /** Rows of the page, 1 to 1,000; default 100. */
  limit?: number | null;
}

export const EXPORT_FORMATS = ["ndjson", "csv", "arrow", "json"] as const;
export type ExportFormat = (typeof EXPORT_FORMATS)[number];

export interface ExportQuery extends ResultQuery {
  format: ExportFormat;
  /** Position of the first row to send, to resume a cut download; default 0. */
  from?: number | null;
  /** NDJSON and CSV: add a last record with row count and SHA-256 of what came before it. */
  footer?: boolean;
}

/** A download ready to send. `headers` holds Content-Type, Tufa-Row-Count, Tufa-Complete, versions and spec hash. */
export interface ResultStream {
  body: ReadableStream<Uint8Array>;
  headers: Record<string, string>;
  /** Rows this stream will carry. */
  rowCount: number;
}
