"use client";
import Link from "next/link";
import { memo, useEffect, useState } from "react";
import { getResults } from "@/lib/client/api";
import type { Job, ResultPage } from "@/lib/schemas/api";
import { FormulaText } from "@/components/ui/formula-text";
import { JobChart } from "./job-chart";
import { grouped, significant } from "@/lib/commands/numbers";
import { hasEnded, useJob, type FollowedJob } from "./use-job";

const PREVIEW_ROWS = 8;
const PREVIEW_COLUMNS = ["pH", "ANC", "alkalinity", "pCO2", "SI:calcite", "balanceError"];

/** A job in the stream: it moves on while the job runs, and shows the first rows as soon as there are any. */
export const JobAnswer = memo(function JobAnswer({ jobId, title, showChart }: { jobId: string; title: string; showChart: boolean }) {
  const followed = useJob(jobId);
  const { job, error } = followed;
  if (!job) return <p className="text-sm text-dim">{error ? <span className="text-bad">{error}</span> : `Reading ${title} …`}</p>;
  return (
    <div className="space-y-2 text-sm">
      <p className="flex flex-wrap items-baseline gap-x-4">
        <Link href={`/jobs/${job.id}`} className="min-h-7 text-accent underline-offset-4 hover:underline">{job.title}</Link>
        <span className={job.status === "failed" ? "text-bad" : job.status === "done" ? "text-good" : "text-ink"}>{job.status}</span>
        {job.queue && job.status === "queued" && <span className="text-dim">{grouped(job.queue.rowsAhead)} rows ahead</span>}
      </p>
      <Progress {...followed} job={job} />
      {job.error && <p className="text-bad">{job.error}</p>}
      {showChart && <JobChart job={job} />}
      <Preview job={job} />
    </div>
  );
});

function Progress({ job, event }: FollowedJob & { job: Job }) {
  const { counts } = job;
  const share = counts.rows === 0 ? 0 : counts.done / counts.rows;
  return (
    <div className="max-w-2xl">
      {!hasEnded(job) && (
        <div role="progressbar" aria-label={`Progress of ${job.title}`} aria-valuemin={0} aria-valuemax={counts.rows} aria-valuenow={counts.done} aria-valuetext={`${grouped(counts.done)} of ${grouped(counts.rows)} rows`}
          className="mb-1 h-2 overflow-hidden rounded bg-sunken">
          <div className="h-full bg-accent transition-[width] duration-200 motion-reduce:transition-none" style={{ width: `${share * 100}%` }} />
        </div>
      )}
      <p className="flex flex-wrap gap-x-5 tabular-nums">
        <span>{grouped(counts.done)} of {grouped(counts.rows)} rows</span>
        <span className="text-good">{grouped(counts.ok)} ok</span>
        {counts.invalid > 0 && <span className="text-bad">{grouped(counts.invalid)} invalid</span>}
        {counts.notConverged > 0 && <span className="text-bad">{grouped(counts.notConverged)} not converged</span>}
        {counts.warned > 0 && <span className="text-warn">{grouped(counts.warned)} with warnings</span>}
        {!hasEnded(job) && event?.rowsPerSecond != null && <span className="text-dim">{grouped(Math.round(event.rowsPerSecond))} rows/s</span>}
        {!hasEnded(job) && event?.secondsLeft != null && <span className="text-dim">{Math.ceil(event.secondsLeft)} s left</span>}
      </p>
    </div>
  );
}

/** The first rows, read once there are some and again at the end. */
function Preview({ job }: { job: Job }) {
  const [page, setPage] = useState<ResultPage | null>(null);
  const stage = hasEnded(job) ? "ended" : job.counts.done > 0 ? "some" : "none";
  useEffect(() => {
    if (stage === "none") return;
    const end = new AbortController();
    getResults(job.id, { limit: PREVIEW_ROWS }, end.signal).then((each) => { if (!end.signal.aborted) setPage(each); }, () => {});
    return () => end.abort();
  }, [job.id, stage]);
  if (!page || page.rows.length === 0) return null;
  const axes = page.columns.filter((column) => column.group === "axis");
  const wanted = PREVIEW_COLUMNS.flatMap((name) => page.columns.find((column) => column.name === name) ?? []);
  const shown = [...axes, ...(wanted.length > 0 ? wanted : page.columns.filter((column) => column.type === "number" && column.group !== "row").slice(0, 6))];
  const columns = shown.filter((column, index) => shown.findIndex((other) => other.name === column.name) === index);
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="First rows of the job">
      <table className="text-xs">
        <thead><tr className="text-left text-dim"><th scope="col" className="pr-4 font-normal">water</th><th scope="col" className="pr-4 font-normal">case</th>
          {columns.map((column) => <th key={column.name} scope="col" className="whitespace-nowrap pr-4 text-right font-normal"><FormulaText>{column.name}</FormulaText><span className="block text-faint">{column.unit}</span></th>)}</tr></thead>
        <tbody>
          {page.rows.map((row, index) => (
            <tr key={page.rowIndices[index] ?? index}>
              <td className="pr-4">{String(row.water ?? "")}</td><td className="max-w-48 truncate pr-4 text-dim">{String(row.case ?? "")}</td>
              {row.status === "ok" ? columns.map((column) => <td key={column.name} className="whitespace-nowrap pr-4 text-right tabular-nums">{significant(row[column.name], 4)}</td>)
                : <td colSpan={columns.length} className="text-bad">{String(row.status)}: {String(row.message ?? "")}</td>}
            </tr>
          ))}
        </tbody>
      </table>
      {page.rowCount > page.rows.length && <p className="mt-1 text-xs"><Link href={`/jobs/${job.id}`} className="text-accent underline-offset-4 hover:underline">All {grouped(job.counts.rows)} rows, with sorting and downloads</Link></p>}
    </div>
  );
}
