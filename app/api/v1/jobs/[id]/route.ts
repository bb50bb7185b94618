import { jsonWithEtag } from "@/lib/http/etag";
import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { getJob } from "@/lib/services/jobs/find";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "jobs:read" }, async ({ request, actor, params }) => jsonWithEtag(request, await getJob(actor, params.id))),
});
