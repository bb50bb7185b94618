import { and, eq, gt, isNull, sql } from "drizzle-orm";
import { db, type Tx } from "@/db/client";
import { appUser, oneTimeLink } from "@/db/schema";
import { env, publicUrl } from "@/lib/env";
import { AppError } from "@/lib/errors";
import { newId, randomBase62 } from "@/lib/ids";
import type { Actor } from "@/lib/schemas/actor";
import type { PasswordLink } from "@/lib/schemas/api";
import { recordAudit } from "../audit/record";
import { secretHash } from "../secret-hash";
import { revokeSessionsOf } from "../sessions/revoke";
import { hashPassword } from "./password-hash";
import { passwordIssues } from "./password-rules";

const LINK_DAYS = 7;

/**
 * A one-time address for setting a password, good for 7 days; older unused ones of that person stop working. The secret
 * stands behind `#`, so it reaches no server log; only its hash is stored.
 */
export async function createPasswordLink(actor: Actor | null, userId: string): Promise<PasswordLink> {
  const secret = randomBase62(32);
  const expiresAt = new Date(Date.now() + LINK_DAYS * 86_400_000);
  await db().transaction(async (tx) => {
    const [user] = await tx.select({ id: appUser.id }).from(appUser).where(eq(appUser.id, userId));
    if (!user) throw new AppError("not-found", `There is no user ${userId}.`);
    await tx.delete(oneTimeLink).where(and(eq(oneTimeLink.userId, userId), isNull(oneTimeLink.usedAt)));
    await tx.insert(oneTimeLink).values({ id: newId("otl"), userId, purpose: "set-password", hash: secretHash(secret), expiresAt });
    await recordAudit(tx, actor, { action: "password-link-created", target: userId });
  });
  return { url: `${publicUrl(env())}/set-password#${secret}`, expiresAt: expiresAt.toISOString() };
}

/**
 * Spends a link and sets the password; every session of the person ends. Throws `invalid-body` with the faults of the
 * password (the link stays good), `not-found` for a link that is unknown, used or too old.
 */
export async function spendPasswordLink(secret: string, password: string): Promise<{ email: string }> {
  return db().transaction(async (tx) => {
    const [found] = await tx.select({ link: oneTimeLink, user: appUser }).from(oneTimeLink)
      .innerJoin(appUser, eq(appUser.id, oneTimeLink.userId))
      .where(and(
        eq(oneTimeLink.hash, secretHash(secret)), isNull(oneTimeLink.usedAt), gt(oneTimeLink.expiresAt, sql`now()`),
        isNull(appUser.disabledAt),
      )).for("update");
    if (!found) throw new AppError("not-found", "This link was used already, is too old or was replaced; ask an administrator for a new one.");
    await setPassword(tx, found.user, password);
    await tx.update(oneTimeLink).set({ usedAt: sql`now()` }).where(eq(oneTimeLink.id, found.link.id));
    await recordAudit(tx, { userId: found.user.id, via: "session", requestId: null }, { action: "password-set", target: found.user.id });
    return { email: found.user.email };
  });
}

/** Stores a new password after checking it, and ends the person's sessions. For the link above and for the demo's seed. */
export async function setPassword(tx: Tx, user: { id: string; email: string }, password: string): Promise<void> {
  const issues = passwordIssues(password, user.email);
  if (issues.length > 0) throw new AppError("invalid-body", issues[0].message, { errors: issues });
  await tx.update(appUser).set({ passwordHash: await hashPassword(password) }).where(eq(appUser.id, user.id));
  await revokeSessionsOf(tx, user.id);
}
