import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { userPatch } from "@/lib/schemas/api";
import { getUser } from "@/lib/services/users/find";
import { updateUser } from "@/lib/services/users/update";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "admin" }, async ({ params }) => getUser(params.id)),
  PATCH: route({ scope: "admin", body: userPatch }, async ({ actor, params, body }) => updateUser(actor, params.id, body)),
});
