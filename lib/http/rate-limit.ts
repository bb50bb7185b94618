/**
 * Requests per minute and person, counted in the web process's memory. Decided so because one web process serves an
 * installation and a write to the database at every request would cost more than what it guards; a restart forgives a
 * minute. What must hold across processes (sign-in attempts, rows waiting) is counted in PostgreSQL.
 */
import { env } from "@/lib/env";
import { AppError } from "@/lib/errors";

const WINDOW_MS = 60_000;
/** Callers without an account share one bucket for the few public routes. */
export const ANONYMOUS = "anonymous";

interface Window { start: number; count: number }
const held = globalThis as { tufaRequestWindows?: Map<string, Window> };

/** Headers of the IETF draft "RateLimit header fields for HTTP". */
export function rateHeaders(limit: number, remaining: number, secondsLeft: number): Record<string, string> {
  return {
    "RateLimit-Policy": `"requests";q=${limit};w=60`,
    "RateLimit": `"requests";r=${Math.max(0, remaining)};t=${secondsLeft}`,
  };
}

/** Counts one request of `who`. Returns the headers to send; throws `rate-limited` with them when the minute is full. */
export function consumeRequest(who: string, now = Date.now()): Record<string, string> {
  const windows = (held.tufaRequestWindows ??= new Map());
  const limit = env().TUFA_REQUESTS_PER_MINUTE;
  let window = windows.get(who);
  if (!window || now - window.start >= WINDOW_MS) {
    if (windows.size > 10_000) windows.clear();
    windows.set(who, (window = { start: now, count: 0 }));
  }
  window.count++;
  const secondsLeft = Math.max(1, Math.ceil((window.start + WINDOW_MS - now) / 1000));
  const headers = rateHeaders(limit, limit - window.count, secondsLeft);
  if (window.count > limit) {
    throw new AppError("rate-limited", `More than ${limit} requests in a minute; go on in ${secondsLeft} s.`, {
      headers: { ...headers, "Retry-After": String(secondsLeft) },
    });
  }
  return headers;
}
