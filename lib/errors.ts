/**
 * One table of every error the API can answer with. A code is stable: clients switch on it, `type` in the problem
 * document is built from it, and the docs page lists it with its remedy.
 */
export const ERRORS = {
  "bad-request": { status: 400, title: "The request cannot be read" },
  "unauthenticated": { status: 401, title: "Sign in or send a valid token" },
  "forbidden": { status: 403, title: "This account or token may not do that" },
  "not-found": { status: 404, title: "Nothing here under that address" },
  "method-not-allowed": { status: 405, title: "This address does not take that method" },
  "not-acceptable": { status: 406, title: "That format is not offered" },
  "conflict": { status: 409, title: "That does not fit the present state" },
  "too-large": { status: 413, title: "The body is larger than the limit" },
  "unsupported-media-type": { status: 415, title: "That content type is not taken here" },
  "invalid-spec": { status: 422, title: "The job spec has faults" },
  "invalid-samples": { status: 422, title: "The samples have faults" },
  "invalid-body": { status: 422, title: "The body has faults" },
  "idempotency-mismatch": { status: 422, title: "This Idempotency-Key came with another body before" },
  "rate-limited": { status: 429, title: "Too many requests" },
  "backlog-full": { status: 429, title: "Too many rows are waiting already" },
  "internal": { status: 500, title: "Something failed on our side" },
  "unavailable": { status: 503, title: "The service cannot answer just now" },
} as const;

export type ErrorCode = keyof typeof ERRORS;

/** One fault in a document. `pointer` is an RFC 6901 JSON Pointer to the place ("" is the whole document). */
export interface Issue {
  pointer: string;
  code: string;
  message: string;
  /** The offending value as text, shortened to 80 characters. */
  value?: string;
  /** What to write instead: the nearest known name, the allowed units, the allowed range. */
  remedy?: string;
}

/** An error meant for the caller. Everything else that is thrown becomes an opaque `internal`. */
export class AppError extends Error {
  readonly code: ErrorCode;
  readonly status: number;
  readonly errors: Issue[] | undefined;
  readonly headers: Record<string, string> | undefined;

  constructor(
    code: ErrorCode,
    message: string,
    options: { cause?: unknown; errors?: Issue[]; headers?: Record<string, string> } = {},
  ) {
    super(message, { cause: options.cause });
    this.name = "AppError";
    this.code = code;
    this.status = ERRORS[code].status;
    this.errors = options.errors;
    this.headers = options.headers;
  }
}
