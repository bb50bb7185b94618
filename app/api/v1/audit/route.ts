import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { auditQuery } from "@/lib/schemas/api";
import { listAudit } from "@/lib/services/audit/list";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "admin", query: auditQuery }, async ({ request, actor, query }) => pageResponse(request, await listAudit(actor, query))),
});
