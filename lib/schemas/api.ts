/**
 * Bodies of the HTTP API. The routes validate with these, the OpenAPI document is generated from them, the browser's
 * client takes its types from them. Times are RFC 3339 UTC.
 */
import { z } from "zod";
import { SCOPES } from "./actor";
import { columnDescriptor } from "./columns";

export const instantText = z.iso.datetime().meta({ description: "RFC 3339, UTC" });

export const issue = z.object({
  pointer: z.string().meta({ description: "JSON Pointer (RFC 6901) to the place" }),
  code: z.string(),
  message: z.string(),
  value: z.string().optional(),
  remedy: z.string().optional(),
});
/** RFC 9457 problem document. */
export const problem = z.object({
  type: z.string(), title: z.string(), status: z.int(), detail: z.string(),
  instance: z.string().optional(), requestId: z.string(), errors: z.array(issue).optional(),
});
export type Problem = z.infer<typeof problem>;

export const jobStatus = z.enum(["queued", "running", "done", "failed", "cancelled"]);
export const jobCounts = z.object({
  rows: z.int(), done: z.int(), ok: z.int(), invalid: z.int(), notConverged: z.int(), warned: z.int(),
});
export const job = z.object({
  id: z.string(), title: z.string(), status: jobStatus, lane: z.enum(["interactive", "batch"]),
  owner: z.object({ id: z.string(), name: z.string() }),
  visibility: z.enum(["private", "team"]),
  counts: jobCounts,
  cases: z.array(z.string()), axes: z.array(z.object({ field: z.string(), unit: z.string(), points: z.int() })),
  columns: z.array(columnDescriptor).nullable().meta({ description: "null until the job is planned" }),
  sampleSet: z.object({ id: z.string(), version: z.int(), name: z.string() }).nullable(),
  specHash: z.string(), engineVersion: z.string(), constantsVersion: z.string(),
  queue: z.object({ rowsAhead: z.int(), secondsEstimated: z.number().nullable() }).nullable().meta({ description: "Place in the queue while queued or running" }),
  createdAt: instantText, startedAt: instantText.nullable(), finishedAt: instantText.nullable(),
  error: z.string().nullable(),
});
export type Job = z.infer<typeof job>;
export const jobPage = z.object({ jobs: z.array(job), nextCursor: z.string().nullable() });

/** One cell; null in value columns of failed rows and where a quantity does not exist. */
export const cell = z.union([z.number(), z.string(), z.null()]);
export const resultPage = z.object({
  job: z.object({ id: z.string(), status: jobStatus, specHash: z.string(), engineVersion: z.string(), constantsVersion: z.string() }),
  columns: z.array(columnDescriptor),
  rowCount: z.int().meta({ description: "Rows under the present `where`, of those stored so far" }),
  firstRow: z.int().meta({ description: "Position of the first row of this page in the ordering" }),
  rows: z.array(z.record(z.string(), cell)),
  rowIndices: z.array(z.int()).meta({ description: "Index of each row in the job, which names it for good" }),
  nextCursor: z.string().nullable(),
});
export type ResultPage = z.infer<typeof resultPage>;

export const solveResponse = z.object({
  rows: z.array(z.record(z.string(), cell)),
  columns: z.array(columnDescriptor),
  summary: z.object({ rows: z.int(), ok: z.int(), invalid: z.int(), notConverged: z.int(), warned: z.int(), milliseconds: z.number(), engineVersion: z.string(), constantsVersion: z.string() }),
  warnings: z.array(z.string()),
});
export type SolveResponse = z.infer<typeof solveResponse>;

/** Server-sent events of a job; `id:` is the Last-Event-ID. */
export const jobEvent = z.object({
  type: z.enum(["job-queued", "job-started", "chunk-done", "job-done", "job-failed", "job-cancelled"]),
  jobId: z.string(), at: instantText, status: jobStatus, counts: jobCounts,
  rowsPerSecond: z.number().nullable(), secondsLeft: z.number().nullable(),
});
export type JobEvent = z.infer<typeof jobEvent>;

