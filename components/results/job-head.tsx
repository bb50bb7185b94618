"use client";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { hasEnded } from "@/components/console/use-job";
import { layOut } from "@/components/spec-editor/templates";
import { Button } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/confirm-dialog";
import { TimeText } from "@/components/ui/time-text";
import { cancelJob, getJobSpec, retryJob } from "@/lib/client/api";
import { grouped } from "@/lib/commands/numbers";
import { keepDraft } from "@/lib/commands/stream-memory";
import type { Job, JobEvent } from "@/lib/schemas/api";
import { whereStatus, whereWarned } from "./use-view";

const STATUS_COLOURS: Record<Job["status"], string> = { queued: "text-dim", running: "text-accent", done: "text-good", failed: "text-bad", cancelled: "text-warn" };

interface HeadProps { job: Job; event: JobEvent | null; me: { id: string }; /** Narrows the rows shown. */ onShow: (narrow: (where: readonly string[]) => string[]) => void; onChanged: (job: Job) => void; announce: (text: string) => void }

/** What the job is, how far it has come, and what can be done with it. */
export function JobHead({ job, event, me, onShow, onChanged, announce }: HeadProps) {
  const router = useRouter();
  const [isAsking, setAsking] = useState(false);
  const act = (what: Promise<Job>, said: string): void => { what.then((changed) => { onChanged(changed); announce(said); }, (error: unknown) => announce(error instanceof Error ? error.message : "That failed.")); };
  const openSpec = (): void => {
    getJobSpec(job.id).then((spec) => { keepDraft(localStorage, me.id, layOut(spec) + "\n"); router.push("/spec"); }, (error: unknown) => announce(error instanceof Error ? error.message : "The spec cannot be read."));
  };
  return (
    <section aria-label="Job" className="border-b border-line px-4 py-3">
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h1 className="text-lg font-semibold">{job.title}</h1>
        <span className={`text-sm ${STATUS_COLOURS[job.status]}`} role="status">{job.status}</span>
        <span className="ml-auto flex flex-wrap gap-2">
          {!hasEnded(job) && <Button kind="danger" onClick={() => setAsking(true)}>Cancel the job</Button>}
          {(job.status === "failed" || job.status === "cancelled") && <Button onClick={() => act(retryJob(job.id), "Taken up again.")}>Take up again</Button>}
          <Button onClick={openSpec}>Open its spec</Button>
        </span>
      </div>
      <Progress job={job} event={event} />
      <Counts job={job} onShow={onShow} />
      {job.error && <p className="mt-1 text-sm text-bad">{job.error}</p>}
      <Provenance job={job} />
      <ConfirmDialog isOpen={isAsking} title="Cancel this job?" action="Cancel the job" onClose={() => setAsking(false)} onConfirm={() => act(cancelJob(job.id), "Cancelled.")}>
        Rows solved so far stay; the rest is not solved.
      </ConfirmDialog>
    </section>
  );
}

const timeLeft = (seconds: number): string => (seconds < 100 ? `${Math.max(1, Math.ceil(seconds))} s` : `${Math.ceil(seconds / 60)} min`);

function Progress({ job, event }: { job: Job; event: JobEvent | null }) {
  if (hasEnded(job)) return null;
  const { counts } = job;
  const share = counts.rows === 0 ? 0 : counts.done / counts.rows;
  const pace = event?.rowsPerSecond;
  const left = event?.secondsLeft ?? job.queue?.secondsEstimated ?? null;
  return (
    <div className="mt-2 max-w-3xl">
      <div role="progressbar" aria-label="Rows solved" aria-valuemin={0} aria-valuemax={counts.rows} aria-valuenow={counts.done} className="h-2 overflow-hidden rounded bg-sunken">
        <div className="h-full bg-accent transition-[width] duration-200" style={{ width: `${share * 100}%` }} />
      </div>
      <p className="mt-1 flex flex-wrap gap-x-5 text-xs text-dim">
        <span>{grouped(counts.done)} of {grouped(counts.rows)} rows</span>
        {pace != null && <span>{grouped(Math.round(pace))} rows/s</span>}
        {left != null && <span>about {timeLeft(left)} left</span>}
        {job.status === "queued" && job.queue && job.queue.rowsAhead > 0 && <span>{grouped(job.queue.rowsAhead)} rows ahead of it</span>}
      </p>
    </div>
  );
}

function Counts({ job, onShow }: Pick<HeadProps, "job" | "onShow">) {
  const { counts } = job;
  const shown = ([["ok", counts.ok, "text-good"], ["invalid", counts.invalid, "text-bad"], ["not-converged", counts.notConverged, "text-bad"]] as const).filter(([name, count]) => name === "ok" || count > 0);
  return (
    <p className="mt-2 flex flex-wrap items-center gap-x-4 gap-y-1 text-sm tabular-nums">
      <span>{grouped(counts.rows)} rows</span>
      {shown.map(([name, count, colour]) => (
        <button key={name} type="button" onClick={() => onShow((where) => whereStatus(where, name))} className={`min-h-7 ${colour} underline-offset-4 hover:underline`} title={`Show the rows that are ${name}`}>{grouped(count)} {name}</button>
      ))}
      {counts.warned > 0 && <button type="button" onClick={() => onShow(whereWarned)} className="min-h-7 text-warn underline-offset-4 hover:underline" title="Show the rows with warnings">{grouped(counts.warned)} with warnings</button>}
    </p>
  );
}

function Provenance({ job }: { job: Job }) {
  const facts: [string, React.ReactNode][] = [
    ["by", job.owner.name], ["created", <TimeText key="c" at={job.createdAt} />], ["started", <TimeText key="b" at={job.startedAt} fallback="not yet" />], ["finished", <TimeText key="f" at={job.finishedAt} fallback="not yet" />],
    ["cases", String(job.cases.length)], ["engine", job.engineVersion], ["constants", job.constantsVersion], ["spec", <span key="s" title={job.specHash}>{job.specHash.slice(0, 12)}</span>],
    ...(job.sampleSet ? [["sample set", `${job.sampleSet.name}, version ${job.sampleSet.version}`] as [string, React.ReactNode]] : []),
  ];
  return (
    <dl className="mt-2 flex flex-wrap gap-x-5 gap-y-0.5 text-xs">
      {facts.map(([name, value]) => <div key={name} className="flex gap-1.5"><dt className="text-dim">{name}</dt><dd>{value}</dd></div>)}
    </dl>
  );
}
