import { AppError } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { StreamedEvent } from "@/lib/services/events/subscribe-job-events";
import { isActorLive } from "@/lib/services/tokens/find-token-actor";
import { log } from "./log";

/** A comment line this often keeps proxies and clients from giving up on a quiet stream. */
const KEEP_ALIVE_MS = 15_000;
/** A revoked token or ended session closes its open streams within this time and one query. */
const LIVENESS_MS = 3_000;
/** Events a client may lag behind before it is cut off; it resumes with Last-Event-ID. */
const MAX_LAG = 1_000;

/** Open streams of one person; a tab needs one. */
const MAX_STREAMS = 30;
const held = globalThis as { tufaOpenStreams?: Map<string, number> };

/** Counts a stream in, and returns what counts it out. Throws `rate-limited` at 30 open ones. */
function countStream(userId: string): () => void {
  const open = (held.tufaOpenStreams ??= new Map<string, number>());
  const count = open.get(userId) ?? 0;
  if (count >= MAX_STREAMS) {
    throw new AppError("rate-limited", `You have ${count} event streams open; close some. GET /api/v1/events carries all your jobs in one.`, { headers: { "Retry-After": "5" } });
  }
  open.set(userId, count + 1);
  return () => {
    const left = (open.get(userId) ?? 1) - 1;
    if (left > 0) open.set(userId, left);
    else open.delete(userId);
  };
}

/** The Last-Event-ID a client sends when it resumes; null for a fresh start or nonsense. */
export function lastEventIdOf(request: Request): number | null {
  const text = request.headers.get("last-event-id") ?? new URL(request.url).searchParams.get("lastEventId");
  return text !== null && /^\d{1,15}$/.test(text) ? Number(text) : null;
}

/**
 * Server-sent events from a subscription: one `data:` line of JSON each, `id:` for resuming. Ends when the subscription
 * ends, the client goes away (only request.signal tells; a stream's cancel() is not called), or the actor's credential
 * no longer holds.
 */
export function eventStream(request: Request, actor: Actor, subscribe: (signal: AbortSignal) => AsyncIterable<StreamedEvent>): Response {
  const leave = countStream(actor.userId);
  const end = new AbortController();
  const encoder = new TextEncoder();
  const stop = (): void => end.abort();
  request.signal.addEventListener("abort", stop, { once: true });
  const body = new ReadableStream<Uint8Array>({
    async start(controller) {
      const send = (text: string): void => {
        if (end.signal.aborted) return;
        if ((controller.desiredSize ?? 0) < -MAX_LAG) return stop();
        controller.enqueue(encoder.encode(text));
      };
      const keepAlive = setInterval(() => send(": still here\n\n"), KEEP_ALIVE_MS);
      const liveness = setInterval(() => {
        // A database that is away for a moment is no reason to cut anybody off.
        isActorLive(actor).then((isLive) => { if (!isLive) stop(); }, () => {});
      }, LIVENESS_MS);
      send("retry: 1000\n: open\n\n");
      void pump(subscribe(end.signal), send, actor).finally(() => {
        clearInterval(keepAlive);
        clearInterval(liveness);
        request.signal.removeEventListener("abort", stop);
        leave();
        stop();
        try { controller.close(); } catch { /* the client closed it before us */ }
      });
    },
    cancel: stop,
  });
  return new Response(body, {
    headers: {
      "Content-Type": "text/event-stream; charset=utf-8", "Cache-Control": "no-store, no-transform",
      "X-Accel-Buffering": "no", "Connection": "keep-alive",
    },
  });
}

async function pump(events: AsyncIterable<StreamedEvent>, send: (text: string) => void, actor: Actor): Promise<void> {
  try {
    for await (const { id, event } of events) send(`id: ${id}\ndata: ${JSON.stringify(event)}\n\n`);
  } catch (error) {
    log().error({ err: error, requestId: actor.requestId }, "event stream failed");
  }
}
