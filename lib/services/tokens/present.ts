import type { apiToken, appUser } from "@/db/schema";
import type { Scope } from "@/lib/schemas/actor";
import type { Token } from "@/lib/schemas/api";

type TokenRow = typeof apiToken.$inferSelect;
type Owner = Pick<typeof appUser.$inferSelect, "id" | "name" | "email">;

/** A token as the API shows it: never the secret, never its hash. */
export function presentToken(row: TokenRow, owner: Owner): Token {
  const isExpired = row.expiresAt !== null && row.expiresAt.getTime() <= Date.now();
  return {
    id: row.id, name: row.name, prefix: row.prefix, lastFour: row.lastFour, scopes: row.scopes as Scope[],
    owner: { id: owner.id, name: owner.name, email: owner.email },
    createdAt: row.createdAt.toISOString(), expiresAt: row.expiresAt?.toISOString() ?? null,
    lastUsedAt: row.lastUsedAt?.toISOString() ?? null, revokedAt: row.revokedAt?.toISOString() ?? null,
    state: row.revokedAt ? "revoked" : isExpired ? "expired" : "active",
  };
}
