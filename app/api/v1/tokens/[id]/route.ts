import { methods } from "@/lib/http/methods";
import { noContent } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { revokeToken } from "@/lib/services/tokens/revoke";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  DELETE: route({ scope: "signed-in" }, async ({ actor, params }) => {
    await revokeToken(actor, params.id);
    return noContent();
  }),
});
