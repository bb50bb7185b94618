import { jobEvent, type JobEvent } from "@/lib/schemas/api";

type Receiver = (event: JobEvent) => void;

/** One stream a tab serves all that listen: browsers allow few connections to one host. */
const receivers = new Set<Receiver>();
let source: EventSource | null = null;

function open(): void {
  // The browser reconnects by itself and sends the last id it saw, so that nothing is missed.
  source = new EventSource("/api/v1/events");
  source.onmessage = (message) => {
    const event = jobEvent.safeParse(JSON.parse(String(message.data)));
    if (event.success) for (const receive of [...receivers]) receive(event.data);
  };
}

/** Hears the progress of the person's jobs until the function returned is called; the last to leave closes the stream. */
export function subscribeJobEvents(receive: Receiver): () => void {
  receivers.add(receive);
  if (!source || source.readyState === EventSource.CLOSED) open();
  return () => {
    receivers.delete(receive);
    if (receivers.size > 0) return;
    source?.close();
    source = null;
  };
}
