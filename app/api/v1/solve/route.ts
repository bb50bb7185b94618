import { methods } from "@/lib/http/methods";
import { DOCUMENT_LIMIT } from "@/lib/http/read-body";
import { route } from "@/lib/http/route";
import { intakeSpec } from "@/lib/services/intake/run-intake";
import { solveSpec } from "@/lib/services/solve/solve-spec";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  POST: route(
    { scope: "jobs:write", rawBody: { types: ["application/json"], maxBytes: DOCUMENT_LIMIT } },
    async ({ actor, raw }) => solveSpec(actor, await intakeSpec(raw.bytes)),
  ),
});
