import { sql } from "drizzle-orm";
import { db, type Tx } from "@/db/client";
import { job } from "@/db/schema";
import { enqueueJob, laneFor, openQueue } from "@/jobs/queue";
import { CONSTANTS_VERSION } from "@/lib/chemistry/data";
import { countRows } from "@/lib/chemistry/resolve-job";
import { ENGINE_VERSION } from "@/lib/chemistry/version";
import { AppError } from "@/lib/errors";
import { newId } from "@/lib/ids";
import type { Actor } from "@/lib/schemas/actor";
import type { Job } from "@/lib/schemas/api";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { recordAudit } from "../audit/record";
import { ROLE_LIMITS } from "../access";
import { sha256Hex } from "../intake/canonical-json";
import type { PreparedSpec } from "../intake/prepare-spec";
import { type SetReference, resolveSetReference } from "../samples/resolve-reference";
import { requireBacklogRoom } from "./backlog";
import { claimKey, storeAnswer } from "./idempotency";
import { presentJob } from "./present";
import { jobColumns } from "./row";
import { requireSoundSpec } from "./sound-spec";

export interface JobSubmission {
  prepared: PreparedSpec;
  visibility: "private" | "team";
  idempotencyKey: string | null;
}

export interface SubmittedJob { job: Job; location: string; isReplay: boolean }

/** Rows of the job before anything is expanded. Throws `invalid-spec` beyond the role's limit. */
export function requireAllowedRows(actor: Actor, spec: JobSpec, waterCount: number): number {
  const rows = countRows(spec, waterCount);
  const limit = ROLE_LIMITS[actor.role].rowsPerJob;
  if (Number.isFinite(rows) && rows <= limit) return rows;
  const message = `The job would have ${rows} rows; the role ${actor.role} may submit ${limit} at once.`;
  throw new AppError("invalid-spec", message, {
    errors: [{ pointer: spec.vary ? "/vary" : "/waters", code: "too-many-rows", message, value: String(rows), remedy: "Fewer points on an axis, fewer cases, or several jobs." }],
  });
}

/**
 * Submits a job: row, planning item, event, audit line and the answer to its Idempotency-Key in ONE transaction.
 * Throws `invalid-spec`, `backlog-full`, `idempotency-mismatch`, `conflict` (the key's first request is under way).
 */
export async function createJob(actor: Actor, submission: JobSubmission): Promise<SubmittedJob> {
  const spec = requireSoundSpec(submission.prepared);
  const requestHash = sha256Hex(`POST /api/v1/jobs ${submission.visibility} ${submission.prepared.hash}`);
  const key = submission.idempotencyKey;
  await openQueue();
  return db().transaction(async (tx) => {
    const earlier = key === null ? null : await claimKey(tx, actor.userId, key, requestHash);
    if (earlier) return { job: earlier.body as Job, location: earlier.location ?? "", isReplay: true };
    const set = submission.prepared.inlineWaters === null ? await resolveSetReference(tx, actor, spec) : null;
    const waterCount = set?.waterCount ?? submission.prepared.inlineWaters ?? 0;
    const rowCount = requireAllowedRows(actor, spec, waterCount);
    await requireBacklogRoom(tx, actor, rowCount);
    const body = await insertJob(tx, actor, submission, spec, set, rowCount);
    const location = `/api/v1/jobs/${body.id}`;
    if (key !== null) await storeAnswer(tx, actor.userId, key, requestHash, { status: 201, body, location });
    return { job: body, location, isReplay: false };
  });
}

async function insertJob(
  tx: Tx, actor: Actor, submission: JobSubmission, spec: JobSpec, set: SetReference | null, rowCount: number,
): Promise<Job> {
  const [row] = await tx.insert(job).values({
    id: newId("job"), ownerId: actor.userId, title: spec.title ?? defaultTitle(set, submission.prepared.inlineWaters),
    spec: sql`${submission.prepared.json}::json`, specHash: submission.prepared.hash,
    setId: set?.id ?? null, setVersion: set?.version ?? null, visibility: submission.visibility,
    status: "queued", lane: laneFor(rowCount), rowCount, caseNames: spec.cases.map((each) => each.name),
    engineVersion: ENGINE_VERSION, constantsVersion: CONSTANTS_VERSION,
  }).returning(jobColumns);
  await enqueueJob(tx, row.id);
  await recordAudit(tx, actor, { action: "job-submitted", target: row.id, detail: { rows: rowCount, title: row.title } });
  return presentJob(row, tx);
}

const defaultTitle = (set: SetReference | null, inlineWaters: number | null): string =>
  set ? set.name : inlineWaters === 1 ? "One water" : `${inlineWaters ?? 0} waters`;
