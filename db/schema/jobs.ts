import { sql } from "drizzle-orm";
import { bigint, bigserial, index, integer, json, jsonb, pgTable, primaryKey, text } from "drizzle-orm/pg-core";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { appUser } from "./accounts";
import { bytea, instant } from "./columns";

export const JOB_STATUSES = ["queued", "running", "done", "failed", "cancelled"] as const;

export const job = pgTable("job", {
  id: text().primaryKey(), // job_…
  ownerId: text("owner_id").notNull().references(() => appUser.id),
  title: text().notNull(),
  /** json, not jsonb: the spec comes back with its keys in the order in which they were written. */
  spec: json().$type<Record<string, unknown>>().notNull(),
  specHash: text("spec_hash").notNull(), // sha256 of the canonical JSON, hex
  setId: text("set_id"),
  setVersion: integer("set_version"), // pinned at submission
  visibility: text({ enum: ["private", "team"] }).notNull().default("team"),
  status: text({ enum: JOB_STATUSES }).notNull(),
  /** interactive: small jobs, taken by the nice-0 worker; batch: the others. */
  lane: text({ enum: ["interactive", "batch"] }).notNull(),
  rowCount: integer("row_count").notNull(),
  chunkCount: integer("chunk_count").notNull().default(0), // 0 until planned
  okCount: integer("ok_count").notNull().default(0),
  invalidCount: integer("invalid_count").notNull().default(0),
  notConvergedCount: integer("not_converged_count").notNull().default(0),
  doneCount: integer("done_count").notNull().default(0), // rows stored
  warningCount: integer("warning_count").notNull().default(0), // rows with a warning
  /** Rows of chunks that failed for good; the job has ended when done and failed rows make up row_count. */
  failedCount: integer("failed_count").notNull().default(0),
  /** Column set of the results, fixed by planning (leading columns, axes, values). */
  columns: jsonb().$type<ColumnDescriptor[]>(),
  /** What maps a row index to water, case and axis values; the water ids are in job_water. */
  caseNames: jsonb("case_names").$type<string[]>(),
  axes: jsonb().$type<{ field: string; unit: string; shown: number[] }[]>(),
  engineVersion: text("engine_version").notNull(),
  constantsVersion: text("constants_version").notNull(),
  createdAt: instant("created_at").notNull().defaultNow(),
  startedAt: instant("started_at"),
  finishedAt: instant("finished_at"),
  cancelRequestedAt: instant("cancel_requested_at"),
  error: text(),
}, (t) => [index("job_owner_created").on(t.ownerId, t.createdAt), index("job_status").on(t.status)]);

/** The unit of queueing and retry. This table alone says what is done; it is small, so leases update cheaply. */
export const chunk = pgTable("chunk", {
  jobId: text("job_id").notNull().references(() => job.id, { onDelete: "cascade" }),
  index: integer().notNull(),
  lane: text({ enum: ["interactive", "batch"] }).notNull(),
  ownerId: text("owner_id").notNull(), // fairness: whoever holds fewest leases goes first
  firstRow: integer("first_row").notNull(),
  rowCount: integer("row_count").notNull(),
  status: text({ enum: ["waiting", "leased", "done", "failed", "cancelled"] }).notNull().default("waiting"),
  attempt: integer().notNull().default(0),
  /** Grows with each lease; a write must carry the fence it was leased with. */
  fence: bigint({ mode: "number" }).notNull().default(0),
  leaseUntil: instant("lease_until"),
  leasedBy: text("leased_by"),
  error: text(),
}, (t) => [
  primaryKey({ columns: [t.jobId, t.index] }),
  // Partial, so that a claim never walks over finished chunks; lease_until is in neither, so heartbeats stay cheap.
  index("chunk_open").on(t.jobId, t.index).where(sql`status in ('waiting', 'leased')`),
  index("chunk_leased").on(t.lane, t.ownerId).where(sql`status = 'leased'`),
]);

/** Ids of a job's waters, 1,024 to a row of this table, so that results stay readable without spec or sample set. */
export const jobWater = pgTable("job_water", {
  jobId: text("job_id").notNull().references(() => job.id, { onDelete: "cascade" }),
  index: integer().notNull(),
  ids: jsonb().$type<string[]>().notNull(),
}, (t) => [primaryKey({ columns: [t.jobId, t.index] })]);

/** One uncompressed columnar block per chunk (lib/results/block.ts). bytes is STORAGE EXTERNAL (set in a migration). */
export const resultBlock = pgTable("result_block", {
  jobId: text("job_id").notNull().references(() => job.id, { onDelete: "cascade" }),
  index: integer().notNull(),
  rowCount: integer("row_count").notNull(),
  bytes: bytea().notNull(),
}, (t) => [primaryKey({ columns: [t.jobId, t.index] })]);

/** A stored permutation: the order of a job's rows under one `where` and `sort`; least recently used ones are dropped. */
export const resultOrder = pgTable("result_order", {
  id: text().primaryKey(), // ord_…; cursors name it
  jobId: text("job_id").notNull().references(() => job.id, { onDelete: "cascade" }),
  key: text().notNull(), // canonical text of chunks done + where + sort
  rowCount: integer("row_count").notNull(),
  rows: bytea("rows").notNull(), // little-endian Uint32 row indices
  createdAt: instant("created_at").notNull().defaultNow(),
  lastUsedAt: instant("last_used_at").notNull().defaultNow(),
}, (t) => [index("result_order_job_key").on(t.jobId, t.key)]);

/** What happened to a job, for event streams that resume: id is the Last-Event-ID. */
export const jobEvent = pgTable("job_event", {
  id: bigserial({ mode: "number" }).primaryKey(),
  jobId: text("job_id").notNull().references(() => job.id, { onDelete: "cascade" }),
  at: instant("at").notNull().defaultNow(),
  type: text({ enum: ["job-queued", "job-started", "chunk-done", "job-done", "job-failed", "job-cancelled"] }).notNull(),
  data: jsonb().$type<Record<string, unknown>>().notNull(),
}, (t) => [index("job_event_job").on(t.jobId, t.id)]);
