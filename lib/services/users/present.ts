import type { appUser } from "@/db/schema";
import type { User } from "@/lib/schemas/api";

/** A person as the API shows them. */
export function presentUser(row: typeof appUser.$inferSelect): User {
  return {
    id: row.id, email: row.email, name: row.name, role: row.role,
    state: row.disabledAt ? "disabled" : row.passwordHash ? "active" : "invited",
    createdAt: row.createdAt.toISOString(), lastSignInAt: row.lastSignInAt?.toISOString() ?? null,
    disabledAt: row.disabledAt?.toISOString() ?? null,
  };
}
