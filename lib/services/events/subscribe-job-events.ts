import { pool } from "@/db/client";
import { Listener } from "@/db/listener";
import { EVENT_CHANNEL } from "@/jobs/definitions/plan-job";
import type { JobEvent } from "@/lib/schemas/api";

export type EventSubject = { jobIds: readonly string[] } | { ownerId: string };
export interface StreamedEvent { id: number; event: JobEvent }
interface NotifiedEvent extends StreamedEvent { owner: string }

/** Progress events of one job come at most this often; the last is never lost, only late. */
const THROTTLE_MS = 200;
const ENDED = new Set<JobEvent["type"]>(["job-done", "job-failed", "job-cancelled"]);

/** One LISTEN connection serves every stream of the process, also across the dev server's module reloads. */
interface Hub { listener: Listener; receivers: Set<{ take(event: NotifiedEvent): void; reconnected(): void }> }
const held = globalThis as { tufaEventHub?: Hub };

function hub(): Hub {
  if (held.tufaEventHub) return held.tufaEventHub;
  const receivers: Hub["receivers"] = new Set();
  const listener = new Listener(
    EVENT_CHANNEL,
    (payload) => { const event = JSON.parse(payload) as NotifiedEvent; for (const receiver of receivers) receiver.take(event); },
    () => { for (const receiver of receivers) receiver.reconnected(); },
  );
  return (held.tufaEventHub = { listener, receivers });
}

/** Ends the LISTEN connection, for tests and commands that want to exit. */
export async function closeEventHub(): Promise<void> {
  const open = held.tufaEventHub;
  held.tufaEventHub = undefined;
  await open?.listener.close();
}

interface StoredEvent { id: string; job_id: string; at: Date; type: JobEvent["type"]; data: Omit<JobEvent, "type" | "jobId" | "at"> }

const shown = (row: StoredEvent): StreamedEvent => ({
  id: Number(row.id), event: { type: row.type, jobId: row.job_id, at: row.at.toISOString(), ...row.data },
});

const subjectSql = (subject: EventSubject): [string, unknown] => ("jobIds" in subject
  ? ["e.job_id = any($1::text[])", [...subject.jobIds]] : ["e.job_id in (select id from job where owner_id = $1)", subject.ownerId]);

/** Events after `id` in order, progress reduced to each job's newest where others follow it anyway. */
async function eventsAfter(subject: EventSubject, id: number): Promise<StreamedEvent[]> {
  const [which, value] = subjectSql(subject);
  const { rows } = await pool().query<StoredEvent>(
    `select e.id, e.job_id, e.at, e.type, e.data from job_event e where ${which} and e.id > $2
     and (e.type <> 'chunk-done' or not exists (select from job_event later where later.job_id = e.job_id and later.id > e.id)) order by e.id`, [value, id]);
  return rows.map(shown);
}

/** The newest event of each job named, or of each unfinished job of the owner. */
async function latestEvents(subject: EventSubject): Promise<StreamedEvent[]> {
  const [which, value] = subjectSql(subject);
  const open = "jobIds" in subject ? "" : "and j.status in ('queued', 'running')";
  const { rows } = await pool().query<StoredEvent>(
    `select distinct on (e.job_id) e.id, e.job_id, e.at, e.type, e.data from job_event e join job j on j.id = e.job_id
     where ${which} ${open} order by e.job_id, e.id desc`, [value]);
  return rows.map(shown).sort((a, b) => a.id - b.id);
}

/** What waits to be sent of one job: everything in order, but of progress only the newest, and that not too often. */
class Outbox {
  private readonly queue: StreamedEvent[] = [];
  private readonly lastSent = new Map<string, number>();
  private timer: NodeJS.Timeout | undefined;
  private ring: () => void = () => {};

  put(event: StreamedEvent): void {
    // Progress that has not been sent yet is overtaken by whatever comes next of its job.
    const waiting = this.queue.findIndex((other) => other.event.jobId === event.event.jobId && other.event.type === "chunk-done");
    if (waiting >= 0) this.queue.splice(waiting, 1);
    this.queue.push(event);
    this.ring();
  }

