import { and, eq, isNotNull, isNull, ne, sql } from "drizzle-orm";
import { db, type Tx } from "@/db/client";
import { appUser } from "@/db/schema";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { User, UserPatch } from "@/lib/schemas/api";
import { recordAudit } from "../audit/record";
import { revokeSessionsOf } from "../sessions/revoke";
import { presentUser } from "./present";

/** Serialises changes of who is administrator, so that two at once cannot leave none. */
const ADMINISTRATORS_LOCK = 7_245_811;

/**
 * Changes name, role or disabled state. Disabling ends sessions and refuses tokens at once (running jobs go on).
 * Throws `not-found`, or `conflict` where no active administrator would be left.
 */
export async function updateUser(actor: Actor, userId: string, patch: UserPatch): Promise<User> {
  return db().transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${ADMINISTRATORS_LOCK})`);
    const [before] = await tx.select().from(appUser).where(eq(appUser.id, userId)).for("update");
    if (!before) throw new AppError("not-found", `There is no user ${userId}.`);
    const losesAdmin = before.role === "administrator" && ((patch.role !== undefined && patch.role !== "administrator") || patch.disabled === true);
    if (losesAdmin) await requireAnotherAdministrator(tx, userId);
    const disabledAt = patch.disabled === undefined ? before.disabledAt : patch.disabled ? (before.disabledAt ?? new Date()) : null;
    const [after] = await tx.update(appUser)
      .set({ name: patch.name ?? before.name, role: patch.role ?? before.role, disabledAt })
      .where(eq(appUser.id, userId)).returning();
    if (patch.disabled && !before.disabledAt) await revokeSessionsOf(tx, userId);
    await recordAudit(tx, actor, { action: "user-changed", target: userId, detail: { ...patch } });
    return presentUser(after);
  });
}

async function requireAnotherAdministrator(tx: Tx, userId: string): Promise<void> {
  const [other] = await tx.select({ id: appUser.id }).from(appUser)
    .where(and(eq(appUser.role, "administrator"), ne(appUser.id, userId), isNull(appUser.disabledAt), isNotNull(appUser.passwordHash)))
    .limit(1);
  if (!other) throw new AppError("conflict", "This is the last active administrator; make somebody else one first.");
}
