import { pageResponse } from "@/lib/http/link-header";
import { methods } from "@/lib/http/methods";
import { created } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { pageQuery, userCreate } from "@/lib/schemas/api";
import { createUser } from "@/lib/services/users/create";
import { listUsers } from "@/lib/services/users/find";
import { createPasswordLink } from "@/lib/services/users/password-link";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "admin", query: pageQuery }, async ({ request, actor, query }) => pageResponse(request, await listUsers(actor, query))),

  POST: route({ scope: "admin", body: userCreate }, async ({ actor, body }) => {
    const user = await createUser(actor, body);
    return created(`/api/v1/users/${user.id}`, { ...user, passwordLink: await createPasswordLink(actor, user.id) });
  }),
});
