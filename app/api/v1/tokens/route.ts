import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { created } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { tokenCreate, tokenListQuery } from "@/lib/schemas/api";
import { createToken } from "@/lib/services/tokens/create";
import { listTokens } from "@/lib/services/tokens/list";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "signed-in", query: tokenListQuery }, async ({ request, actor, query }) => pageResponse(request, await listTokens(actor, query))),

  POST: route({ scope: "signed-in", body: tokenCreate }, async ({ actor, body }) => {
    const token = await createToken(actor, body);
    return created(`/api/v1/tokens/${token.id}`, token);
  }),
});
