import type { Actor } from "@/lib/schemas/actor";
import type { Job } from "@/lib/schemas/api";
import { subscribeJobEvents } from "../events/subscribe-job-events";
import { getJob } from "./find";

/** Longest time a request may wait for its job. */
export const WAIT_MAX_SECONDS = 60;
const ENDED = new Set(["done", "failed", "cancelled"]);

/** Seconds asked for by `Prefer: wait` or `Prefer: wait=N`, at most 60; null where nothing is asked. */
export function preferredWait(header: string | null): number | null {
  const match = /(?:^|,)\s*wait(?:\s*=\s*"?(\d+)"?)?\s*(?:;|,|$)/i.exec(header ?? "");
  if (!match) return null;
  return Math.min(WAIT_MAX_SECONDS, match[1] === undefined ? WAIT_MAX_SECONDS : Number(match[1]));
}

/** The job once it has ended, or as it stands when the time is over or the client has gone. */
export async function waitForJob(actor: Actor, jobId: string, seconds: number, signal: AbortSignal): Promise<Job> {
  const until = AbortSignal.any([signal, AbortSignal.timeout(seconds * 1000)]);
  if (seconds > 0) {
    for await (const { event } of subscribeJobEvents({ jobIds: [jobId] }, null, until)) {
      if (ENDED.has(event.status)) break;
    }
  }
  return getJob(actor, jobId);
}
