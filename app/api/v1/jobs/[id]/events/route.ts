import { eventStream, lastEventIdOf } from "@/lib/http/event-stream";
import { methods } from "@/lib/http/methods";
import { route } from "@/lib/http/route";
import { subscribeJobEvents } from "@/lib/services/events/subscribe-job-events";
import { findJobRow } from "@/lib/services/jobs/find";

export const { GET, POST, PUT, PATCH, DELETE } = methods({
  GET: route({ scope: "jobs:read" }, async ({ request, actor, params }) => {
    const { id } = await findJobRow(actor, params.id);
    return eventStream(request, actor, (signal) => subscribeJobEvents({ jobIds: [id] }, lastEventIdOf(request), signal));
  }),
});
