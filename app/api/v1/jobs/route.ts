import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { DOCUMENT_LIMIT } from "@/lib/http/read-body";
import { created } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { jobCreateQuery, jobListQuery } from "@/lib/schemas/api";
import { intakeSpec } from "@/lib/services/intake/run-intake";
import { createJob } from "@/lib/services/jobs/create";
import { readIdempotencyKey } from "@/lib/services/jobs/idempotency";
import { listJobs } from "@/lib/services/jobs/list";
import { preferredWait, waitForJob } from "@/lib/services/jobs/wait";
import { dryRun } from "@/lib/services/solve/solve-spec";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "jobs:read", query: jobListQuery }, async ({ request, actor, query }) => pageResponse(request, await listJobs(actor, query))),

  POST: route(
    { scope: "jobs:write", query: jobCreateQuery, rawBody: { types: ["application/json"], maxBytes: DOCUMENT_LIMIT } },
    async ({ request, actor, query, raw, signal }) => {
      const idempotencyKey = readIdempotencyKey(request.headers.get("idempotency-key"));
      const prepared = await intakeSpec(raw.bytes);
      if (query.dry === "true") return dryRun(actor, prepared);
      const submitted = await createJob(actor, { prepared, visibility: query.visibility, idempotencyKey });
      const headers: Record<string, string> = submitted.isReplay ? { "Idempotency-Replayed": "true" } : {};
      const seconds = preferredWait(request.headers.get("prefer"));
      if (seconds === null) return created(submitted.location, submitted.job, headers);
      const job = await waitForJob(actor, submitted.job.id, seconds, signal);
      return created(submitted.location, job, { ...headers, "Preference-Applied": `wait=${seconds}` });
    },
  ),
});
