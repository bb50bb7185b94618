/**
 * The wrapper around every route of /api/v1: request id, authentication, rate limit, scope, origin, body limit,
 * parsing and validation, problem documents. A handler sees only what passed all of it, and returns a Response or an
 * object to be sent as JSON.
 */
import type { z } from "zod";
import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import { requireScope, type RouteScope } from "@/lib/services/access";
import { bodyIssues } from "@/lib/services/intake/body-issues";
import { parseJson } from "@/lib/services/intake/parse-json";
import { authenticate, nobody } from "./authenticate";
import { problemResponse } from "./problem";
import { ANONYMOUS, consumeRequest } from "./rate-limit";
import { BODY_LIMIT, readBody, requireMediaType } from "./read-body";
import { requestIdOf } from "./request-id";
import { requireSameOrigin } from "./same-origin";

/** A body that the handler reads itself: a spec or an upload. */
export interface RawBodyRule { types: readonly string[]; maxBytes: number }
export interface RawBody { type: string; bytes: Uint8Array }

export interface RouteOptions<S extends RouteScope, Q, B> {
  scope: S;
  /** Schema of the query string. Keys whose schema takes a list may repeat. */
  query?: z.ZodType<Q>;
  /** Schema of a JSON body of at most 1 MiB. */
  body?: z.ZodType<B>;
  /** Pointers whose values never appear in a problem document. */
  secretFields?: readonly string[];
  rawBody?: RawBodyRule;
  /** Routes that probes call all the time are not counted. */
  uncounted?: boolean;
}

export interface RouteContext<S extends RouteScope, Q, B> {
  request: Request;
  actor: S extends "public" ? Actor | null : Actor;
  params: Record<string, string>;
  query: Q;
  body: B;
  raw: RawBody;
  requestId: string;
  /** Aborts when the client goes away. */
  signal: AbortSignal;
}

/** Next types the parameters of each address by themselves; here they are names with texts. */
type Params = { params: Promise<unknown> };
export type RouteHandler = ((request: Request, context?: Params) => Promise<Response>) & { scope?: RouteScope };

const WRITES = new Set(["POST", "PUT", "PATCH", "DELETE"]);
const NO_BODY: RawBody = { type: "", bytes: new Uint8Array(0) };

/** Wraps a handler. The scope stays readable on the result, for the matrix test and the OpenAPI test. */
export function route<S extends RouteScope, Q = Record<string, never>, B = undefined>(
  options: RouteOptions<S, Q, B>, handler: (context: RouteContext<S, Q, B>) => Promise<Response | object>,
): RouteHandler {
  const wrapped: RouteHandler = async (request, context) => {
    const requestId = requestIdOf(request);
    const headers: Record<string, string> = { "Request-Id": requestId };
    try {
      const actor = await admit(options, request, requestId, headers);
      const query = readQuery(options.query, request);
      const { body, raw } = await readInput(options, request);
      const params = ((await context?.params) ?? {}) as Record<string, string>;
      const result = await handler({
        request, actor: actor as RouteContext<S, Q, B>["actor"], params, query, body, raw, requestId, signal: request.signal,
      });
      return finish(result, headers);
    } catch (error) {
      return problemResponse(error, requestId, headers);
    }
  };
  wrapped.scope = options.scope;
  return wrapped;
}

/** Authentication, rate limit, scope and origin, in this order. Adds the RateLimit headers as soon as they are known. */
async function admit(
  options: Pick<RouteOptions<RouteScope, unknown, unknown>, "scope" | "uncounted">, request: Request, requestId: string,
  headers: Record<string, string>,
): Promise<Actor | null> {
  const actor = options.scope === "public" ? null : await authenticate(request, requestId);
  if (!options.uncounted) Object.assign(headers, consumeRequest(actor?.userId ?? ANONYMOUS));
  if (options.scope === "public") return null;
  if (!actor) throw nobody();
  if (options.scope !== "signed-in") requireScope(actor, options.scope);
  if (actor.via === "session" && WRITES.has(request.method)) requireSameOrigin(request);
  return actor;
}

function readQuery<Q>(schema: z.ZodType<Q> | undefined, request: Request): Q {
  if (!schema) return {} as Q;
  const shape = "shape" in schema ? (schema.shape as Record<string, z.ZodType>) : {};
  const given: Record<string, string | string[]> = {};
  const search = new URL(request.url).searchParams;
  for (const key of new Set(search.keys())) {
    const values = search.getAll(key);
    given[key] = shape[key] && takesList(shape[key]) ? values : values.length > 1 ? values : values[0];
  }
  const result = schema.safeParse(given);
  if (result.success) return result.data;
  const errors = bodyIssues(result.error, given);
  throw new AppError("bad-request", "The query string has faults: " + errors.map((e) => `${e.pointer.slice(1)}: ${e.message}`).join("; "), { errors });
}

/** Whether a schema takes an empty list, also behind a default. */
const takesList = (schema: z.ZodType): boolean => schema.safeParse([]).success;

async function readInput<Q, B>(options: RouteOptions<RouteScope, Q, B>, request: Request): Promise<{ body: B; raw: RawBody }> {
  if (options.rawBody) {
    const type = requireMediaType(request, options.rawBody.types);
    return { body: undefined as B, raw: { type, bytes: await readBody(request, options.rawBody.maxBytes) } };
  }
  if (!options.body) return { body: undefined as B, raw: NO_BODY };
  requireMediaType(request, ["application/json"]);
  const document = parseJson(await readBody(request, BODY_LIMIT));
  const result = options.body.safeParse(document);
  if (result.success) return { body: result.data, raw: NO_BODY };
  const errors = bodyIssues(result.error, document, options.secretFields);
  throw new AppError("invalid-body", errors.map((e) => `${e.pointer || "body"}: ${e.message}`).slice(0, 5).join("; "), { errors });
}

function finish(result: Response | object, headers: Record<string, string>): Response {
  const response = result instanceof Response ? result : Response.json(result);
  for (const [name, value] of Object.entries(headers)) response.headers.set(name, value);
  response.headers.set("X-Content-Type-Options", "nosniff");
  if (!response.headers.has("Cache-Control")) response.headers.set("Cache-Control", "no-store");
  return response;
}
