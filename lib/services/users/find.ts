import { and, desc, eq, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { appUser } from "@/db/schema";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { User } from "@/lib/schemas/api";
import { decodeCursor, encodeCursor } from "../cursor";
import { presentUser } from "./present";

/** A person by e-mail address (any case), or null. */
export async function findUserByEmail(email: string): Promise<User | null> {
  const row = await db().query.appUser.findFirst({ where: eq(appUser.email, email.trim().toLowerCase()) });
  return row ? presentUser(row) : null;
}

/** A person by id. Throws `not-found`. */
export async function getUser(userId: string): Promise<User> {
  const row = await db().query.appUser.findFirst({ where: eq(appUser.id, userId) });
  if (!row) throw new AppError("not-found", `There is no user ${userId}.`);
  return presentUser(row);
}

/** Everybody, newest first. Routes ask for the scope `admin` before. */
export async function listUsers(actor: Actor, query: { limit: number; cursor?: string }): Promise<{ users: User[]; nextCursor: string | null }> {
  const bound = ["users", actor.userId];
  const after = query.cursor ? decodeCursor(query.cursor, bound) : null;
  const rows = await db().select().from(appUser)
    .where(and(after ? sql`(${appUser.createdAt}, ${appUser.id}) < (${after.at}::timestamptz, ${after.id})` : undefined))
    .orderBy(desc(appUser.createdAt), desc(appUser.id)).limit(query.limit + 1);
  const page = rows.slice(0, query.limit);
  const last = page.at(-1);
  return {
    users: page.map(presentUser),
    nextCursor: rows.length > query.limit && last ? encodeCursor({ at: last.createdAt.toISOString(), id: last.id }, bound) : null,
  };
}
