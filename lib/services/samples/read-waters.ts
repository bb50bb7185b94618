import { and, asc, eq, lt } from "drizzle-orm";
import { db } from "@/db/client";
import { sampleChunk, sampleSetVersion } from "@/db/schema";
import { WATERS_PER_CHUNK } from "../intake/prepare-samples";
import type { JobSpec } from "@/lib/schemas/job-spec";

/** The waters of a stored version in order (all, or about the first `limit`), and the units of its bare numbers. */
export async function readSetWaters(
  setId: string, version: number, limit = Infinity,
): Promise<{ waters: Record<string, unknown>[]; units: Record<string, string> }> {
  const [head] = await db().select({ units: sampleSetVersion.units }).from(sampleSetVersion)
    .where(and(eq(sampleSetVersion.setId, setId), eq(sampleSetVersion.version, version)));
  const chunks = await db().select({ waters: sampleChunk.waters }).from(sampleChunk)
    .where(and(eq(sampleChunk.setId, setId), eq(sampleChunk.version, version), Number.isFinite(limit) ? lt(sampleChunk.index, Math.ceil(limit / WATERS_PER_CHUNK)) : undefined))
    .orderBy(asc(sampleChunk.index));
  return { waters: chunks.flatMap((chunk) => chunk.waters).slice(0, limit), units: head?.units ?? {} };
}

/** The spec with the set's units under its own: what the spec says about a column wins. */
export function specWithSetUnits(spec: JobSpec, units: Record<string, string>): JobSpec {
  return { ...spec, waters: { ...spec.waters, units: { ...units, ...spec.waters.units } } } as JobSpec;
}
