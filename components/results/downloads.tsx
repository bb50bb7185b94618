import { grouped } from "@/lib/commands/numbers";
import { type ResultView, viewQuery } from "./use-view";

const FORMATS = [["csv", "CSV"], ["ndjson", "NDJSON"], ["arrow", "Arrow"]] as const;

/** What the files hold of the job, where that is less than all of it. */
function partOf(view: ResultView, columnCount: number, isPartial: boolean): string {
  const parts = [
    ...(view.where.length > 0 ? ["matching rows"] : []), ...(isPartial ? ["so far"] : []),
    ...(view.columns && view.columns.length > 0 && view.columns.length < columnCount ? [`${grouped(view.columns.length)} of ${grouped(columnCount)} columns`] : []),
  ];
  return parts.length > 0 ? ` (${parts.join(", ")})` : "";
}

/** Links to the rows as files, under the present conditions, order and columns. Plain links: the browser streams them to disk. */
export function Downloads({ jobId, view, columnCount, isPartial }: { jobId: string; view: ResultView; columnCount: number; isPartial: boolean }) {
  const part = partOf(view, columnCount, isPartial);
  return (
    <span className="flex flex-wrap items-center gap-1 text-sm">
      <span className="text-dim">Download{part}</span>
      {FORMATS.map(([format, name]) => {
        const query = viewQuery(view);
        query.set("format", format);
        return <a key={format} href={`/api/v1/jobs/${jobId}/results?${query}`} download aria-label={`${name}${part}`} className="flex min-h-8 items-center rounded border border-line bg-raised px-2.5 hover:bg-sunken">{name}</a>;
      })}
    </span>
  );
}
