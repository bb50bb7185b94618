import { eq, sql } from "drizzle-orm";
import { db, type Tx } from "@/db/client";
import { sampleChunk, sampleSet, sampleSetVersion } from "@/db/schema";
import { AppError } from "@/lib/errors";
import { newId } from "@/lib/ids";
import type { Actor } from "@/lib/schemas/actor";
import type { SampleSet } from "@/lib/schemas/api";
import { requireChange } from "../access";
import { recordAudit } from "../audit/record";
import type { PreparedSamples, SampleDocument } from "../intake/prepare-samples";
import { findSetRow, getSampleSet } from "./find";

/** The upload as it came, kept beside what was read from it. */
export type RawUpload = Pick<SampleDocument, "bytes" | "format" | "rawName">;

function requireSound(prepared: PreparedSamples): void {
  if (prepared.issues.length === 0) return;
  const [first] = prepared.issues;
  const count = prepared.issues.length === 1 ? "one fault" : `${prepared.issues.length} faults`;
  throw new AppError("invalid-samples", `The samples have ${count}. First: ${first.pointer || "document"}: ${first.message}`, { errors: prepared.issues });
}

async function insertVersion(tx: Tx, actor: Actor, setId: string, version: number, prepared: PreparedSamples, raw: RawUpload): Promise<void> {
  await tx.insert(sampleSetVersion).values({
    setId, version, createdBy: actor.userId, note: prepared.note, waterCount: prepared.waterCount, units: prepared.units,
    columns: prepared.columns, flags: prepared.flags, rawName: raw.rawName, rawType: raw.format === "csv" ? "text/csv" : "application/json",
    raw: Buffer.from(raw.bytes),
  });
  for (const [index, waters] of prepared.chunks.entries()) {
    await tx.insert(sampleChunk).values({ setId, version, index, waters: sql`${waters}::jsonb` });
  }
}

/** Stores a new sample set as its version 1. Throws `invalid-samples` with every fault. */
export async function createSampleSet(actor: Actor, prepared: PreparedSamples, raw: RawUpload): Promise<SampleSet> {
  requireSound(prepared);
  return db().transaction(async (tx) => {
    const id = newId("set");
    await tx.insert(sampleSet).values({
      id, ownerId: actor.userId, name: prepared.name ?? "Samples", description: prepared.description, visibility: prepared.visibility, latestVersion: 1,
    });
    await insertVersion(tx, actor, id, 1, prepared, raw);
    await recordAudit(tx, actor, { action: "sample-set-created", target: id, detail: { name: prepared.name, waters: prepared.waterCount } });
    return getSampleSet(actor, id, tx);
  });
}

/** Stores a new version; earlier ones stay. Throws `invalid-samples`, `not-found`, `forbidden`. */
export async function addSampleSetVersion(actor: Actor, setId: string, prepared: PreparedSamples, raw: RawUpload): Promise<SampleSet> {
  requireChange(actor, await findSetRow(actor, setId), `Sample set ${setId}`);
  requireSound(prepared);
  return db().transaction(async (tx) => {
    // Raised first: the row's lock makes versions that come at once queue up for their numbers.
    const [row] = await tx.update(sampleSet).set({ latestVersion: sql`${sampleSet.latestVersion} + 1` }).where(eq(sampleSet.id, setId)).returning({ version: sampleSet.latestVersion });
    await insertVersion(tx, actor, setId, row.version, prepared, raw);
    await recordAudit(tx, actor, { action: "sample-set-version-added", target: setId, detail: { version: row.version, waters: prepared.waterCount } });
    return getSampleSet(actor, setId, tx);
  });
}
