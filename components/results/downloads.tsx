import type { ResultView } from "./use-view";

const FORMATS = [["csv", "CSV"], ["ndjson", "NDJSON"], ["arrow", "Arrow"]] as const;

/** Links to the rows as files, under the present conditions, order and columns. Plain links: the browser streams them to disk. */
export function Downloads({ jobId, view, isPartial }: { jobId: string; view: ResultView; isPartial: boolean }) {
  const query = new URLSearchParams();
  for (const condition of view.where) query.append("where", condition);
  if (view.sort) query.set("sort", view.sort);
  if (view.columns) query.set("select", view.columns.join(","));
  const isCut = view.where.length > 0 || view.columns !== null;
  return (
    <span className="flex items-center gap-1 text-sm">
      <span className="text-dim">Download{isCut ? " as shown" : ""}{isPartial ? ", so far" : ""}</span>
      {FORMATS.map(([format, name]) => {
        const all = new URLSearchParams(query);
        all.set("format", format);
        return <a key={format} href={`/api/v1/jobs/${jobId}/results?${all}`} download className="flex min-h-8 items-center rounded border border-line bg-raised px-2.5 hover:bg-sunken">{name}</a>;
      })}
    </span>
  );
}
