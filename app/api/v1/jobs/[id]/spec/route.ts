import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { getJobSpec } from "@/lib/services/jobs/find";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "jobs:read" }, async ({ actor, params }) => {
    const { json, specHash } = await getJobSpec(actor, params.id);
    return new Response(json, { headers: { "Content-Type": "application/json", "Tufa-Spec-Hash": specHash } });
  }),
});
