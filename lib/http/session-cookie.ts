/**
 * The browser's session: an encrypted JWT in a cookie that holds nothing but the id of a row in the `session` table.
 */
import { createHash } from "node:crypto";
import { decode } from "next-auth/jwt";
import { env, publicUrl } from "@/lib/env";

/** The key of the JWT. Throws at the first use when it is missing: no default, which everybody would know. */
export function sessionSecret(): string {
  const secret = env().NEXTAUTH_SECRET;
  if (!secret) throw new Error("NEXTAUTH_SECRET is missing (32 characters or more); `npm start` makes one in the data folder");
  return secret;
}

/**
 * Cookie names carry a mark of the installation: cookies know hosts but not ports, so two installations on one machine
 * would otherwise sign each other's people out.
 */
export function cookieNames(): { session: string; csrf: string; callback: string; isSecure: boolean } {
  const mark = createHash("sha256").update("cookie names " + sessionSecret()).digest("hex").slice(0, 8);
  const isSecure = publicUrl(env()).startsWith("https://");
  const prefix = isSecure ? "__Secure-" : "";
  return { session: `${prefix}tufa-session-${mark}`, csrf: `${isSecure ? "__Host-" : ""}tufa-csrf-${mark}`, callback: `${prefix}tufa-callback-${mark}`, isSecure };
}

/** Session id inside a cookie's JWT, or null when it was not made by us, was altered, or is too old. */
export async function sidOfJwt(jwt: string | undefined): Promise<string | null> {
  if (!jwt) return null;
  try {
    const payload = await decode({ token: jwt, secret: sessionSecret() });
    return typeof payload?.sid === "string" ? payload.sid : null;
  } catch {
    return null;
  }
}

/** Value of a cookie in a request's Cookie header. */
export function cookieOf(request: Request, name: string): string | undefined {
  for (const part of (request.headers.get("cookie") ?? "").split(";")) {
    const at = part.indexOf("=");
    if (at > 0 && part.slice(0, at).trim() === name) return part.slice(at + 1).trim();
  }
  return undefined;
}
