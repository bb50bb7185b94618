"use client";
import { useInfiniteQuery, useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { useDeferredValue, useEffect, useState } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Field } from "@/components/ui/field";
import { FormulaText } from "@/components/ui/formula-text";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Page } from "@/components/ui/page";
import { ProgressBar } from "@/components/ui/progress-bar";
import { SelectField } from "@/components/ui/select-field";
import { TimeText } from "@/components/ui/time-text";
import { listJobs } from "@/lib/client/api";
import { subscribeJobEvents } from "@/lib/client/events";
import { grouped } from "@/lib/commands/numbers";
import type { Job, JobEvent } from "@/lib/schemas/api";

const COLOURS: Record<Job["status"], string> = { queued: "text-dim", running: "text-accent", done: "text-good", failed: "text-bad", cancelled: "text-warn" };
const STATUSES = ["queued", "running", "done", "failed", "cancelled"] as const;

const COLUMNS: readonly TableColumn<Job>[] = [
  { title: "job", className: "min-w-44", cell: (job) => <Link href={`/jobs/${job.id}`} className="inline-flex min-h-7 items-center text-accent underline-offset-4 hover:underline"><span><FormulaText>{job.title}</FormulaText></span></Link> },
  { title: "status", cell: (job) => <Standing job={job} /> },
  { title: "rows", isRight: true, cell: (job) => grouped(job.counts.rows) },
  { title: "ok", isRight: true, cell: (job) => grouped(job.counts.ok) },
  { title: "not ok", isRight: true, cell: (job) => <span className={job.counts.invalid + job.counts.notConverged > 0 ? "text-bad" : ""}>{grouped(job.counts.invalid + job.counts.notConverged)}</span> },
  { title: "by", className: "whitespace-nowrap", cell: (job) => job.owner.name },
  { title: "submitted", cell: (job) => <TimeText at={job.createdAt} /> },
];

function Standing({ job }: { job: Job }) {
  const { done, rows } = job.counts;
  const isUnderWay = job.status === "running" && rows > 0;
  return (
    <div className="whitespace-nowrap">
      <span className={COLOURS[job.status]}>{job.status}{isUnderWay ? ` ${Math.floor((100 * done) / rows)} %` : ""}</span>
      {isUnderWay && <ProgressBar label={`Rows solved of ${job.title}`} done={done} of={rows} />}
    </div>
  );
}

/** Jobs whose events came since the list was read, as they stand now. */
function useMoved(onNew: () => void): Map<string, JobEvent> {
  const [moved, setMoved] = useState<Map<string, JobEvent>>(new Map());
  useEffect(() => subscribeJobEvents((event) => {
    setMoved((now) => new Map(now).set(event.jobId, event));
    if (event.type !== "chunk-done") onNew();
  }), [onNew]);
  return moved;
}

export function JobList() {
  const [text, setText] = useState("");
  const [status, setStatus] = useState("");
  const [owner, setOwner] = useState("team");
  const q = useDeferredValue(text.trim());
  const client = useQueryClient();
  const [refresh] = useState(() => () => void client.invalidateQueries({ queryKey: ["jobs"] }));
  const moved = useMoved(refresh);
  const list = useInfiniteQuery({
    queryKey: ["jobs", q, status, owner], initialPageParam: undefined as string | undefined,
    queryFn: ({ pageParam }) => listJobs({ q: q || undefined, status: status || undefined, owner, limit: 50, cursor: pageParam }), getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
  const jobs = (list.data?.pages ?? []).flatMap((page) => page.jobs).map((job) => { const event = moved.get(job.id); return event ? { ...job, status: event.status, counts: event.counts } : job; });
  return (
    <Page title="Jobs" isWide actions={<Link href="/spec" className="inline-flex min-h-9 items-center rounded border border-accent bg-accent px-3 text-sm text-on-accent">Write a spec</Link>}>
      <div className="flex flex-wrap items-end gap-3">
        <Field label="Title" type="search" value={text} onChange={(event) => setText(event.target.value)} className="w-64 max-w-full" />
        <SelectField label="Status" value={status} onChange={(event) => setStatus(event.target.value)}><option value="">any</option>{STATUSES.map((each) => <option key={each}>{each}</option>)}</SelectField>
        <SelectField label="Whose" value={owner} onChange={(event) => setOwner(event.target.value)}><option value="team">the team’s</option><option value="me">mine</option></SelectField>
      </div>
      {!list.data ? <LoadState error={list.error} onRetry={() => void list.refetch()} />
        : <DataTable label="Jobs" columns={COLUMNS} items={jobs} keyOf={(job) => job.id} empty={q || status ? "No job fits." : "No job yet. Write a spec, or type submit behind a water in the console."} />}
      <LoadMore hasMore={list.hasNextPage} isLoading={list.isFetchingNextPage} onMore={() => void list.fetchNextPage()} />
    </Page>
  );
}