export const sampleSet = z.object({
  id: z.string(), name: z.string(), description: z.string(), visibility: z.enum(["private", "team"]),
  owner: z.object({ id: z.string(), name: z.string() }),
  version: z.int(), waterCount: z.int(), columns: z.array(z.string()), units: z.record(z.string(), z.string()),
  flagCount: z.int(), createdAt: instantText, updatedAt: instantText,
});
export type SampleSet = z.infer<typeof sampleSet>;
export const sampleSetPage = z.object({ sampleSets: z.array(sampleSet), nextCursor: z.string().nullable() });
export const sampleFlag = z.object({ water: z.string(), code: z.string(), column: z.string().nullable(), message: z.string() });
export const sampleRows = z.object({
  id: z.string(), version: z.int(), columns: z.array(z.string()), units: z.record(z.string(), z.string()),
  firstRow: z.int(), rowCount: z.int(), rows: z.array(z.record(z.string(), z.unknown())), flags: z.array(sampleFlag),
  nextCursor: z.string().nullable(),
});
export type SampleRows = z.infer<typeof sampleRows>;

export const scope = z.enum(SCOPES);
export const token = z.object({
  id: z.string(), name: z.string(), prefix: z.string(), lastFour: z.string(), scopes: z.array(scope),
  owner: z.object({ id: z.string(), name: z.string(), email: z.string() }),
  createdAt: instantText, expiresAt: instantText.nullable(), lastUsedAt: instantText.nullable(),
  revokedAt: instantText.nullable(), state: z.enum(["active", "expired", "revoked"]),
});
export type Token = z.infer<typeof token>;
export const tokenPage = z.object({ tokens: z.array(token), nextCursor: z.string().nullable() });
export const tokenCreate = z.strictObject({
  name: z.string().trim().min(1).max(80), scopes: z.array(scope).min(1),
  expiresAt: instantText.nullable().optional().meta({ description: "null: no expiry; default 90 days; at most 365 days ahead" }),
});
export const tokenCreated = token.extend({ token: z.string().meta({ description: "The token itself, shown this once" }) });
export type TokenCreated = z.infer<typeof tokenCreated>;

/** The signed-in person or the token's owner, and what this request may do. */
export const role = z.enum(["administrator", "modeller", "analyst"]);
export const me = z.object({
  id: z.string(), email: z.string(), name: z.string(), role,
  via: z.enum(["session", "token", "command"]), scopes: z.array(scope),
  limits: z.object({
    rowsPerJob: z.int(), backlogRows: z.int(), rowsPerSolve: z.int(), requestsPerMinute: z.int(),
  }),
});
export type Me = z.infer<typeof me>;

export const user = z.object({
  id: z.string(), email: z.string(), name: z.string(), role,
  state: z.enum(["active", "invited", "disabled"]).meta({ description: "invited: no password set yet" }),
  createdAt: instantText, lastSignInAt: instantText.nullable(), disabledAt: instantText.nullable(),
});
export type User = z.infer<typeof user>;
export const userPage = z.object({ users: z.array(user), nextCursor: z.string().nullable() });
export const userCreate = z.strictObject({
  email: z.email().max(254), name: z.string().trim().min(1).max(120), role,
});
export type UserCreate = z.infer<typeof userCreate>;
export const passwordLink = z.object({
  url: z.string().meta({ description: "One-time address for setting a password, shown this once; the secret stands behind `#`" }),
  expiresAt: instantText,
});
export type PasswordLink = z.infer<typeof passwordLink>;
export const userCreated = user.extend({ passwordLink });
export type UserCreated = z.infer<typeof userCreated>;
export const userPatch = z.strictObject({
  role: role.optional(), name: z.string().trim().min(1).max(120).optional(),
  disabled: z.boolean().optional().meta({ description: "true ends every session and refuses every token at once" }),
});
export type UserPatch = z.infer<typeof userPatch>;

