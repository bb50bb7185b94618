/**
 * next-auth: credentials and JWT. The JWT carries the id of a row of our own `session` table; every request asks that
 * row (authenticate.ts, page-auth.ts), so signing out and disabling bite at once.
 */
import type { NextAuthOptions } from "next-auth";
import Credentials from "next-auth/providers/credentials";
import { findSessionActor } from "@/lib/services/sessions/find-session-actor";
import { revokeSession } from "@/lib/services/sessions/revoke";
import { SESSION_SECONDS, signIn } from "@/lib/services/users/sign-in";
import { log } from "./log";
import { cookieNames, sessionSecret } from "./session-cookie";

const textOf = (value: unknown): string => (typeof value === "string" ? value : "");

const credentials = Credentials({
  name: "E-mail and password",
  credentials: { email: { label: "E-mail", type: "email" }, password: { label: "Password", type: "password" } },
  async authorize(given, request) {
    const agent = (request.headers as Record<string, string> | undefined)?.["user-agent"] ?? null;
    const result = await signIn(textOf(given?.email), textOf(given?.password), agent);
    // next-auth hands the message of an error to the sign-in page as `error`.
    if (!result.ok) throw new Error(result.reason);
    return { id: result.userId, name: result.name, email: result.email, sid: result.sid };
  },
});

/** Options for the route handler. Built per call: names and secret come from the environment. */
export function authOptions(): NextAuthOptions {
  const names = cookieNames();
  const cookie = { httpOnly: true, sameSite: "lax", path: "/", secure: names.isSecure } as const;
  return {
    providers: [credentials],
    secret: sessionSecret(),
    session: { strategy: "jwt", maxAge: SESSION_SECONDS },
    useSecureCookies: names.isSecure,
    cookies: {
      sessionToken: { name: names.session, options: cookie },
      csrfToken: { name: names.csrf, options: cookie },
      callbackUrl: { name: names.callback, options: cookie },
    },
    pages: { signIn: "/sign-in", error: "/sign-in" },
    callbacks: {
      jwt({ token, user }) {
        const sid = (user as { sid?: unknown } | undefined)?.sid;
        return { sub: token.sub, sid: typeof sid === "string" ? sid : token.sid };
      },
      async session({ session, token }) {
        const actor = typeof token.sid === "string" ? await findSessionActor(token.sid, null) : null;
        const user = actor ? { id: actor.userId, name: actor.name, email: actor.email, role: actor.role } : undefined;
        return { expires: session.expires, user };
      },
    },
    events: {
      async signOut({ token }) {
        if (typeof token?.sid === "string") await revokeSession(token.sid);
      },
    },
    logger: {
      // A wrong password is an event of the audit trail, not a fault of ours.
      error: (code, detail) => { if (code !== "CALLBACK_CREDENTIALS_HANDLER_ERROR") log().error({ code, detail }, "next-auth"); },
      warn: () => {},
      debug: () => {},
    },
  };
}
