import { cookies, headers } from "next/headers";
import { redirect } from "next/navigation";
import { cache } from "react";
import type { Actor, Role } from "@/lib/schemas/actor";
import { findSessionActor } from "@/lib/services/sessions/find-session-actor";
import { cookieNames, sidOfJwt } from "./session-cookie";

/** The signed-in person behind a page request, or null. One look-up per request, however many components ask. */
export const pageActor = cache(async (): Promise<Actor | null> => {
  const jwt = (await cookies()).get(cookieNames().session)?.value;
  const sid = await sidOfJwt(jwt);
  return sid ? findSessionActor(sid, (await headers()).get("request-id")) : null;
});

/**
 * For server pages: the signed-in person, else a redirect to the sign-in page, which leads back to `here`. With a role,
 * anybody else is sent to the front page (the page's existence is no secret, its data are).
 */
export async function requireActor(here: string, role?: Role): Promise<Actor> {
  const actor = await pageActor();
  if (!actor) redirect(here === "/" ? "/sign-in" : `/sign-in?${new URLSearchParams({ callbackUrl: here })}`);
  if (role && actor.role !== role) redirect("/");
  return actor;
}
