import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { sampleRowsQuery } from "@/lib/schemas/api";
import { readSampleRows } from "@/lib/services/samples/find";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "samples:read", query: sampleRowsQuery }, async ({ request, actor, params, query }) =>
    pageResponse(request, await readSampleRows(actor, params.id, query))),
});
