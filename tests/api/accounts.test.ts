import { and, eq, ne } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb, db } from "@/db/client";
import { appUser, auditEvent, oneTimeLink, rateWindow } from "@/db/schema";
import { randomBase62 } from "@/lib/ids";
import type { AuditEvent, Me, Problem, User, UserCreated } from "@/lib/schemas/api";
import { revokeSession } from "@/lib/services/sessions/revoke";
import { SIGN_IN_LIMITS, signIn } from "@/lib/services/users/sign-in";
import { passwordIssues } from "@/lib/services/users/password-rules";
import { api, jsonOf, makePerson, type Person, SAME_ORIGIN } from "./support";

let admin: Person;
let adminToken: string;
beforeAll(async () => {
  admin = await makePerson("administrator");
  adminToken = await admin.token();
});
afterAll(closeDb);

const address = () => `new-${randomBase62(8)}@Sallowmere.example`;
const PASSWORD = "kiln quern osier tarn";
async function invite(role = "analyst"): Promise<UserCreated> {
  return jsonOf(await api("POST", "/users", { token: adminToken, body: { email: address(), name: "Nell Arkwright", role } }), 201);
}
const secretOf = (made: UserCreated) => made.passwordLink.url.split("#")[1];
async function inviteWithPassword(role = "analyst"): Promise<UserCreated> {
  const made = await invite(role);
  await jsonOf(await api("POST", "/password", { body: { secret: secretOf(made), password: PASSWORD } }), 200);
  return made;
}

