import { methods } from "@/lib/http/methods";
import { created } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { readUpload, UPLOAD_BODY } from "@/lib/http/upload";
import { sampleUploadQuery } from "@/lib/schemas/api";
import { intakeSamples } from "@/lib/services/intake/run-intake";
import { addSampleSetVersion } from "@/lib/services/samples/create";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  POST: route({ scope: "samples:write", query: sampleUploadQuery, rawBody: UPLOAD_BODY }, async ({ request, actor, params, query, raw }) => {
    const document = await readUpload(request, raw, query, "version");
    const set = await addSampleSetVersion(actor, params.id, await intakeSamples(document), document);
    return created(`/api/v1/sample-sets/${set.id}/rows?version=${set.version}`, set);
  }),
});
