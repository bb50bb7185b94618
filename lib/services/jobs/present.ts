import { inArray } from "drizzle-orm";
import { db, type Db, type Tx } from "@/db/client";
import { appUser, sampleSet } from "@/db/schema";
import type { Job } from "@/lib/schemas/api";
import { queuePlaces } from "./queue-place";
import type { JobRow } from "./row";

/**
 * Jobs as the API shows them, in the order given; three queries however many there are. Inside a transaction, `on` is
 * that transaction: a second connection per request could leave the pool waiting for itself.
 */
export async function presentJobs(rows: readonly JobRow[], on: Db | Tx = db()): Promise<Job[]> {
  if (rows.length === 0) return [];
  const setIds = [...new Set(rows.flatMap((row) => row.setId ?? []))];
  // One after the other: a transaction's connection takes one query at a time.
  const owners = await on.select({ id: appUser.id, name: appUser.name }).from(appUser).where(inArray(appUser.id, [...new Set(rows.map((row) => row.ownerId))]));
  const sets = setIds.length === 0 ? [] : await on.select({ id: sampleSet.id, name: sampleSet.name }).from(sampleSet).where(inArray(sampleSet.id, setIds));
  const places = await queuePlaces(rows.filter((row) => row.status === "queued" || row.status === "running").map((row) => row.id), on);
  const ownerNames = new Map(owners.map((owner) => [owner.id, owner.name]));
  const setNames = new Map(sets.map((set) => [set.id, set.name]));
  return rows.map((row) => ({
    id: row.id, title: row.title, status: row.status, lane: row.lane,
    owner: { id: row.ownerId, name: ownerNames.get(row.ownerId) ?? "" }, visibility: row.visibility,
    counts: {
      rows: row.rowCount, done: row.doneCount, ok: row.okCount, invalid: row.invalidCount,
      notConverged: row.notConvergedCount, warned: row.warningCount,
    },
    cases: row.caseNames ?? [],
    axes: (row.axes ?? []).map((axis) => ({ field: axis.field, unit: axis.unit, points: axis.shown.length })),
    columns: row.columns,
    sampleSet: row.setId ? { id: row.setId, version: row.setVersion ?? 1, name: setNames.get(row.setId) ?? "" } : null,
    specHash: row.specHash, engineVersion: row.engineVersion, constantsVersion: row.constantsVersion,
    queue: places.get(row.id) ?? null,
    createdAt: row.createdAt.toISOString(), startedAt: row.startedAt?.toISOString() ?? null,
    finishedAt: row.finishedAt?.toISOString() ?? null, error: row.error,
  }));
}

/** One job as the API shows it. */
export async function presentJob(row: JobRow, on: Db | Tx = db()): Promise<Job> {
  const [shown] = await presentJobs([row], on);
  return shown;
}
