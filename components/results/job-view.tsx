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

/** A number that moves on while the job's rows come, and once more at its end. */
function useRevision(job: Job): number {
  const [revision, setRevision] = useState(0);
  const done = useRef(job.counts.done);
  useEffect(() => { done.current = job.counts.done; }, [job.counts.done]);
  const isEnded = hasEnded(job);
  useEffect(() => {
    setRevision((now) => now + 1);
    if (isEnded) return;
    let seen = -1;
    const timer = setInterval(() => { if (done.current !== seen) { seen = done.current; setRevision((now) => now + 1); } }, REFRESH_MS);
    return () => clearInterval(timer);
  }, [isEnded]);
  return revision;
}

/** A job's page: its state, its rows, its picture. */
export function JobView({ initial, me, search }: { initial: Job; me: { id: string }; search: string }) {
  const followed = useJob(initial.id);
  const [changed, setChanged] = useState<Job | null>(null);
  const job = followed.job ?? changed ?? initial;
  const [view, setView] = useView(search);
  const [said, setSaid] = useState("");
  const revision = useRevision(job);
  const all = useMemo(() => job.columns ?? [], [job.columns]);
  const shown = useMemo(() => {
    if (!view.columns) return inTableOrder(usualColumns(all));
    const wanted = new Set(view.columns);
    return inTableOrder(all.filter((column) => wanted.has(column.name)));
  }, [all, view.columns]);
  const select = shown.length === all.length ? "" : shown.map((column) => column.name).join(",");
  const rows = useRows(job.id, { where: view.where, sort: view.sort, select }, revision);
  const isPlanned = job.columns !== null;

  return (
    <div className="flex min-h-full flex-col lg:h-full">
      <JobHead job={job} event={followed.event} me={me} onChanged={setChanged} announce={setSaid} onShowStatus={(status) => setView({ where: [`status = ${status}`] })} />
      <p role="status" aria-live="polite" className={said ? "px-4 pt-1 text-xs" : "sr-only"}>{said}</p>
      {!isPlanned ? <p className="p-4 text-sm text-dim">{hasEnded(job) ? "The job has no rows." : "The rows will stand here as they are solved."}</p> : (
        <div className="flex min-h-0 flex-1 flex-col xl:flex-row">
          <section aria-label="Rows" className="flex min-h-0 min-w-0 flex-1 flex-col max-xl:h-[34rem] max-xl:flex-none">
            <div className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-line px-4 py-2">
              <FilterBar columns={all} where={view.where} rowCount={rows.rowCount} total={job.counts.rows} serverError={rows.error} onChange={(where) => setView({ where })} />
              <ColumnChooser columns={all} shown={shown} onChange={(columns) => setView({ columns })} />
              <Downloads jobId={job.id} view={view} isPartial={!hasEnded(job)} />
            </div>
            <ResultsTable key={`${view.sort}\n${view.where.join("\n")}`} columns={shown} rows={rows} sort={view.sort} label={`Rows of ${job.title}`} announce={setSaid}
              onSort={(column) => { const sort = nextSort(view.sort, column); setView({ sort }); setSaid(sort ? `Sorted by ${column}, ${sort.startsWith("-") ? "descending" : "ascending"}.` : "In the order solved."); }} />
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
