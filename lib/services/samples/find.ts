import { and, asc, desc, eq, gte, isNull, lt, or, sql } from "drizzle-orm";
import { db, type Db, type Tx } from "@/db/client";
import { appUser, sampleChunk, sampleSet, sampleSetVersion } from "@/db/schema";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { SampleRows, SampleSet } from "@/lib/schemas/api";
import { canRead } from "../access";
import { decodeCursor, encodeCursor } from "../cursor";
import { WATERS_PER_CHUNK } from "../intake/prepare-samples";
import { presentSampleSet } from "./present";




const head = {
  version: sampleSetVersion.version, waterCount: sampleSetVersion.waterCount, columns: sampleSetVersion.columns,
  units: sampleSetVersion.units, createdAt: sampleSetVersion.createdAt,
  flagCount: sql<number>`jsonb_array_length(${sampleSetVersion.flags})`.mapWith(Number),
};
const owner = { id: appUser.id, name: appUser.name };
const isLatest = and(eq(sampleSetVersion.setId, sampleSet.id), eq(sampleSetVersion.version, sampleSet.latestVersion));

/** The stored row of a set the actor may see. Throws `not-found` also for a deleted or somebody's private one. */
export async function findSetRow(actor: Actor, setId: string, on: Db | Tx = db()): Promise<typeof sampleSet.$inferSelect> {
  const [row] = await on.select().from(sampleSet).where(and(eq(sampleSet.id, setId), isNull(sampleSet.deletedAt)));
  if (!row || !canRead(actor, row)) throw new AppError("not-found", `There is no sample set ${setId}.`);
  return row;
}

/** A sample set at its latest version. */
export async function getSampleSet(actor: Actor, setId: string, on: Db | Tx = db()): Promise<SampleSet> {
  const row = await findSetRow(actor, setId, on);
  const [found] = await on.select({ head, owner }).from(sampleSet)
    .innerJoin(sampleSetVersion, isLatest).innerJoin(appUser, eq(appUser.id, sampleSet.ownerId)).where(eq(sampleSet.id, row.id));
  return presentSampleSet(row, found.head, found.owner);
}

/** Sample sets the actor may see, newest first. */
export async function listSampleSets(
  actor: Actor, query: { limit: number; cursor?: string; q?: string },
): Promise<{ sampleSets: SampleSet[]; nextCursor: string | null }> {
  const bound = ["sample-sets", actor.userId, query.q ?? null];
  const after = query.cursor ? decodeCursor(query.cursor, bound) : null;
  const visible = actor.role === "administrator" ? undefined : or(eq(sampleSet.ownerId, actor.userId), eq(sampleSet.visibility, "team"));
  const rows = await db().select({ set: sampleSet, head, owner }).from(sampleSet)
    .innerJoin(sampleSetVersion, isLatest).innerJoin(appUser, eq(appUser.id, sampleSet.ownerId))
    .where(and(
      isNull(sampleSet.deletedAt), visible,
      query.q ? sql`position(lower(${query.q}) in lower(${sampleSet.name})) > 0` : undefined,
      after ? sql`(${sampleSet.createdAt}, ${sampleSet.id}) < (${after.at}::timestamptz, ${after.id})` : undefined,
    ))
    .orderBy(desc(sampleSet.createdAt), desc(sampleSet.id)).limit(query.limit + 1);
  const page = rows.slice(0, query.limit);
  const last = page.at(-1)?.set;
  return {
    sampleSets: page.map((row) => presentSampleSet(row.set, row.head, row.owner)),
    nextCursor: rows.length > query.limit && last ? encodeCursor({ at: last.createdAt.toISOString(), id: last.id }, bound) : null,
  };
}

export interface SampleRowsQuery { version?: number; limit: number; cursor?: string; firstRow?: number }

/** A page of a version's waters with the flags on them. Versions never change, so positions are stable cursors. */
export async function readSampleRows(actor: Actor, setId: string, query: SampleRowsQuery): Promise<SampleRows> {
  const set = await findSetRow(actor, setId);
  const version = query.version ?? set.latestVersion;
  const [found] = await db().select({ units: sampleSetVersion.units, columns: sampleSetVersion.columns, waterCount: sampleSetVersion.waterCount, flags: sampleSetVersion.flags })
    .from(sampleSetVersion).where(and(eq(sampleSetVersion.setId, setId), eq(sampleSetVersion.version, version)));
  if (!found) throw new AppError("not-found", `Sample set ${setId} has no version ${version}; its latest is ${set.latestVersion}.`);
  const bound = ["sample-rows", setId, version];
  const firstRow = query.cursor ? Number(decodeCursor(query.cursor, bound).id) : (query.firstRow ?? 0);
  const end = Math.min(found.waterCount, firstRow + query.limit);
  const fromChunk = Math.floor(firstRow / WATERS_PER_CHUNK);
  const chunks = end <= firstRow ? [] : await db().select({ waters: sampleChunk.waters }).from(sampleChunk)
    .where(and(
      eq(sampleChunk.setId, setId), eq(sampleChunk.version, version),
      gte(sampleChunk.index, fromChunk), lt(sampleChunk.index, Math.ceil(end / WATERS_PER_CHUNK)),
    )).orderBy(asc(sampleChunk.index));
  const start = fromChunk * WATERS_PER_CHUNK;
  const rows = chunks.flatMap((chunk) => chunk.waters).slice(firstRow - start, end - start);
  const ids = new Set(rows.map((row) => String(row.id)));
  return {
    id: setId, version, columns: found.columns, units: found.units, firstRow, rowCount: found.waterCount, rows,
    flags: found.flags.filter((flag) => ids.has(flag.water)),
    nextCursor: end < found.waterCount ? encodeCursor({ at: new Date(0).toISOString(), id: String(end) }, bound) : null,
  };
}
