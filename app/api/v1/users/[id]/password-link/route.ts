import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { createPasswordLink } from "@/lib/services/users/password-link";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  POST: route({ scope: "admin" }, async ({ actor, params }) => createPasswordLink(actor, params.id)),
});
