import { and, eq, isNull } from "drizzle-orm";
import type { Db, Tx } from "@/db/client";
import { sampleSet, sampleSetVersion } from "@/db/schema";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { canRead, requireScope } from "../access";

export interface SetReference { id: string; version: number; name: string; waterCount: number; units: Record<string, string> }

/**
 * The sample set a spec names (`set_…` or `set_…@3`), its version pinned. Throws `invalid-spec` at /waters/set where
 * the actor can see no such set or version, `forbidden` without the scope samples:read.
 */
export async function resolveSetReference(on: Db | Tx, actor: Actor, spec: JobSpec): Promise<SetReference> {
  const text = spec.waters.set ?? "";
  requireScope(actor, "samples:read");
  const match = /^(set_[0-9A-Za-z]+)(?:@(\d{1,9}))?$/.exec(text);
  const fault = (message: string, remedy: string): AppError => new AppError("invalid-spec", message, {
    errors: [{ pointer: "/waters/set", code: "unknown-set", message, value: text.slice(0, 80), remedy }],
  });
  if (!match) throw fault(`${text.slice(0, 80)} does not name a sample set.`, "Write set_… or set_…@<version>, as GET /api/v1/sample-sets lists them.");
  const [set] = await on.select().from(sampleSet).where(and(eq(sampleSet.id, match[1]), isNull(sampleSet.deletedAt)));
  if (!set || !canRead(actor, set)) throw fault(`There is no sample set ${match[1]}.`, "GET /api/v1/sample-sets lists those you may use.");
  const version = match[2] === undefined ? set.latestVersion : Number(match[2]);
  const [found] = await on.select({ waterCount: sampleSetVersion.waterCount, units: sampleSetVersion.units })
    .from(sampleSetVersion).where(and(eq(sampleSetVersion.setId, set.id), eq(sampleSetVersion.version, version)));
  if (!found) throw fault(`Sample set ${set.id} has no version ${version}.`, `Its latest version is ${set.latestVersion}.`);
  return { id: set.id, version, name: set.name, ...found };
}
