import { createHash } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb, db } from "@/db/client";
import { apiToken, appUser, auditEvent } from "@/db/schema";
import type { Problem, Token, TokenCreated } from "@/lib/schemas/api";
import { isTokenShaped, newToken } from "@/lib/services/tokens/token-format";
import { api, jsonOf, makePerson, type Person } from "./support";

let modeller: Person;
let other: Person;
let admin: Person;
beforeAll(async () => {
  [modeller, other, admin] = await Promise.all([makePerson("modeller"), makePerson("modeller"), makePerson("administrator")]);
});
afterAll(closeDb);

const make = async (person: Person, body: object): Promise<TokenCreated> => jsonOf(await api("POST", "/tokens", { token: await person.token(), body }), 201);

describe("POST /tokens", () => {
  test("answers 201 with a token that works, expires in 90 days, and is stored as a hash only", async () => {
    const response = await api("POST", "/tokens", { token: await modeller.token(), body: { name: "nightly run", scopes: ["jobs:read"] } });
    const made = await jsonOf<TokenCreated>(response, 201);
    expect(response.headers.get("location")).toBe(`/api/v1/tokens/${made.id}`);
    expect(isTokenShaped(made.token)).toBe(true);
    expect(made.token.startsWith(made.prefix)).toBe(true);
    expect(made.token.endsWith(made.lastFour)).toBe(true);
    const days = (Date.parse(made.expiresAt ?? "") - Date.now()) / 86_400_000;
    expect(days).toBeGreaterThan(89.9);
    expect(days).toBeLessThan(90.1);
    const [row] = await db().select().from(apiToken).where(eq(apiToken.id, made.id));
    expect(row.hash.equals(createHash("sha256").update(made.token).digest())).toBe(true);
    expect(JSON.stringify(row)).not.toContain(made.token);
    expect((await api("GET", "/jobs", { token: made.token })).status).toBe(200);
  });

  test("takes an explicit null as no expiry, and refuses more than 365 days and the past", async () => {
    expect((await make(modeller, { name: "undated", scopes: ["jobs:read"], expiresAt: null })).expiresAt).toBeNull();
    for (const [days, code] of [[366, "too-far"], [-1, "in-the-past"]] as const) {
      const expiresAt = new Date(Date.now() + days * 86_400_000).toISOString();
      const problem = await jsonOf<Problem>(await api("POST", "/tokens", { token: await modeller.token(), body: { name: "x", scopes: ["jobs:read"], expiresAt } }), 422);
      expect(problem.errors).toEqual([expect.objectContaining({ pointer: "/expiresAt", code })]);
    }
  });

  test("refuses scopes beyond the role, and beyond the calling token", async () => {
    const byRole = await jsonOf<Problem>(await api("POST", "/tokens", { token: await modeller.token(), body: { name: "x", scopes: ["jobs:read", "admin"] } }), 422);
    expect(byRole.errors).toEqual([expect.objectContaining({ pointer: "/scopes/1", code: "scope-not-allowed", value: "admin" })]);
    const narrow = await modeller.token(["jobs:read"]);
    const byToken = await jsonOf<Problem>(await api("POST", "/tokens", { token: narrow, body: { name: "x", scopes: ["jobs:write"] } }), 422);
    expect(byToken.errors?.[0].pointer).toBe("/scopes/0");
  });

  test("names every fault of the body at its place", async () => {
    const problem = await jsonOf<Problem>(await api("POST", "/tokens", { token: await modeller.token(), body: { name: "", scopes: ["jobs:dream"], colour: 1 } }), 422);
    expect(problem.errors?.map((each) => each.pointer).sort()).toEqual(["/colour", "/name", "/scopes/0"]);
    expect(problem.type).toBe("/docs/errors#invalid-body");
  });

  test("answers 400 to a body that is no JSON, with line and column", async () => {
    const response = await api("POST", "/tokens", { token: await modeller.token(), body: '{"name": "x",\n "scopes": [jobs]}', headers: { "content-type": "application/json" } });
    const problem = await jsonOf<Problem>(response, 400);
    expect(problem.errors?.[0]).toMatchObject({ pointer: "/scopes/0", code: "json-syntax" });
    expect(problem.detail).toContain("line 2, column 13");
  });

  test("answers 409 at a hundred live tokens", async () => {
    const hoarder = await makePerson("analyst");
    const token = await hoarder.token();
    await db().execute(sql`
      insert into api_token (id, user_id, name, prefix, last_four, hash, scopes, created_by)
      select 'tok_fill' || ${hoarder.actor.userId} || i, ${hoarder.actor.userId}, 'fill', 'tufa_000000', '0000', sha256((${hoarder.actor.userId} || i)::bytea), '{jobs:read}', ${hoarder.actor.userId}
      from generate_series(1, 99) i`);
    expect((await api("POST", "/tokens", { token, body: { name: "one more", scopes: ["jobs:read"] } })).status).toBe(409);
  });
});

