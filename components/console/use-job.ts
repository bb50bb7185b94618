"use client";
import { useEffect, useState } from "react";
import { getJob } from "@/lib/client/api";
import { subscribeJobEvents } from "@/lib/client/events";
import type { Job, JobEvent } from "@/lib/schemas/api";

export interface FollowedJob {
  job: Job | null;
  /** The newest event, where one came since the page opened. */
  event: JobEvent | null;
  error: string | null;
}

const ENDED = new Set<Job["status"]>(["done", "failed", "cancelled"]);
export const hasEnded = (job: Job | null): boolean => job !== null && ENDED.has(job.status);

/** A job as it stands, moved on by the page's one event stream. */
export function useJob(id: string): FollowedJob {
  const [state, setState] = useState<FollowedJob>({ job: null, event: null, error: null });
  useEffect(() => {
    const end = new AbortController();
    const read = (): void => {
      getJob(id, end.signal).then(
        (job) => { if (!end.signal.aborted) setState((now) => ({ ...now, job, error: null })); },
        (error: unknown) => { if (!end.signal.aborted) setState((now) => ({ ...now, error: error instanceof Error ? error.message : "The job cannot be read." })); },
      );
    };
    read();
    const stop = subscribeJobEvents((event) => {
      if (event.jobId !== id) return;
      setState((now) => ({ ...now, event, job: now.job && { ...now.job, status: event.status, counts: event.counts } }));
      // Columns, times and the error are not in the events: the last one asks for the whole job again.
      if (event.type !== "chunk-done") read();
    });
    return () => { end.abort(); stop(); };
  }, [id]);
  return state;
}
