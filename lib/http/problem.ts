/** The one way from an error to a response: RFC 9457 problem documents. */
import { AppError, ERRORS } from "@/lib/errors";
import type { Problem } from "@/lib/schemas/api";
import { isDatabaseAway } from "@/lib/services/database-away";
import { log } from "./log";

export const PROBLEM_TYPE = "application/problem+json";
/** More issues than this are cut off, with a last one that says so. */
const MAX_ISSUES = 200;

function problemOf(error: AppError, requestId: string): Problem {
  const issues = error.errors;
  const shown = issues && issues.length > MAX_ISSUES
    ? [...issues.slice(0, MAX_ISSUES), { pointer: "", code: "more-issues", message: `${issues.length - MAX_ISSUES} more faults are not shown.` }]
    : issues;
  return {
    type: `/docs/errors#${error.code}`, title: ERRORS[error.code].title, status: error.status, detail: error.message,
    requestId, ...(shown ? { errors: shown } : {}),
  };
}

/**
 * The response to any throw. An AppError speaks for itself; a lost database is `unavailable`; everything else is an
 * opaque `internal`, logged whole under the request id.
 */
export function problemResponse(error: unknown, requestId: string, headers: HeadersInit = {}): Response {
  let known: AppError;
  if (error instanceof AppError) {
    known = error;
  } else if (isDatabaseAway(error)) {
    log().error({ requestId, err: error }, "database away");
    known = new AppError("unavailable", "The database does not answer just now; try again in a few seconds.", { headers: { "Retry-After": "5" } });
  } else {
    log().error({ requestId, err: error }, "request failed");
    known = new AppError("internal", `Something failed on our side. Quote the request id ${requestId} when you report it.`);
  }
  const out = new Headers(headers);
  for (const [name, value] of Object.entries(known.headers ?? {})) out.set(name, value);
  out.set("Content-Type", PROBLEM_TYPE);
  out.set("Cache-Control", "no-store");
  return new Response(JSON.stringify(problemOf(known, requestId)), { status: known.status, headers: out });
}
