import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { cancelJob } from "@/lib/services/jobs/cancel";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  POST: route({ scope: "jobs:write" }, async ({ actor, params }) => cancelJob(actor, params.id)),
});
