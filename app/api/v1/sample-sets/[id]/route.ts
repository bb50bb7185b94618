import { jsonWithEtag } from "@/lib/http/etag";
import { methods } from "@/lib/http/methods";
import { noContent } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { deleteSampleSet } from "@/lib/services/samples/delete";
import { getSampleSet } from "@/lib/services/samples/find";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "samples:read" }, async ({ request, actor, params }) => jsonWithEtag(request, await getSampleSet(actor, params.id))),

  DELETE: route({ scope: "samples:write" }, async ({ actor, params }) => {
    await deleteSampleSet(actor, params.id);
    return noContent();
  }),
});
