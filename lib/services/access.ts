/**
 * Who may do what: the one place where roles and scopes are decided, for pages and routes alike.
 *
 * | role          | may                                                                                            |
 * |---------------|------------------------------------------------------------------------------------------------|
 * | analyst       | solve; read team data; submit jobs of up to 10,000 rows; change own jobs and sample sets        |
 * | modeller      | the same without that limit; change every job and sample set of the team                        |
 * | administrator | everything, private data of others included; users, everyone's tokens, the audit trail          |
 *
 * A token never holds more than its owner's role allows now: a role cut bites at the next request. Disabling a person
 * ends sessions and tokens at once; jobs already submitted run to their end, and stay readable to the team.
 */
import { AppError } from "@/lib/errors";
import type { Actor, Role, Scope } from "@/lib/schemas/actor";

export const ROLE_SCOPES: Record<Role, readonly Scope[]> = {
  analyst: ["jobs:read", "jobs:write", "samples:read", "samples:write"],
  modeller: ["jobs:read", "jobs:write", "samples:read", "samples:write"],
  administrator: ["jobs:read", "jobs:write", "samples:read", "samples:write", "admin"],
};

export interface RoleLimits {
  /** Result rows of one job. */
  rowsPerJob: number;
  /** Result rows of a person's jobs that wait or run. */
  backlogRows: number;
}

export const ROLE_LIMITS: Record<Role, RoleLimits> = {
  analyst: { rowsPerJob: 10_000, backlogRows: 100_000 },
  modeller: { rowsPerJob: 5_000_000, backlogRows: 10_000_000 },
  administrator: { rowsPerJob: 5_000_000, backlogRows: 10_000_000 },
};

/** Rows that POST /solve answers within the request; more is a job's business. */
export const ROWS_PER_SOLVE = 500;

/** What an API route asks of its caller; the three words stand for "nobody", "anybody signed in" and a scope. */
export type RouteScope = Scope | "signed-in" | "public";

/** Throws `forbidden` unless the actor holds the scope. */
export function requireScope(actor: Actor, scope: Scope): void {
  if (actor.scopes.includes(scope)) return;
  const remedy = actor.via === "token" && ROLE_SCOPES[actor.role].includes(scope)
    ? `Create a token with the scope ${scope}.`
    : `Ask an administrator; the role ${actor.role} does not include it.`;
  throw new AppError("forbidden", `This needs the scope ${scope}. ${remedy}`);
}

/** Something that belongs to a person and may be shown to the team. */
export interface Owned { ownerId: string; visibility: "private" | "team" }

/** Whether the actor may see it at all; what it may not see is reported as missing. */
export function canRead(actor: Actor, thing: Owned): boolean {
  return thing.ownerId === actor.userId || thing.visibility === "team" || actor.role === "administrator";
}

/** Whether the actor may change it (cancel, retry, new version, delete). */
export function canChange(actor: Actor, thing: Owned): boolean {
  if (thing.ownerId === actor.userId || actor.role === "administrator") return true;
  return actor.role === "modeller" && thing.visibility === "team";
}

/** Throws `not-found` for what the actor may not see, `forbidden` for what it may see but not change. */
export function requireChange(actor: Actor, thing: Owned, what: string): void {
  if (!canRead(actor, thing)) throw new AppError("not-found", `There is no ${what}.`);
  if (!canChange(actor, thing)) {
    throw new AppError("forbidden", `${what} belongs to somebody else; an analyst changes only what is their own.`);
  }
}

/** The actor behind `npm run …` commands and the seed: whoever runs them owns the database anyway. */
export function commandActor(user: { id: string; email: string; name: string; role: Role }): Actor {
  return {
    userId: user.id, email: user.email, name: user.name, role: user.role, via: "command",
    scopes: ROLE_SCOPES[user.role], sessionId: null, tokenId: null, requestId: null,
  };
}
