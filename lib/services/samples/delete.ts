import { eq, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { sampleSet } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import { requireChange } from "../access";
import { recordAudit } from "../audit/record";
import { findSetRow } from "./find";

/** Takes a sample set out of every list. Its rows stay, since finished jobs refer to them. */
export async function deleteSampleSet(actor: Actor, setId: string): Promise<void> {
  const row = await findSetRow(actor, setId);
  requireChange(actor, row, `Sample set ${setId}`);
  await db().transaction(async (tx) => {
    await tx.update(sampleSet).set({ deletedAt: sql`now()` }).where(eq(sampleSet.id, setId));
    await recordAudit(tx, actor, { action: "sample-set-deleted", target: setId, detail: { name: row.name } });
  });
}
