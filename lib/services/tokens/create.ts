import { and, eq, isNull, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { apiToken, appUser } from "@/db/schema";
import { AppError, type Issue } from "@/lib/errors";
import { newId } from "@/lib/ids";
import type { Actor, Scope } from "@/lib/schemas/actor";
import type { TokenCreated } from "@/lib/schemas/api";
import { ROLE_SCOPES } from "../access";
import { recordAudit } from "../audit/record";
import { secretHash } from "../secret-hash";
import { presentToken } from "./present";
import { newToken, tokenLastFour, tokenPrefix } from "./token-format";

const DAY_MS = 86_400_000;
export const TOKEN_DEFAULT_DAYS = 90;
export const TOKEN_MAX_DAYS = 365;
/** Live tokens a person may hold at once. */
export const TOKENS_PER_USER = 100;

export interface NewToken {
  name: string;
  scopes: readonly Scope[];
  /** RFC 3339; null: no expiry; absent: 90 days. */
  expiresAt?: string | null;
}

function expiryOf(wanted: string | null | undefined, now: number): Date | null {
  if (wanted === null) return null;
  if (wanted === undefined) return new Date(now + TOKEN_DEFAULT_DAYS * DAY_MS);
  return new Date(wanted);
}

function issuesOf(actor: Actor, wish: NewToken, expiresAt: Date | null, now: number): Issue[] {
  const issues: Issue[] = [];
  // A token that makes tokens must not reach further than itself.
  const allowed = actor.via === "token" ? actor.scopes : ROLE_SCOPES[actor.role];
  wish.scopes.forEach((scope, index) => {
    if (!allowed.includes(scope)) {
      issues.push({
        pointer: `/scopes/${index}`, code: "scope-not-allowed", value: scope,
        message: `${actor.via === "token" ? "This token" : `The role ${actor.role}`} does not include the scope ${scope}.`,
        remedy: `Allowed: ${allowed.join(", ")}.`,
      });
    }
  });
  if (expiresAt && expiresAt.getTime() <= now) {
    issues.push({ pointer: "/expiresAt", code: "in-the-past", message: "The token would have expired already.", value: wish.expiresAt ?? "" });
  } else if (expiresAt && expiresAt.getTime() > now + TOKEN_MAX_DAYS * DAY_MS) {
    issues.push({
      pointer: "/expiresAt", code: "too-far", message: `A dated token lives at most ${TOKEN_MAX_DAYS} days.`, value: wish.expiresAt ?? "",
      remedy: "Name an earlier date, or null for a token without expiry.",
    });
  }
  return issues;
}

/**
 * Creates a token of the actor's own. The answer holds the token, this once.
 * Throws `invalid-body` for scopes beyond the role or an expiry out of range, `conflict` at 100 live tokens.
 */
export async function createToken(actor: Actor, wish: NewToken): Promise<TokenCreated> {
  const now = Date.now();
  const expiresAt = expiryOf(wish.expiresAt, now);
  const issues = issuesOf(actor, wish, expiresAt, now);
  if (issues.length > 0) throw new AppError("invalid-body", issues.map((i) => i.message).join(" "), { errors: issues });
  const token = newToken();
  return db().transaction(async (tx) => {
    // Locked, so that two creations at once cannot both be the hundredth.
    const [owner] = await tx.select().from(appUser).where(eq(appUser.id, actor.userId)).for("update");
    const [{ live }] = await tx.select({ live: sql<number>`count(*)::int` }).from(apiToken)
      .where(and(eq(apiToken.userId, actor.userId), isNull(apiToken.revokedAt)));
    if (live >= TOKENS_PER_USER) throw new AppError("conflict", `You hold ${live} tokens; revoke some first (at most ${TOKENS_PER_USER}).`);
    const [row] = await tx.insert(apiToken).values({
      id: newId("tok"), userId: actor.userId, name: wish.name, prefix: tokenPrefix(token), lastFour: tokenLastFour(token),
      hash: secretHash(token), scopes: [...new Set(wish.scopes)], createdBy: actor.userId, expiresAt,
    }).returning();
    await recordAudit(tx, actor, { action: "token-created", target: row.id, detail: { name: row.name, scopes: row.scopes, expiresAt: row.expiresAt } });
    return { ...presentToken(row, owner), token };
  });
}
