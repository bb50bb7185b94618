import { eventStream, lastEventIdOf } from "@/lib/http/event-stream";
import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { subscribeJobEvents } from "@/lib/services/events/subscribe-job-events";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "jobs:read" }, async ({ request, actor }) =>
    eventStream(request, actor, (signal) => subscribeJobEvents({ ownerId: actor.userId }, lastEventIdOf(request), signal))),
});
