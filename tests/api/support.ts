/**
 * The API without a server: requests go to the route handlers by the same rules by which Next finds them. People are
 * made anew for each test file, so files share a database without meeting each other.
 */
import { encode } from "next-auth/jwt";
import { db } from "@/db/client";
import { appUser, session } from "@/db/schema";
import { newId, randomBase62 } from "@/lib/ids";
import type { RouteHandler } from "@/lib/http/route";
import { cookieNames, sessionSecret } from "@/lib/http/session-cookie";
import type { Actor, Role, Scope } from "@/lib/schemas/actor";
import { commandActor } from "@/lib/services/access";
import { createToken } from "@/lib/services/tokens/create";

type RouteModule = Partial<Record<string, RouteHandler>>;
const files = import.meta.glob<RouteModule>("/app/api/v1/**/route.ts");

export interface RouteFile { pattern: string; load: () => Promise<RouteModule> }

/** Every route file with its address as OpenAPI writes it (`/jobs/{id}`); the catch-all is left out. */
export const routeFiles: RouteFile[] = Object.entries(files)
  .filter(([file]) => !file.includes("[[...rest]]"))
  .map(([file, load]) => ({ pattern: file.replace("/app/api/v1", "").replace("/route.ts", "").replaceAll(/\[(\w+)\]/g, "{$1}"), load }));

async function findRoute(pathname: string): Promise<{ module: RouteModule; params: Record<string, string> }> {
  const parts = pathname.replace("/api/v1", "").split("/").filter(Boolean);
  for (const { pattern, load } of routeFiles) {
    const wanted = pattern.split("/").filter(Boolean);
    if (wanted.length !== parts.length) continue;
    const params: Record<string, string> = {};
    const fits = wanted.every((part, index) => {
      const name = /^\{(\w+)\}$/.exec(part)?.[1];
      if (name) params[name] = decodeURIComponent(parts[index]);
      return name !== undefined || part === parts[index];
    });
    if (fits) return { module: await load(), params };
  }
  return { module: await files["/app/api/v1/[[...rest]]/route.ts"](), params: {} };
}

export interface CallOptions {
  token?: string;
  cookie?: string;
  /** Sent as JSON unless it is text or bytes. */
  body?: unknown;
  headers?: Record<string, string>;
  signal?: AbortSignal;
}

const ORIGIN = "http://127.0.0.1:3000";

/** One request to the API. `path` starts behind /api/v1. */
export async function api(method: string, path: string, options: CallOptions = {}): Promise<Response> {
  const headers = new Headers(options.headers);
  if (options.token) headers.set("authorization", `Bearer ${options.token}`);
  if (options.cookie) headers.set("cookie", options.cookie);
  const { body } = options;
  const isRaw = typeof body === "string" || body instanceof Uint8Array || body instanceof FormData;
  if (body !== undefined && !isRaw && !headers.has("content-type")) headers.set("content-type", "application/json");
  const request = new Request(`${ORIGIN}/api/v1${path}`, {
    method, headers, signal: options.signal, body: body === undefined ? undefined : isRaw ? (body as BodyInit) : JSON.stringify(body),
  });
  const { module, params } = await findRoute(new URL(request.url).pathname);
  const handler = module[method];
  if (!handler) throw new Error(`No handler for ${method} ${path}`);
  return handler(request, { params: Promise.resolve(params) });
}

/** JSON of a response whose status must be `status`; the body is shown when it is not. */
export async function jsonOf<T = Record<string, never>>(response: Response, status: number): Promise<T> {
  const text = await response.text();
  if (response.status !== status) throw new Error(`${response.status} instead of ${status}: ${text.slice(0, 2000)}`);
  return JSON.parse(text) as T;
}

export interface Person {
  actor: Actor;
  /** A fresh token with these scopes; default: all of the role's. */
  token(scopes?: readonly Scope[]): Promise<string>;
  /** Cookie header and sid of a fresh session. */
  cookie(): Promise<{ header: string; sid: string }>;
}

/** A new account with an address of its own and no password. */
export async function makePerson(role: Role): Promise<Person> {
  const id = newId("usr");
  const email = `${role}-${randomBase62(8).toLowerCase()}@sallowmere.example`;
  await db().insert(appUser).values({ id, email, name: `${role} ${id.slice(4, 8)}`, role });
  const actor = commandActor({ id, email, name: role, role });
  return {
    actor,
    token: async (scopes = actor.scopes) => (await createToken(actor, { name: "test", scopes })).token,
    cookie: async () => {
      const sid = newId("sid");
      await db().insert(session).values({ sid, userId: id, expiresAt: new Date(Date.now() + 3_600_000) });
      const jwt = await encode({ token: { sub: id, sid }, secret: sessionSecret() });
      return { header: `${cookieNames().session}=${jwt}`, sid };
    },
  };
}

export const SAME_ORIGIN = { origin: ORIGIN, host: "127.0.0.1:3000" };

/** A sound spec of `rows` waters. */
export function sampleSpec(rows = 2, extra: Record<string, unknown> = {}): Record<string, unknown> {
  return {
    spec: 1, title: "Quern Beck round",
    waters: {
      rows: Array.from({ length: rows }, (_, index) => ({
        id: `QB-${index + 1}`, temperature: 10, pH: 7.6 + (index % 5) / 10, Ca: "62 mg/L", Mg: "6.3 mg/L", Na: "5 mg/L", K: "1.2 mg/L",
        Cl: "12 mg/L", SO4: "29 mg/L", NO3: "1.4 mg/L as N", alkalinity: "2.71 meq/L",
      })),
    },
    cases: [{ name: "as measured", close: ["pH", "alkalinity"], activity: "davies" }],
    report: ["pH", "ANC", "SI:calcite"],
    ...extra,
  };
}
