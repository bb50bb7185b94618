import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { resultFormat } from "@/lib/http/negotiate";
import { route } from "@/lib/http/route";
import { resultsQuery } from "@/lib/schemas/api";
import { findJobRow } from "@/lib/services/jobs/find";
import { readResultPage } from "@/lib/services/results/read-result-page";
import { streamResults } from "@/lib/services/results/stream-results";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "jobs:read", query: resultsQuery }, async ({ request, actor, params, query, signal }) => {
    const row = await findJobRow(actor, params.id);
    const format = resultFormat(query.format, request.headers.get("accept"));
    const part = { select: query.select?.split(",").map((name) => name.trim()).filter(Boolean), where: query.where, sort: query.sort };
    if (format === "json") {
      const page = await readResultPage(row, { ...part, cursor: query.cursor, offset: query.firstRow, limit: query.limit });
      return pageResponse(request, page, { "Tufa-Row-Count": String(page.rowCount), Vary: "Accept" });
    }
    const { body, headers } = await streamResults(row, { ...part, format, from: query.firstRow, footer: query.footer === "true" }, signal);
    return new Response(body, { headers: { ...headers, vary: "accept" } });
  }),
});
