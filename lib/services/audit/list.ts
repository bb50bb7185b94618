import { and, desc, eq, lt } from "drizzle-orm";
import { db } from "@/db/client";
import { appUser, auditEvent } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import type { AuditEvent } from "@/lib/schemas/api";
import { decodeCursor, encodeCursor } from "../cursor";

/** The audit trail, newest first. Routes ask for the scope `admin` before. */
export async function listAudit(
  actor: Actor, query: { limit: number; cursor?: string; action?: string },
): Promise<{ events: AuditEvent[]; nextCursor: string | null }> {
  const bound = ["audit", actor.userId, query.action ?? null];
  const after = query.cursor ? decodeCursor(query.cursor, bound) : null;
  const rows = await db().select({ event: auditEvent, actor: appUser }).from(auditEvent)
    .leftJoin(appUser, eq(appUser.id, auditEvent.actorId))
    .where(and(
      query.action ? eq(auditEvent.action, query.action) : undefined,
      after ? lt(auditEvent.id, Number(after.id)) : undefined,
    ))
    .orderBy(desc(auditEvent.id)).limit(query.limit + 1);
  const page = rows.slice(0, query.limit);
  const last = page.at(-1)?.event;
  return {
    events: page.map(({ event, actor: who }) => ({
      id: event.id, at: event.at.toISOString(), actor: who ? { id: who.id, name: who.name, email: who.email } : null,
      via: event.via, action: event.action, target: event.target, detail: event.detail, requestId: event.requestId,
    })),
    nextCursor: rows.length > query.limit && last ? encodeCursor({ at: last.at.toISOString(), id: String(last.id) }, bound) : null,
  };
}
