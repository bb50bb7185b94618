"use client";
import { useEffect, useMemo, useRef, useState } from "react";
import { JobPlot } from "@/components/charts/job-plot";
import { hasEnded, useJob } from "@/components/console/use-job";
import { Caution } from "@/components/ui/caution";
import type { Job } from "@/lib/schemas/api";
import { ColumnChooser, inTableOrder, usualColumns } from "./column-chooser";
import { Downloads } from "./downloads";
import { FilterBar } from "./filter-bar";
import { JobHead } from "./job-head";
import { ResultsTable } from "./results-table";
import { useRows } from "./use-rows";
import { nextSort, useView } from "./use-view";

/** While a job runs the rows are read again this often, and no oftener. */
const REFRESH_MS = 1500;
/** A sorted or filtered view costs the server an ordering of all rows so far. */
const ORDERED_REFRESH_MS = 6000;
/** Read whether shown or not: a failed row says why, a warned one that it is. */
const ALWAYS = ["status", "message", "warnings"];

/** A number that moves on while the job's rows come, and once more at its end. */
function useRevision(job: Job, everyMs: number): number {
  const [revision, setRevision] = useState(0);
  const done = useRef(job.counts.done);
  useEffect(() => { done.current = job.counts.done; }, [job.counts.done]);
  const isEnded = hasEnded(job);
  const hasSome = job.counts.done > 0;
  useEffect(() => setRevision((now) => now + 1), [isEnded, hasSome]);
  useEffect(() => {
    if (isEnded) return;
    let seen = -1;
    const timer = setInterval(() => { if (done.current !== seen) { seen = done.current; setRevision((now) => now + 1); } }, everyMs);
    return () => clearInterval(timer);
  }, [isEnded, everyMs]);
  return revision;
}

/** A job's page: its state, its rows, its picture. */
export function JobView({ initial, me, search }: { initial: Job; me: { id: string }; search: string }) {
  const followed = useJob(initial.id);
  const [changed, setChanged] = useState<Job | null>(null);
  const job = followed.job ?? changed ?? initial;
  const [view, setView] = useView(search);
  // What was done to the job is shown; what the eye sees in the table anyway is only spoken, and moves nothing.
  const [notice, setNotice] = useState("");
  const [said, setSaid] = useState("");
  const revision = useRevision(job, view.sort || view.where.length > 0 ? ORDERED_REFRESH_MS : REFRESH_MS);
  const all = useMemo(() => job.columns ?? [], [job.columns]);
  const shown = useMemo(() => {
    if (!view.columns) return inTableOrder(usualColumns(all));
    const wanted = new Set(view.columns);
    return inTableOrder(all.filter((column) => wanted.has(column.name)));
  }, [all, view.columns]);
  const select = useMemo(() => {
    if (shown.length === all.length) return "";
    const names = new Set(shown.map((column) => column.name));
    return all.filter((column) => names.has(column.name) || ALWAYS.includes(column.name)).map((column) => column.name).join(",");
  }, [all, shown]);
  const rows = useRows(job.id, { where: view.where, sort: view.sort, select }, revision);
  const isPlanned = job.columns !== null;

  return (
    <div className="flex min-h-full flex-col lg:h-full">
      <JobHead job={job} event={followed.event} me={me} onChanged={setChanged} announce={setNotice} onShow={(narrow) => setView({ where: narrow(view.where) })} />
      <p role="status" aria-live="polite" className={notice ? "px-4 py-1 text-xs" : "sr-only"}>{notice}</p>
      <p role="status" aria-live="polite" className="sr-only">{said}</p>
      {!isPlanned ? <p className="p-4 text-sm text-dim">{hasEnded(job) ? "The job has no rows." : "The rows will stand here as they are solved."}</p> : (
        <div className="flex min-h-0 flex-1 flex-col xl:flex-row">
          <section aria-label="Rows" className="flex min-h-0 min-w-0 flex-1 flex-col max-xl:h-[34rem] max-xl:flex-none">
            <div className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-line px-4 py-2">
              <FilterBar columns={all} where={view.where} rowCount={rows.isStale ? null : rows.rowCount} total={job.counts.done} isPartial={!hasEnded(job)} serverError={rows.error} onChange={(where) => setView({ where })} />
              <ColumnChooser columns={all} shown={shown} onChange={(columns) => setView({ columns })} />
              <Downloads jobId={job.id} view={view} columnCount={all.length} isPartial={!hasEnded(job)} />
            </div>
            {shown.length === 0 ? <p className="flex-1 p-4 text-sm text-dim">No column is chosen.</p> : <ResultsTable order={`${view.sort}\n${view.where.join("\n")}`} columns={shown} rows={rows} sort={view.sort} label={`Rows of ${job.title}`} announce={setSaid}
              onSort={(column) => { const sort = nextSort(view.sort, column); setView({ sort }); setSaid(sort ? `Sorted by ${column}, ${sort.startsWith("-") ? "descending" : "ascending"}.` : "In the order solved."); }} />}
            <Caution className="border-t border-line px-4 py-1.5" />
          </section>
          <aside aria-label="Chart" className="min-w-0 border-line px-4 py-3 max-xl:border-t xl:w-[34rem] xl:flex-none xl:overflow-y-auto xl:border-l">
            <JobPlot job={job} revision={hasEnded(job) ? 1 : 0} where={view.where} />
          </aside>
        </div>
      )}
    </div>
  );
}
