import {
  auditPage, auditQuery, me, pageQuery, passwordLink, passwordSet, passwordSetDone, tokenCreate, tokenCreated, tokenListQuery, tokenPage,
  user, userCreate, userCreated, userPage, userPatch,
} from "@/lib/schemas/api";
import { json, LINK, LOCATION, type Operation } from "../operation";

const BODY_ERRORS = ["bad-request", "too-large", "unsupported-media-type", "invalid-body"] as const;

export const accountOperations: Operation[] = [
  {
    method: "get", path: "/me", id: "getMe", tag: "Accounts", scope: "signed-in", summary: "Who is asking, and what this credential may do",
    answers: { 200: { description: "The actor", content: json(me) } }, errors: [],
  },
  {
    method: "post", path: "/password", id: "setPassword", tag: "Accounts", scope: "public", summary: "Set a password with a one-time link",
    description: "The link works once, for 7 days. Setting a password ends every session of the account.",
    body: { description: "The link's secret and the new password", content: json(passwordSet) },
    answers: { 200: { description: "The password is set", content: json(passwordSetDone) } }, errors: [...BODY_ERRORS, "not-found"],
  },
  {
    method: "get", path: "/tokens", id: "listTokens", tag: "Tokens", scope: "signed-in", summary: "API tokens, revoked and expired ones included", query: tokenListQuery,
    answers: { 200: { description: "A page of tokens", content: json(tokenPage), headers: [LINK] } }, errors: ["bad-request", "forbidden"],
  },
  {
    method: "post", path: "/tokens", id: "createToken", tag: "Tokens", scope: "signed-in", summary: "Create a token of your own",
    description: "Form: `tufa_`, 30 base62 characters, 6 base62 characters of their CRC-32. It is shown once; only a hash is stored.",
    body: { description: "Name, scopes (no more than the role or the calling token has), expiry", content: json(tokenCreate) },
    answers: { 201: { description: "The token", content: json(tokenCreated), headers: [LOCATION] } }, errors: [...BODY_ERRORS, "conflict"],
  },
  {
    method: "delete", path: "/tokens/{id}", id: "revokeToken", tag: "Tokens", scope: "signed-in", summary: "Revoke a token",
    description: "It fails from the next request on; open event streams close within 5 s. Administrators may revoke anybody's.",
    answers: { 204: { description: "Revoked" } }, errors: ["not-found"],
  },
  {
    method: "get", path: "/users", id: "listUsers", tag: "Administration", scope: "admin", summary: "Accounts", query: pageQuery,
    answers: { 200: { description: "A page of accounts", content: json(userPage), headers: [LINK] } }, errors: ["bad-request"],
  },
  {
    method: "post", path: "/users", id: "createUser", tag: "Administration", scope: "admin", summary: "Create an account",
    description: "Nobody chooses a password for somebody else: the answer holds a one-time link to hand over.",
    body: { description: "The person", content: json(userCreate) },
    answers: { 201: { description: "The account and its link", content: json(userCreated), headers: [LOCATION] } }, errors: [...BODY_ERRORS, "conflict"],
  },
  {
    method: "get", path: "/users/{id}", id: "getUser", tag: "Administration", scope: "admin", summary: "An account",
    answers: { 200: { description: "The account", content: json(user) } }, errors: ["not-found"],
  },
  {
    method: "patch", path: "/users/{id}", id: "updateUser", tag: "Administration", scope: "admin", summary: "Change role or name, disable or enable",
    description: "Disabling ends every session and refuses every token at once; jobs under way run to their end.",
    body: { description: "What changes", content: json(userPatch) },
    answers: { 200: { description: "The account", content: json(user) } }, errors: [...BODY_ERRORS, "not-found", "conflict"],
  },
  {
    method: "post", path: "/users/{id}/password-link", id: "createPasswordLink", tag: "Administration", scope: "admin", summary: "A new one-time link for setting a password",
    answers: { 200: { description: "The link, shown this once", content: json(passwordLink) } }, errors: ["not-found"],
  },
  {
    method: "get", path: "/audit", id: "listAudit", tag: "Administration", scope: "admin", summary: "Who did what, newest first", query: auditQuery,
    answers: { 200: { description: "A page of the trail", content: json(auditPage), headers: [LINK] } }, errors: ["bad-request"],
  },
];
