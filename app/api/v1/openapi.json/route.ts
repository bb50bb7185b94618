import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { openApiJson } from "@/openapi/document";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "public" }, async () =>
    new Response(openApiJson(), { headers: { "Content-Type": "application/openapi+json;version=3.1", "Cache-Control": "public, max-age=300" } })),
});