describe("an account from invitation to sign-in", () => {
  test("the invitation's link sets a password once; its secret is stored only as a hash", async () => {
    const made = await invite();
    expect(made.state).toBe("invited");
    expect(made.email).toBe(made.email.toLowerCase());
    expect(made.passwordLink.url).toMatch(/\/set-password#[0-9A-Za-z]{32}$/);
    const [stored] = await db().select().from(oneTimeLink).where(eq(oneTimeLink.userId, made.id));
    expect(JSON.stringify(stored)).not.toContain(secretOf(made));
    expect(await jsonOf(await api("POST", "/password", { body: { secret: secretOf(made), password: PASSWORD } }), 200)).toEqual({ email: made.email });
    expect((await api("POST", "/password", { body: { secret: secretOf(made), password: PASSWORD } })).status).toBe(404);
    const signed = await signIn(made.email.toUpperCase(), PASSWORD, "test");
    expect(signed).toMatchObject({ ok: true, userId: made.id });
  });

  test("a weak password is refused with its reason and never echoed, and the link stays good", async () => {
    const made = await invite();
    for (const [password, code] of [["short7!", "too-short"], ["Password123", "common"], ["12345678", "common"], [made.email, "same-as-email"], ["a".repeat(300), "too-long"]]) {
      const response = await api("POST", "/password", { body: { secret: secretOf(made), password } });
      const text = await response.clone().text();
      const problem = await jsonOf<Problem>(response, 422);
      expect(problem.errors?.[0]).toMatchObject({ pointer: "/password", code });
      if (code === "too-short") expect(text).not.toContain(password);
    }
    expect(passwordIssues("correct horse".repeat(5), "x@y.example")).toEqual([]);
    await jsonOf(await api("POST", "/password", { body: { secret: secretOf(made), password: "a".repeat(30) + "bcd efg h".repeat(4) } }), 200);
  });

  test("a new link replaces the one before", async () => {
    const made = await invite();
    const next = await jsonOf<{ url: string }>(await api("POST", `/users/${made.id}/password-link`, { token: adminToken }), 200);
    expect((await api("POST", "/password", { body: { secret: secretOf(made), password: PASSWORD } })).status).toBe(404);
    await jsonOf(await api("POST", "/password", { body: { secret: next.url.split("#")[1], password: PASSWORD } }), 200);
  });

  test("an address that is taken is 409; faults of the body are named all at once", async () => {
    const made = await invite();
    expect((await api("POST", "/users", { token: adminToken, body: { email: made.email.toUpperCase(), name: "Twin", role: "analyst" } })).status).toBe(409);
    const problem = await jsonOf<Problem>(await api("POST", "/users", { token: adminToken, body: { email: "nowhere", role: "queen", password: "x" } }), 422);
    expect(problem.errors?.map((each) => each.pointer).sort()).toEqual(["/email", "/name", "/password", "/role"]);
  });
});

describe("sessions", () => {
  test("signing out bites at the next request", async () => {
    const person = await makePerson("modeller");
    const { header, sid } = await person.cookie();
    expect((await jsonOf<Me>(await api("GET", "/me", { cookie: header }), 200)).via).toBe("session");
    await revokeSession(sid);
    expect((await api("GET", "/me", { cookie: header })).status).toBe(401);
  });

  test("disabling somebody ends their sessions, tokens and sign-in at once", async () => {
    const made = await inviteWithPassword("modeller");
    const signed = await signIn(made.email, PASSWORD, null);
    expect(signed.ok).toBe(true);
    const shown = await jsonOf<User>(await api("PATCH", `/users/${made.id}`, { token: adminToken, body: { disabled: true } }), 200);
    expect(shown.state).toBe("disabled");
    expect(await signIn(made.email, PASSWORD, null)).toEqual({ ok: false, reason: "credentials" });
    expect((await jsonOf<User>(await api("PATCH", `/users/${made.id}`, { token: adminToken, body: { disabled: false } }), 200)).state).toBe("active");
    expect((await signIn(made.email, PASSWORD, null)).ok).toBe(true);
  });

  test("setting a password ends the sessions that were open", async () => {
    const person = await makePerson("analyst");
    const { header } = await person.cookie();
    const link = await jsonOf<{ url: string }>(await api("POST", `/users/${person.actor.userId}/password-link`, { token: adminToken }), 200);
    expect((await api("GET", "/me", { cookie: header })).status).toBe(200);
    await jsonOf(await api("POST", "/password", { body: { secret: link.url.split("#")[1], password: PASSWORD } }), 200);
    expect((await api("GET", "/me", { cookie: header })).status).toBe(401);
  });

  test("a cookie of another key, a bent cookie and a bad token beside a good cookie are refused", async () => {
    const person = await makePerson("analyst");
    const { header } = await person.cookie();
    expect((await api("GET", "/me", { cookie: header.slice(0, -3) + "abc" })).status).toBe(401);
    expect((await api("GET", "/me", { cookie: header, token: "tufa_wrong" })).status).toBe(401);
  });

  test("a cookie's write from the same origin is taken", async () => {
    const { header } = await (await makePerson("analyst")).cookie();
    const response = await api("POST", "/tokens", { cookie: header, headers: SAME_ORIGIN, body: { name: "from the page", scopes: ["jobs:read"] } });
    expect(response.status).toBe(201);
    const form = await api("POST", "/tokens", { cookie: header, headers: { ...SAME_ORIGIN, "content-type": "text/plain" }, body: "{}" });
    expect(form.status).toBe(415);
  });
});

describe("sign-in", () => {
  test("is limited per account, whether the address exists or not, and a right password does not help then", async () => {
    const made = await inviteWithPassword();
    for (const email of [made.email, address()]) {
      for (let i = 0; i < SIGN_IN_LIMITS.perAccount; i++) expect(await signIn(email, "a guess that misses", null)).toEqual({ ok: false, reason: "credentials" });
      const refused = await signIn(email, PASSWORD, null);
      expect(refused).toMatchObject({ ok: false, reason: "rate-limited" });
    }
    const trail = await db().select().from(auditEvent).where(eq(auditEvent.target, made.id));
    expect(trail.filter((each) => each.action === "sign-in-failed")).toHaveLength(SIGN_IN_LIMITS.perAccount);
    expect(JSON.stringify(trail)).not.toContain("a guess that misses");
  });

  test("is limited over all accounts", async () => {
    const made = await inviteWithPassword();
    const windowStart = new Date(Math.floor(Date.now() / 60_000) * 60_000);
    await db().insert(rateWindow).values([0, 60_000].map((ms) => ({ bucket: "sign-in", windowStart: new Date(windowStart.getTime() + ms), count: SIGN_IN_LIMITS.global })))
      .onConflictDoUpdate({ target: [rateWindow.bucket, rateWindow.windowStart], set: { count: SIGN_IN_LIMITS.global } });
    expect(await signIn(made.email, PASSWORD, null)).toMatchObject({ ok: false, reason: "rate-limited" });
    await db().delete(rateWindow).where(eq(rateWindow.bucket, "sign-in"));
    expect((await signIn(made.email, PASSWORD, null)).ok).toBe(true);
  });

  test("leaves its line in the audit trail, which administrators read", async () => {
    const made = await inviteWithPassword();
    await signIn(made.email, PASSWORD, null);
    const { events } = await jsonOf<{ events: AuditEvent[] }>(await api("GET", "/audit?limit=50", { token: adminToken }), 200);
    expect(events.filter((each) => each.target === made.id).map((each) => each.action)).toEqual(
      expect.arrayContaining(["user-created", "password-link-created", "password-set", "sign-in"]));
  });
});

test("the last active administrator can be neither disabled nor demoted", async () => {
  const last = await inviteWithPassword("administrator");
  const others = await db().select({ id: appUser.id, passwordHash: appUser.passwordHash }).from(appUser)
    .where(and(eq(appUser.role, "administrator"), ne(appUser.id, last.id)));
  await db().update(appUser).set({ passwordHash: null }).where(and(eq(appUser.role, "administrator"), ne(appUser.id, last.id)));
  try {
    for (const body of [{ disabled: true }, { role: "modeller" }]) {
      expect((await api("PATCH", `/users/${last.id}`, { token: adminToken, body })).status).toBe(409);
    }
    expect((await api("PATCH", `/users/${last.id}`, { token: adminToken, body: { name: "Ada Lowe" } })).status).toBe(200);
  } finally {
    for (const { id, passwordHash } of others) await db().update(appUser).set({ passwordHash }).where(eq(appUser.id, id));
  }
});

test("an unknown user is 404, a body that is no JSON 400, a page limit out of range 400", async () => {
  expect((await api("GET", "/users/usr_none", { token: adminToken })).status).toBe(404);
  expect((await api("PATCH", "/users/usr_none", { token: adminToken, body: { disabled: true } })).status).toBe(404);
  expect((await api("POST", "/users", { token: adminToken, body: "{", headers: { "content-type": "application/json" } })).status).toBe(400);
  const problem = await jsonOf<Problem>(await api("GET", "/users?limit=0&page=2", { token: adminToken }), 400);
  expect(problem.errors?.map((each) => each.pointer).sort()).toEqual(["/limit", "/page"]);
});