  /** The next event that may go now; otherwise null, and `wait` rings when one may. */
  take(): StreamedEvent | null {
    const now = Date.now();
    let soonest = Infinity;
    for (const [index, item] of this.queue.entries()) {
      const due = item.event.type === "chunk-done" ? (this.lastSent.get(item.event.jobId) ?? 0) + THROTTLE_MS : 0;
      if (due <= now) {
        this.queue.splice(index, 1);
        this.lastSent.set(item.event.jobId, now);
        return item;
      }
      soonest = Math.min(soonest, due - now);
    }
    clearTimeout(this.timer);
    if (soonest < Infinity) this.timer = setTimeout(() => this.ring(), soonest);
    return null;
  }

  wait(): Promise<void> {
    return new Promise((resolve) => { this.ring = resolve; });
  }

  wake(): void {
    this.ring();
  }

  close(): void {
    clearTimeout(this.timer);
  }
}

/**
 * Events of some jobs, or of all jobs of an owner, as they happen. Starts with each job's latest event (for an owner:
 * of the jobs not ended), or, given `lastEventId`, with all after it, missed progress reduced to the newest. Ends when
 * `signal` aborts and, for `jobIds`, once all of them have ended; a job taken up again later starts a new stream.
 * A lost database connection is bridged: what was missed is read from job_event.
 */
export async function* subscribeJobEvents(
  subject: EventSubject, lastEventId: number | null, signal: AbortSignal,
): AsyncGenerator<StreamedEvent> {
  const outbox = new Outbox();
  const seen = new Map<string, number>();
  const offer = (event: StreamedEvent) => {
    if (event.id <= (seen.get(event.event.jobId) ?? -1)) return;
    seen.set(event.event.jobId, event.id);
    outbox.put(event);
  };
  const concerns = ({ owner, event }: NotifiedEvent) => ("jobIds" in subject ? subject.jobIds.includes(event.jobId) : owner === subject.ownerId);
  // Unknown until the first reading; a (re)connection before that has nothing to make up for.
  let newest: number | null = null;
  const catchUp = () => newest !== null && void eventsAfter(subject, newest).then((events) => events.forEach(offer)).catch(() => {}); // the next reconnection tries again
  const receiver = { take: (event: NotifiedEvent) => { if (concerns(event)) offer({ id: event.id, event: event.event }); }, reconnected: catchUp };
  const abort = () => outbox.wake();
  signal.addEventListener("abort", abort, { once: true });
  // Listening before reading: what happens in between comes twice and is dropped once.
  hub().receivers.add(receiver);
  try {
    const open = await openJobs(subject);
    const start = lastEventId ?? await newestId();
    (lastEventId === null ? await latestEvents(subject) : await eventsAfter(subject, lastEventId)).forEach(offer);
    newest = start;
    while (!signal.aborted) {
      // The promise first: a ring between an empty take and the wait would be lost.
      const rung = outbox.wait();
      const next = outbox.take();
      if (next) {
        newest = Math.max(newest, next.id);
        yield { id: next.id, event: next.event };
        if (ENDED.has(next.event.type)) open?.delete(next.event.jobId);
        else open?.add(next.event.jobId);
      } else if (open?.size === 0) return;
      else await rung;
    }
  } finally {
    signal.removeEventListener("abort", abort);
    held.tufaEventHub?.receivers.delete(receiver);
    outbox.close();
  }
}

async function newestId(): Promise<number> {
  const { rows: [row] } = await pool().query<{ id: string | null }>("select max(id) as id from job_event");
  return Number(row.id ?? 0);
}

/** Ids of the named jobs that have not ended; null for an owner's stream, which has no end. */
async function openJobs(subject: EventSubject): Promise<Set<string> | null> {
  if (!("jobIds" in subject)) return null;
  const { rows } = await pool().query<{ id: string }>("select id from job where id = any($1::text[]) and status in ('queued', 'running')", [[...subject.jobIds]]);
  return new Set(rows.map((row) => row.id));
}