describe("a token's life", () => {
  test("revoking bites at the next call, and the list keeps it with its state", async () => {
    const made = await make(modeller, { name: "short-lived", scopes: ["jobs:read"] });
    expect((await api("GET", "/me", { token: made.token })).status).toBe(200);
    expect((await api("DELETE", `/tokens/${made.id}`, { token: await modeller.token() })).status).toBe(204);
    const refused = await api("GET", "/me", { token: made.token });
    expect(refused.status).toBe(401);
    expect(refused.headers.get("www-authenticate")).toContain("invalid_token");
    const { tokens } = await jsonOf<{ tokens: Token[] }>(await api("GET", "/tokens", { token: await modeller.token() }), 200);
    expect(tokens.find((each) => each.id === made.id)?.state).toBe("revoked");
    expect(JSON.stringify(tokens)).not.toContain(made.token);
  });

  test("expiry, a role cut and disabling bite at the next call", async () => {
    const person = await makePerson("administrator");
    const token = await person.token(["admin", "jobs:read"]);
    expect((await api("GET", "/users", { token })).status).toBe(200);
    await db().update(appUser).set({ role: "analyst" }).where(eq(appUser.id, person.actor.userId));
    expect((await api("GET", "/users", { token })).status).toBe(403);
    await db().update(apiToken).set({ expiresAt: new Date(Date.now() - 1000) }).where(eq(apiToken.userId, person.actor.userId));
    expect((await api("GET", "/me", { token })).status).toBe(401);
    await db().update(apiToken).set({ expiresAt: null }).where(eq(apiToken.userId, person.actor.userId));
    expect((await api("GET", "/me", { token })).status).toBe(200);
    await db().update(appUser).set({ disabledAt: new Date() }).where(eq(appUser.id, person.actor.userId));
    expect((await api("GET", "/me", { token })).status).toBe(401);
  });

  test("somebody else's token is 404 to revoke, except for an administrator", async () => {
    const made = await make(modeller, { name: "mine", scopes: ["jobs:read"] });
    expect((await api("DELETE", `/tokens/${made.id}`, { token: await other.token() })).status).toBe(404);
    expect((await api("GET", "/me", { token: made.token })).status).toBe(200);
    expect((await api("DELETE", `/tokens/${made.id}`, { token: await admin.token() })).status).toBe(204);
    expect((await api("GET", "/me", { token: made.token })).status).toBe(401);
  });

  test("everyone's tokens are listed for administrators alone", async () => {
    expect((await api("GET", "/tokens?owner=all", { token: await modeller.token() })).status).toBe(403);
    const { tokens } = await jsonOf<{ tokens: Token[] }>(await api("GET", "/tokens?owner=all&limit=200", { token: await admin.token() }), 200);
    expect(new Set(tokens.map((each) => each.owner.id)).size).toBeGreaterThan(1);
  });

  test("pages of a list join without gap or double, and a cursor is bound to its list", async () => {
    const person = await makePerson("modeller");
    const token = await person.token();
    for (let i = 0; i < 5; i++) await person.token();
    const seen: string[] = [];
    let cursor: string | null = null;
    do {
      const page: { tokens: Token[]; nextCursor: string | null } = await jsonOf(await api("GET", `/tokens?limit=4${cursor ? `&cursor=${cursor}` : ""}`, { token }), 200);
      seen.push(...page.tokens.map((each) => each.id));
      cursor = page.nextCursor;
      if (cursor) expect((await api("GET", `/tokens?limit=4&cursor=${cursor}`, { token: await other.token() })).status).toBe(400);
    } while (cursor);
    expect(new Set(seen).size).toBe(6);
    expect(seen).toHaveLength(6);
  });
});

test("a token stands nowhere in the database or the audit trail", async () => {
  const made = await make(modeller, { name: "secret keeper", scopes: ["jobs:read"] });
  await api("GET", "/me", { token: made.token });
  const { rows: tables } = await db().execute<{ name: string }>(sql`select table_name as name from information_schema.tables where table_schema = 'public'`);
  expect(tables.length).toBeGreaterThan(8);
  for (const { name } of tables) {
    const { rows } = await db().execute<{ hits: number }>(sql`select count(*)::int as hits from ${sql.identifier(name)} t where t::text like ${`%${made.token.slice(5, 35)}%`}`);
    expect(rows[0].hits, name).toBe(0);
  }
  const trail = await db().select().from(auditEvent).where(eq(auditEvent.target, made.id));
  expect(trail.map((each) => each.action)).toEqual(["token-created"]);
});

describe("the form of a token", () => {
  test("every single mistyped character is noticed", () => {
    const token = newToken();
    for (let at = 5; at < token.length; at++) {
      const typo = token.slice(0, at) + (token[at] === "x" ? "y" : "x") + token.slice(at + 1);
      expect(isTokenShaped(typo), `place ${at}`).toBe(false);
    }
    expect(isTokenShaped(token)).toBe(true);
  });

  test("the checksum is the CRC-32 of IEEE 802.3 (check value of the published catalogue: 123456789 gives cbf43926)", async () => {
    const { crc32 } = await import("@/lib/services/tokens/token-format");
    expect(crc32("123456789").toString(16)).toBe("cbf43926");
  });
});