export const passwordSet = z.strictObject({
  secret: z.string().min(1).max(200).meta({ description: "What stands behind `#` in the link" }),
  password: z.string().max(1024).meta({ description: "8 characters or more; 15 or more advised; common ones are refused" }),
});
export const passwordSetDone = z.object({ email: z.string() });

export const auditEvent = z.object({
  id: z.int(), at: instantText, actor: z.object({ id: z.string(), name: z.string(), email: z.string() }).nullable(),
  via: z.enum(["session", "token", "command", "system"]), action: z.string(), target: z.string().nullable(),
  detail: z.record(z.string(), z.unknown()), requestId: z.string().nullable(),
});
export type AuditEvent = z.infer<typeof auditEvent>;
export const auditPage = z.object({ events: z.array(auditEvent), nextCursor: z.string().nullable() });

export const constantEntry = z.object({
  name: z.string(), formula: z.string(), kind: z.enum(["species", "solid"]), charge: z.int().nullable(),
  reaction: z.string().meta({ description: "As printed in the source; empty for a component" }),
  logK: z.number().nullable().meta({ description: "At the temperature asked for; null for a component" }),
  logK25: z.number().nullable(), source: z.string().nullable(), reference: z.string().nullable(),
  fromMemory: z.boolean(), note: z.string().nullable(),
  logKs: z.array(z.number()).nullable().meta({ description: "At each of `temperatures`; null for a component" }),
  form: z.union([
    z.object({ kind: z.literal("analytic"), a: z.number(), bT: z.number(), "c/T": z.number(), "d·log10T": z.number(), "e/T2": z.number() }),
    z.object({ kind: z.literal("vantHoff"), logK25: z.number(), reactionEnthalpy: z.number().meta({ description: "kJ/mol" }) }),
  ]).nullable().meta({ description: "log K over temperature: log K = a + bT·T + (c/T)/T + (d·log10T)·log10 T + (e/T2)/T², T in kelvin; or van 't Hoff from 25 °C" }),
  ionSize: z.number().nullable().meta({ description: "Å (Kielland 1937; 4 for pairs he does not list)" }),
  truesdellJones: z.object({ a: z.number(), b: z.number() }).nullable().meta({ description: "å in Å and b in kg/mol (Truesdell & Jones 1974, from memory)" }),
  conductance: z.number().nullable().meta({ description: "Limiting equivalent conductance at 25 °C, S·cm²/eq (from memory)" }),
});
export type ConstantEntry = z.infer<typeof constantEntry>;
export const constantsTable = z.object({
  constantsVersion: z.string(), temperature: z.number(),
  temperatures: z.array(z.number()).meta({ description: "°C, those of `logKs`" }),
  reference: z.object({ temperature: z.number(), pressure: z.string(), state: z.string() }).meta({ description: "Reference conditions of every log K" }),
  entries: z.array(constantEntry),
  methods: z.array(z.object({ name: z.string(), formula: z.string(), source: z.string(), range: z.string(), fromMemory: z.boolean() })).meta({ description: "How the figures become results" }),
});
export type ConstantsTable = z.infer<typeof constantsTable>;

export const health = z.object({
  status: z.enum(["ok", "degraded"]), database: z.enum(["ok", "down"]),
  workers: z.int().meta({ description: "Worker processes listening for work, on whatever host" }),
  queue: z.object({ waitingRows: z.int(), runningJobs: z.int() }).nullable(),
  engineVersion: z.string(), constantsVersion: z.string(), time: instantText,
});
export type Health = z.infer<typeof health>;

/** POST /jobs?dry=true: what the spec would do, nothing stored. */
export const jobDryRun = z.object({
  rowCount: z.int(), waterCount: z.int(), cases: z.array(z.string()), issues: z.array(issue),
  columns: z.array(columnDescriptor), rows: z.array(z.record(z.string(), cell)).meta({ description: "The first rows, solved" }),
});
export type JobDryRun = z.infer<typeof jobDryRun>;

