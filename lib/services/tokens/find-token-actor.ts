import { and, eq, gt, isNull, or, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { apiToken, appUser } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import { ROLE_SCOPES } from "../access";
import { findSessionActor } from "../sessions/find-session-actor";
import { secretHash } from "../secret-hash";
import { isTokenShaped } from "./token-format";

/** The actor of a live token, or null: mistyped (no query is made), unknown, revoked, expired, or its owner disabled. */
export async function findTokenActor(token: string, requestId: string | null): Promise<Actor | null> {
  if (!isTokenShaped(token)) return null;
  const [row] = await db()
    .select({ token: apiToken, user: appUser })
    .from(apiToken).innerJoin(appUser, eq(appUser.id, apiToken.userId))
    .where(and(
      eq(apiToken.hash, secretHash(token)), isNull(apiToken.revokedAt), isNull(appUser.disabledAt),
      or(isNull(apiToken.expiresAt), gt(apiToken.expiresAt, sql`now()`)),
    ));
  if (!row) return null;
  const lastUsed = row.token.lastUsedAt?.getTime() ?? 0;
  if (Date.now() - lastUsed > 60_000) {
    await db().update(apiToken).set({ lastUsedAt: sql`now()` }).where(eq(apiToken.id, row.token.id));
  }
  const allowed = ROLE_SCOPES[row.user.role];
  return {
    userId: row.user.id, email: row.user.email, name: row.user.name, role: row.user.role, via: "token",
    scopes: allowed.filter((scope) => row.token.scopes.includes(scope)),
    sessionId: null, tokenId: row.token.id, requestId,
  };
}

/** Whether the credential behind an actor still holds; asked again and again while an event stream is open. */
export async function isActorLive(actor: Actor): Promise<boolean> {
  if (actor.tokenId) {
    const [row] = await db().select({ id: apiToken.id }).from(apiToken)
      .innerJoin(appUser, eq(appUser.id, apiToken.userId))
      .where(and(
        eq(apiToken.id, actor.tokenId), isNull(apiToken.revokedAt), isNull(appUser.disabledAt),
        or(isNull(apiToken.expiresAt), gt(apiToken.expiresAt, sql`now()`)),
      ));
    return row !== undefined;
  }
  if (!actor.sessionId) return true;
  return (await findSessionActor(actor.sessionId, actor.requestId)) !== null;
}
