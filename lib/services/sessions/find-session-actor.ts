import { and, eq, gt, isNull, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { appUser, session } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import { ROLE_SCOPES } from "../access";

/** The actor of a live session, or null for one that is revoked, expired, unknown, or whose owner is disabled. */
export async function findSessionActor(sid: string, requestId: string | null): Promise<Actor | null> {
  const [row] = await db()
    .select({ user: appUser, lastSeenAt: session.lastSeenAt })
    .from(session).innerJoin(appUser, eq(appUser.id, session.userId))
    .where(and(eq(session.sid, sid), isNull(session.revokedAt), gt(session.expiresAt, sql`now()`), isNull(appUser.disabledAt)));
  if (!row) return null;
  // To the minute is enough, and saves a write at every request.
  if (Date.now() - row.lastSeenAt.getTime() > 60_000) {
    await db().update(session).set({ lastSeenAt: sql`now()` }).where(eq(session.sid, sid));
  }
  const { user } = row;
  return {
    userId: user.id, email: user.email, name: user.name, role: user.role, via: "session",
    scopes: ROLE_SCOPES[user.role], sessionId: sid, tokenId: null, requestId,
  };
}
