/**
 * The planning item: the one thing a job puts on pg-boss. Each lane has a queue, so that planning a large job never
 * stands before a small one.
 */
export const LANES = ["interactive", "batch"] as const;
export type Lane = (typeof LANES)[number];

/** Jobs up to this size go to the interactive lane. */
export const INTERACTIVE_ROWS = 2000;

/** The lane of a job by its number of result rows. */
export const laneFor = (rowCount: number): Lane => (rowCount <= INTERACTIVE_ROWS ? "interactive" : "batch");

export const planQueue = (lane: Lane): string => `plan-${lane}`;

export interface PlanJobPayload { jobId: string }

/**
 * Faults of the job itself end it at once (handlers/plan-job.ts), so what is retried here are lost databases and lost
 * processes. pg-boss drops items older than its retention, 14 days unless set: a year here.
 */
export const PLAN_QUEUE_OPTIONS = { retryLimit: 20, retryDelay: 1, expireInSeconds: 600, retentionMinutes: 365 * 24 * 60 } as const;

/** Channel that wakes workers. Payloads: `plan <lane>`, `chunks <lane>`, `cancel <job id>`. */
export const WORK_CHANNEL = "tufa_work";
/** Channel of job events for streams. Payload: JSON of NotifiedEvent. */
export const EVENT_CHANNEL = "tufa_event";
