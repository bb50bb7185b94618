/** 201 with the resource and its address. */
export const created = (location: string, body: object, headers: Record<string, string> = {}): Response =>
  Response.json(body, { status: 201, headers: { Location: location, ...headers } });

export const noContent = (): Response => new Response(null, { status: 204 });
