import { createHash } from "node:crypto";

/** JSON with an ETag of its content; 304 without a body when the client has it already. */
export function jsonWithEtag(request: Request, body: object): Response {
  const text = JSON.stringify(body);
  const etag = `"${createHash("sha256").update(text).digest("base64url").slice(0, 22)}"`;
  const headers = { ETag: etag, "Cache-Control": "private, no-cache" };
  const known = (request.headers.get("if-none-match") ?? "").split(",").map((each) => each.trim().replace(/^W\//, ""));
  if (known.includes(etag) || known.includes("*")) return new Response(null, { status: 304, headers });
  return new Response(text, { headers: { ...headers, "Content-Type": "application/json" } });
}
