import { env, publicUrl } from "@/lib/env";
import { AppError } from "@/lib/errors";

/**
 * Refuses a write that another site could have made a browser send: the cookie goes along by itself, so Origin has to
 * be ours. Tokens are never sent by themselves and need no such check.
 */
export function requireSameOrigin(request: Request): void {
  const origin = request.headers.get("origin");
  const host = request.headers.get("host") ?? new URL(request.url).host;
  if (origin === null) {
    // Browsers send Origin with every write; what lacks it must at least say that it comes from our own page.
    if (request.headers.get("sec-fetch-site") === "same-origin") return;
    throw new AppError("forbidden", "A write with a session cookie needs an Origin header; scripts use a token instead.");
  }
  if (!URL.canParse(origin) || (new URL(origin).host !== host && origin !== publicUrl(env()))) {
    throw new AppError("forbidden", `A write from ${origin.slice(0, 100)} is not taken here.`);
  }
}
