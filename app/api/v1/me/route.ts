import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { describeActor } from "@/lib/services/users/describe-actor";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "signed-in" }, async ({ actor }) => describeActor(actor)),
});
