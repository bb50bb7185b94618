/**
 * Idempotency-Key (IETF draft): the first answer is stored in the transaction that does the work, so there is no moment
 * at which the one exists without the other, whatever is killed. While that transaction is open, an advisory lock marks
 * the key as in flight. Faulty requests leave nothing behind: the same key may come again with the fault mended.
 */
import { and, eq, sql } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { idempotencyKey } from "@/db/schema";
import { AppError } from "@/lib/errors";

export const IDEMPOTENCY_HOURS = 24;
const SHAPE = /^[\x20-\x7e]{1,255}$/;

export interface StoredAnswer { status: number; body: unknown; location: string | null }

/** The header's key, or null without one. Throws `bad-request` for a key that is empty, too long or not plain ASCII. */
export function readIdempotencyKey(header: string | null): string | null {
  if (header === null) return null;
  // The draft makes it a quoted string; most clients send it bare.
  const key = header.trim().replace(/^"(.*)"$/, "$1");
  if (!SHAPE.test(key)) throw new AppError("bad-request", "Idempotency-Key must be 1 to 255 printable ASCII characters.");
  return key;
}

/**
 * Claims a key inside a transaction. Returns the stored answer of an earlier request with the same content, or null
 * for a new key. Throws `idempotency-mismatch` for other content, `conflict` while the first request is under way.
 */
export async function claimKey(tx: Tx, userId: string, key: string, requestHash: string): Promise<StoredAnswer | null> {
  const lock = await tx.execute<{ free: boolean }>(sql`
    select pg_try_advisory_xact_lock(hashtextextended(${`idempotency ${userId} ${key}`}, 0)) as free`);
  if (!lock.rows[0].free) {
    throw new AppError("conflict", "A request with this Idempotency-Key is still under way; ask again in a moment.", { headers: { "Retry-After": "1" } });
  }
  await tx.execute(sql`delete from idempotency_key where user_id = ${userId} and created_at < now() - make_interval(hours => ${IDEMPOTENCY_HOURS})`);
  const [found] = await tx.select().from(idempotencyKey).where(and(eq(idempotencyKey.userId, userId), eq(idempotencyKey.key, key)));
  if (!found) return null;
  if (found.requestHash !== requestHash) {
    throw new AppError("idempotency-mismatch", "This Idempotency-Key came with another spec or query before; use a new key for a new request.");
  }
  return { status: found.responseStatus ?? 201, body: found.responseBody, location: found.location };
}

/** Stores the answer under the key, in the same transaction as the work. */
export async function storeAnswer(tx: Tx, userId: string, key: string, requestHash: string, answer: StoredAnswer): Promise<void> {
  await tx.insert(idempotencyKey).values({
    userId, key, requestHash, responseStatus: answer.status, responseBody: answer.body, location: answer.location,
  });
}
