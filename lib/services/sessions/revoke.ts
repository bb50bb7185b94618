import { and, eq, isNull, sql } from "drizzle-orm";
import { db, type Tx } from "@/db/client";
import { session } from "@/db/schema";
import { recordAudit } from "../audit/record";

/** Ends one session (signing out). The cookie is worthless from the next request on. */
export async function revokeSession(sid: string): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.update(session).set({ revokedAt: sql`now()` })
      .where(and(eq(session.sid, sid), isNull(session.revokedAt))).returning({ userId: session.userId });
    if (row) await recordAudit(tx, { userId: row.userId, via: "session", requestId: null }, { action: "sign-out", target: row.userId });
  });
}

/** Ends every session of a person, inside the transaction that disables them or sets their password. */
export async function revokeSessionsOf(tx: Tx, userId: string): Promise<void> {
  await tx.update(session).set({ revokedAt: sql`now()` }).where(and(eq(session.userId, userId), isNull(session.revokedAt)));
}
