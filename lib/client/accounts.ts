/** Calls about people and tokens. */
import type { AuditEvent, Health, PasswordLink, Token, TokenCreated, User, UserCreate, UserCreated, UserPatch } from "@/lib/schemas/api";
import type { Scope } from "@/lib/schemas/actor";
import { call, ROOT, withQuery } from "./api";

interface PageQuery { limit?: number; cursor?: string }

export const listTokens = (query: PageQuery & { owner?: "me" | "all" } = {}): Promise<{ tokens: Token[]; nextCursor: string | null }> => call("GET", withQuery("/tokens", { ...query }));
export const createToken = (body: { name: string; scopes: Scope[]; expiresAt: string | null }): Promise<TokenCreated> => call("POST", `${ROOT}/tokens`, { body });
export const revokeToken = (id: string): Promise<unknown> => call("DELETE", `${ROOT}/tokens/${id}`);

export const listUsers = (query: PageQuery = {}): Promise<{ users: User[]; nextCursor: string | null }> => call("GET", withQuery("/users", { ...query }));
export const createUser = (body: UserCreate): Promise<UserCreated> => call("POST", `${ROOT}/users`, { body });
export const updateUser = (id: string, body: UserPatch): Promise<User> => call("PATCH", `${ROOT}/users/${id}`, { body });
export const newPasswordLink = (id: string): Promise<PasswordLink> => call("POST", `${ROOT}/users/${id}/password-link`);
export const setPassword = (body: { secret: string; password: string }): Promise<{ email: string }> => call("POST", `${ROOT}/password`, { body });

export const listAudit = (query: PageQuery & { action?: string } = {}): Promise<{ events: AuditEvent[]; nextCursor: string | null }> => call("GET", withQuery("/audit", { ...query }));
export const getHealth = (): Promise<Health> => call("GET", `${ROOT}/health`);
