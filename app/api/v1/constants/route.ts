import { jsonWithEtag } from "@/lib/http/etag";
import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { constantsQuery } from "@/lib/schemas/api";
import { listConstants } from "@/lib/services/constants/list";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "signed-in", query: constantsQuery }, async ({ request, query }) => jsonWithEtag(request, listConstants(query.temperature, query.temperatures.split(",").map(Number)))),
});
