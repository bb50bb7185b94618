import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { created } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { readUpload, UPLOAD_BODY } from "@/lib/http/upload";
import { sampleSetListQuery, sampleUploadQuery } from "@/lib/schemas/api";
import { intakeSamples } from "@/lib/services/intake/run-intake";
import { createSampleSet } from "@/lib/services/samples/create";
import { listSampleSets } from "@/lib/services/samples/find";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "samples:read", query: sampleSetListQuery }, async ({ request, actor, query }) =>
    pageResponse(request, await listSampleSets(actor, query))),

  POST: route({ scope: "samples:write", query: sampleUploadQuery, rawBody: UPLOAD_BODY }, async ({ request, actor, query, raw }) => {
    const document = await readUpload(request, raw, query, "set");
    const set = await createSampleSet(actor, await intakeSamples(document), document);
    return created(`/api/v1/sample-sets/${set.id}`, set);
  }),
});
