import type { Db, Tx } from "@/db/client";
import { auditEvent } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import type { AuditAction } from "@/lib/schemas/audit-actions";

export interface AuditEntry {
  action: AuditAction;
  /** Id of what it happened to. */
  target: string | null;
  /** Facts for the reader; never secrets. */
  detail?: Record<string, unknown>;
}

/** Writes one line of the audit trail, inside the transaction of the deed where there is one. */
export async function recordAudit(
  tx: Tx | Db, actor: Pick<Actor, "userId" | "via" | "requestId"> | null, entry: AuditEntry,
): Promise<void> {
  await tx.insert(auditEvent).values({
    actorId: actor?.userId ?? null, via: actor?.via ?? "system", action: entry.action, target: entry.target,
    detail: entry.detail ?? {}, requestId: actor?.requestId ?? null,
  });
}
