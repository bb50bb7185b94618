import { and, eq, isNull, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { apiToken } from "@/db/schema";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import { recordAudit } from "../audit/record";

/**
 * Revokes a token; it fails from its next request on. One's own, or for administrators anybody's; revoking twice is
 * no error. Somebody else's token is `not-found`.
 */
export async function revokeToken(actor: Actor, tokenId: string): Promise<void> {
  const mayAll = actor.scopes.includes("admin");
  await db().transaction(async (tx) => {
    const [found] = await tx.select({ userId: apiToken.userId, revokedAt: apiToken.revokedAt }).from(apiToken)
      .where(and(eq(apiToken.id, tokenId), mayAll ? undefined : eq(apiToken.userId, actor.userId)));
    if (!found) throw new AppError("not-found", `There is no token ${tokenId} of yours.`);
    const [row] = await tx.update(apiToken).set({ revokedAt: sql`now()`, revokedBy: actor.userId })
      .where(and(eq(apiToken.id, tokenId), isNull(apiToken.revokedAt))).returning({ name: apiToken.name });
    if (row) await recordAudit(tx, actor, { action: "token-revoked", target: tokenId, detail: { name: row.name, owner: found.userId } });
  });
}
