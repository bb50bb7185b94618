import { newId } from "@/lib/ids";

/** The caller's Request-Id where it is harmless text of 8 to 64 characters, else one of ours. */
export function requestIdOf(request: Request): string {
  const given = request.headers.get("request-id");
  return given && /^[\w.-]{8,64}$/.test(given) && !given.startsWith("tufa_") ? given : newId("req");
}
