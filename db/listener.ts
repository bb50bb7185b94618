import pg from "pg";
import { env } from "@/lib/env";

const RECONNECT_MS = [100, 250, 500, 1000, 2000];
/** A half-open connection shows only when written to. */
const PROBE_MS = 15_000;

/**
 * One connection that listens on a channel for the life of the process and comes back by itself when the server goes
 * away. What was sent in between is lost to LISTEN, so `onConnect` runs after every (re)connection to catch up.
 */
export class Listener {
  private client: pg.Client | null = null;
  private closed = false;
  private attempts = 0;
  private timer: NodeJS.Timeout | undefined;

  constructor(
    private readonly channel: string,
    private readonly onPayload: (payload: string) => void,
    private readonly onConnect: () => void = () => {},
  ) {
    void this.connect();
  }

  private async connect(): Promise<void> {
    const client = new pg.Client({ connectionString: env().DATABASE_URL, application_name: `tufa-listen-${this.channel}`, keepAlive: true });
    const lost = () => {
      clearInterval(probe);
      if (this.client !== client) return;
      this.client = null;
      this.reconnectLater();
    };
    this.client = client;
    const probe = setInterval(() => void client.query("select 1").catch(() => { void client.end().catch(() => {}); lost(); }), PROBE_MS);
    probe.unref();
    client.on("error", lost);
    client.on("end", lost);
    client.on("notification", (message) => this.onPayload(message.payload ?? ""));
    try {
      await client.connect();
      await client.query(`listen ${client.escapeIdentifier(this.channel)}`);
      if (this.closed) return await client.end();
      this.attempts = 0;
      this.onConnect();
    } catch {
      void client.end().catch(() => {});
      lost();
    }
  }

  private reconnectLater(): void {
    if (this.closed) return;
    const wait = RECONNECT_MS[Math.min(this.attempts++, RECONNECT_MS.length - 1)];
    this.timer = setTimeout(() => void this.connect(), wait);
  }

  async close(): Promise<void> {
    this.closed = true;
    clearTimeout(this.timer);
    const client = this.client;
    this.client = null;
    await client?.end().catch(() => {});
  }
}
