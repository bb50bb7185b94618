import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { passwordSet } from "@/lib/schemas/api";
import { spendPasswordLink } from "@/lib/services/users/password-link";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  POST: route({ scope: "public", body: passwordSet, secretFields: ["/secret", "/password"] }, async ({ body }) =>
    spendPasswordLink(body.secret, body.password)),
});
