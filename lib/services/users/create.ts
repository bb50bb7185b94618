import { db } from "@/db/client";
import { appUser } from "@/db/schema";
import { AppError } from "@/lib/errors";
import { newId } from "@/lib/ids";
import type { Actor } from "@/lib/schemas/actor";
import type { User, UserCreate } from "@/lib/schemas/api";
import { recordAudit } from "../audit/record";
import { presentUser } from "./present";

/**
 * Creates a person without a password; they choose it by a one-time link (password-link.ts). `actor` is null for the
 * seed and for `npm run admin`, when nobody exists yet. Throws `conflict` where the address is taken.
 */
export async function createUser(actor: Actor | null, wish: UserCreate): Promise<User> {
  return db().transaction(async (tx) => {
    const [row] = await tx.insert(appUser)
      .values({ id: newId("usr"), email: wish.email.trim().toLowerCase(), name: wish.name.trim(), role: wish.role })
      .onConflictDoNothing({ target: appUser.email }).returning();
    if (!row) throw new AppError("conflict", `${wish.email} has an account already.`);
    await recordAudit(tx, actor, { action: "user-created", target: row.id, detail: { email: row.email, role: row.role } });
    return presentUser(row);
  });
}