/** JSON body of POST /sample-sets and POST /sample-sets/{id}/versions; rows as `waters.rows` of the job spec. */
export const sampleSetCreate = z.strictObject({
  name: z.string().trim().min(1).max(120), description: z.string().max(2000).default(""),
  visibility: z.enum(["private", "team"]).default("team"), note: z.string().max(500).default(""),
  units: z.record(z.string(), z.string()).default({}).meta({ description: "Default unit per column for bare numbers" }),
  rows: z.array(z.record(z.string(), z.unknown())).min(1),
});
export type SampleSetCreate = z.infer<typeof sampleSetCreate>;
export const sampleSetVersionCreate = sampleSetCreate.pick({ note: true, units: true, rows: true });

/** Query of every list: `limit` and an opaque `cursor` from the page before. */
export const pageQuery = z.strictObject({
  limit: z.coerce.number().int().min(1).max(200).default(50), cursor: z.string().max(500).optional(),
});
export const jobListQuery = pageQuery.extend({
  status: jobStatus.optional(), owner: z.enum(["me", "team"]).default("team"), q: z.string().max(200).optional(),
});
export type JobListQuery = z.infer<typeof jobListQuery>;
export const jobCreateQuery = z.strictObject({
  dry: z.enum(["true", "false"]).default("false").meta({ description: "true: check, count and solve the first rows; store nothing" }),
  visibility: z.enum(["private", "team"]).default("team"),
});
export const resultsQuery = z.strictObject({
  format: z.enum(["json", "ndjson", "csv", "arrow"]).optional().meta({ description: "Wins over Accept" }),
  select: z.string().max(20_000).optional().meta({ description: "Columns or column groups, separated by commas; default all" }),
  where: z.array(z.string().max(300)).max(20).default([]).meta({ description: "`<column> <op> <value>` with = != < <= > >= or `null`; repeats are ANDed" }),
  sort: z.string().max(300).optional().meta({ description: "Column, with `-` before it for descending" }),
  limit: z.coerce.number().int().min(1).max(1000).default(100),
  cursor: z.string().max(2000).optional(),
  firstRow: z.coerce.number().int().min(0).optional().meta({ description: "Position in the ordering to start at: for pages instead of a cursor, for downloads to resume a cut one" }),
  footer: z.enum(["true", "false"]).default("false").meta({ description: "ndjson and csv: a last record with row count and SHA-256 of what came before" }),
});
export type ResultsQuery = z.infer<typeof resultsQuery>;
export const sampleSetListQuery = pageQuery.extend({ q: z.string().max(200).optional() });
export const sampleUploadQuery = z.strictObject({
  name: z.string().trim().min(1).max(120).optional().meta({ description: "For CSV bodies; default: the file name" }),
  description: z.string().max(2000).default(""), visibility: z.enum(["private", "team"]).default("team"),
  note: z.string().max(500).default(""),
});
export const sampleRowsQuery = z.strictObject({
  version: z.coerce.number().int().min(1).optional(), limit: z.coerce.number().int().min(1).max(1000).default(100),
  cursor: z.string().max(500).optional(), firstRow: z.coerce.number().int().min(0).optional(),
});
export const tokenListQuery = pageQuery.extend({
  owner: z.enum(["me", "all"]).default("me").meta({ description: "all: everyone's, administrators only" }),
});
export const constantsQuery = z.strictObject({
  temperature: z.coerce.number().min(0).max(90).default(25),
  temperatures: z.string().max(400).regex(/^\d+(\.\d+)?(,\d+(\.\d+)?){0,49}$/, "Write up to 50 temperatures in °C, such as 0,10,25,40").refine((text) => text.split(",").every((each) => Number(each) <= 90), "Temperatures go from 0 to 90 °C").default("0,10,25,40")
    .meta({ description: "°C, up to 50, for log K over temperature", examples: ["0,10,25,40"] }),
});
export const auditQuery = pageQuery.extend({ action: z.string().max(60).optional() });
