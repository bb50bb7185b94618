import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import { findSessionActor } from "@/lib/services/sessions/find-session-actor";
import { findTokenActor } from "@/lib/services/tokens/find-token-actor";
import { cookieNames, cookieOf, sidOfJwt } from "./session-cookie";

const CHALLENGE = { "WWW-Authenticate": 'Bearer realm="tufa"' };

/**
 * Who is asking, by bearer token or session cookie, looked up afresh at each request. Null when the request carries
 * neither; throws `unauthenticated` when what it carries is not valid (a bad token is never rescued by a good cookie).
 */
export async function authenticate(request: Request, requestId: string): Promise<Actor | null> {
  const header = request.headers.get("authorization");
  if (header !== null) {
    const match = /^Bearer +(\S+)$/i.exec(header.trim());
    if (!match) {
      throw new AppError("unauthenticated", "The Authorization header must read: Bearer <token>.", { headers: CHALLENGE });
    }
    const actor = await findTokenActor(match[1], requestId);
    if (!actor) {
      throw new AppError("unauthenticated", "This token is mistyped, unknown, expired or revoked, or its owner is disabled.", {
        headers: { "WWW-Authenticate": `${CHALLENGE["WWW-Authenticate"]}, error="invalid_token"` },
      });
    }
    return actor;
  }
  const jwt = cookieOf(request, cookieNames().session);
  if (!jwt) return null;
  const sid = await sidOfJwt(jwt);
  return sid ? findSessionActor(sid, requestId) : null;
}

/** The error for a request that needs somebody and has nobody. */
export const nobody = (): AppError =>
  new AppError("unauthenticated", "Sign in, or send a token: Authorization: Bearer tufa_….", { headers: CHALLENGE });
