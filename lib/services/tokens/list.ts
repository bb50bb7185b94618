import { and, desc, eq, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { apiToken, appUser } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import type { Token } from "@/lib/schemas/api";
import { requireScope } from "../access";
import { type CursorKey, decodeCursor, encodeCursor } from "../cursor";
import { presentToken } from "./present";

export interface TokenListQuery { owner: "me" | "all"; limit: number; cursor?: string }

/** Tokens, newest first, revoked and expired ones included: one's own, or for administrators everyone's. */
export async function listTokens(actor: Actor, query: TokenListQuery): Promise<{ tokens: Token[]; nextCursor: string | null }> {
  if (query.owner === "all") requireScope(actor, "admin");
  const bound = ["tokens", actor.userId, query.owner];
  const after: CursorKey | null = query.cursor ? decodeCursor(query.cursor, bound) : null;
  const rows = await db().select({ token: apiToken, owner: appUser }).from(apiToken)
    .innerJoin(appUser, eq(appUser.id, apiToken.userId))
    .where(and(
      query.owner === "me" ? eq(apiToken.userId, actor.userId) : undefined,
      after ? sql`(${apiToken.createdAt}, ${apiToken.id}) < (${after.at}::timestamptz, ${after.id})` : undefined,
    ))
    .orderBy(desc(apiToken.createdAt), desc(apiToken.id)).limit(query.limit + 1);
  const page = rows.slice(0, query.limit);
  const last = page.at(-1)?.token;
  return {
    tokens: page.map((row) => presentToken(row.token, row.owner)),
    nextCursor: rows.length > query.limit && last ? encodeCursor({ at: last.createdAt.toISOString(), id: last.id }, bound) : null,
  };
}
