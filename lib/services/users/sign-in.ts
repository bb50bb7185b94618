/**
 * Password sign-in: limits first, then the password, then a session row whose id goes into the JWT.
 */
import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { appUser, session } from "@/db/schema";
import { newId } from "@/lib/ids";
import { recordAudit } from "../audit/record";
import { clearWindow, consumeWindow } from "../limits/consume-window";
import { verifyPassword } from "./password-hash";

/** Attempts at one address in 15 minutes, then attempts at all addresses in a minute. A success clears the first. */
export const SIGN_IN_LIMITS = { perAccount: 10, perAccountSeconds: 900, global: 120, globalSeconds: 60 } as const;
/** A session ends after 14 days at the latest. */
export const SESSION_SECONDS = 14 * 24 * 3600;

export type SignInResult =
  | { ok: true; userId: string; sid: string; name: string; email: string }
  | { ok: false; reason: "credentials" | "rate-limited"; retryAfterSeconds?: number };

/** Checks address and password and opens a session. Unknown, disabled and wrong are the same answer to the outside. */
export async function signIn(email: string, password: string, userAgent: string | null): Promise<SignInResult> {
  const address = email.trim().toLowerCase().slice(0, 254);
  const bucket = `sign-in:${address}`;
  const everyone = await consumeWindow("sign-in", SIGN_IN_LIMITS.globalSeconds);
  const account = await consumeWindow(bucket, SIGN_IN_LIMITS.perAccountSeconds);
  const waits = [
    everyone.count > SIGN_IN_LIMITS.global ? everyone.secondsLeft : 0,
    account.count > SIGN_IN_LIMITS.perAccount ? account.secondsLeft : 0,
  ];
  const retryAfterSeconds = Math.max(...waits);
  if (retryAfterSeconds > 0) {
    // One line a window, not one an attempt: the trail must not be flooded by whoever is being refused.
    if (account.count === SIGN_IN_LIMITS.perAccount + 1) {
      await recordAudit(db(), null, { action: "sign-in-limited", target: null, detail: { email: address } });
    }
    return { ok: false, reason: "rate-limited", retryAfterSeconds };
  }
  const user = await db().query.appUser.findFirst({ where: eq(appUser.email, address) });
  const fits = await verifyPassword(user?.passwordHash ?? null, password.slice(0, 1024));
  if (!user || !fits || user.disabledAt) {
    const why = !user ? "unknown address" : !fits ? "wrong password" : "disabled";
    await recordAudit(db(), null, { action: "sign-in-failed", target: user?.id ?? null, detail: { email: address, why } });
    return { ok: false, reason: "credentials" };
  }
  const sid = newId("sid");
  await db().transaction(async (tx) => {
    await tx.insert(session).values({
      sid, userId: user.id, expiresAt: new Date(Date.now() + SESSION_SECONDS * 1000), userAgent: userAgent?.slice(0, 300) ?? null,
    });
    await tx.update(appUser).set({ lastSignInAt: new Date() }).where(eq(appUser.id, user.id));
    await recordAudit(tx, { userId: user.id, via: "session", requestId: null }, { action: "sign-in", target: user.id });
  });
  await clearWindow(bucket);
  return { ok: true, userId: user.id, sid, name: user.name, email: user.email };
}
