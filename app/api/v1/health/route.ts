import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { readHealth } from "@/lib/services/health/read";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "public", uncounted: true }, async () => {
    const health = await readHealth();
    return Response.json(health, { status: health.database === "ok" ? 200 : 503 });
  }),
});
