"use client";
import { useEffect, useMemo, useState } from "react";
import { getResults } from "@/lib/client/api";
import type { Job, ResultPage } from "@/lib/schemas/api";
import { CurveChart } from "@/components/charts/curve-chart";
import type { Curve } from "./grid-facts";
import { hasEnded } from "./use-job";

/** One page of results is enough to see the shape; the job's page draws all of it. */
const MOST_POINTS = 1000;

/** pH of a job: over its first axis where it has one (a curve for each case, of the first water), else against ANC as points. */
export function JobChart({ job }: { job: Job }) {
  const [page, setPage] = useState<ResultPage | null>(null);
  const [error, setError] = useState<string | null>(null);
  const axis = job.axes[0] ?? null;
  // The axis has another name where its field is reported as well.
  const axisName = job.columns?.find((column) => column.group === "axis")?.name ?? axis?.field ?? null;
  const isEnded = hasEnded(job);
  useEffect(() => {
    const end = new AbortController();
    const select = ["water", "case", "status", axisName ?? "ANC", "pH"].join(",");
    getResults(job.id, { limit: MOST_POINTS, select, where: ["status = ok"] }, end.signal).then(
      (each) => { if (!end.signal.aborted) setPage(each); },
      (reason: unknown) => { if (!end.signal.aborted) setError(reason instanceof Error ? reason.message : "The rows cannot be read."); });
    return () => end.abort();
  }, [job.id, axisName, isEnded]);
  const curves = useMemo(() => (page ? curvesOfPage(page, axisName ?? "ANC", axisName !== null) : []), [page, axisName]);
  if (error) return <p className="text-bad">{error}</p>;
  if (!page) return <p className="text-dim">Reading rows for the chart …</p>;
  const x = axis ? `${axis.field}${axis.unit ? `, ${axis.unit}` : ""}` : "ANC, µeq/L";
  const isLog = axis !== null && axis.field === "pCO2";
  return (
    <>
      <CurveChart curves={curves} xLabel={x} yLabel="pH" isLogX={isLog} mark={null} title={`pH over ${x} of ${job.title}`} asPoints={axis === null} />
      {page.rowCount > page.rows.length && <p className="text-xs text-dim">The first {page.rows.length} rows; the job’s page draws them all.</p>}
    </>
  );
}

function curvesOfPage(page: ResultPage, field: string, isFirstWaterOnly: boolean): Curve[] {
  const curves = new Map<string, Curve>();
  const first = page.rows[0]?.water;
  for (const row of page.rows) {
    const x = row[field];
    const y = row.pH;
    if (typeof x !== "number" || typeof y !== "number" || (isFirstWaterOnly && row.water !== first)) continue;
    const label = String(row.case ?? "");
    const curve = curves.get(label) ?? { label, points: [] };
    curve.points.push({ x, y });
    curves.set(label, curve);
  }
  return [...curves.values()];
}
