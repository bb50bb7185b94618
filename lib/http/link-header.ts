/** JSON of a page, with a Link header to the next one (RFC 8288) beside its `nextCursor`. */
export function pageResponse(request: Request, body: { nextCursor: string | null }, headers: Record<string, string> = {}): Response {
  const response = Response.json(body, { headers });
  if (body.nextCursor !== null) {
    const next = new URL(request.url);
    next.searchParams.set("cursor", body.nextCursor);
    next.searchParams.delete("firstRow");
    response.headers.set("Link", `<${next.pathname}${next.search}>; rel="next"`);
  }
  return response;
}
