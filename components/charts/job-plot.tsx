"use client";
import { useEffect, useMemo, useRef, useState } from "react";
import { Button } from "@/components/ui/button";
import { grouped } from "@/lib/commands/numbers";
import type { Job } from "@/lib/schemas/api";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { saveSvg } from "./chart-frame";
import { CurveChart, type DrawnCurve } from "./curve-chart";
import { Histogram } from "./histogram";
import { isAmount, type PlotChoice, PlotControls } from "./plot-controls";
import { byLabel, caseOf, curvesOver, MOST_CURVES, pointsOf, suggestsLog } from "./plot-curves";
import { type PlotRows, readPlotRows, readWaters, type Waters } from "./plot-data";

/** More points than this cover each other on a chart of this size. */
const MOST_POINTS = 4000;
/** Rows behind counts and medians. */
const MOST_COUNTED = 20_000;
const X_RATIO = 30;
const Y_RATIO = 100;

const labelOf = (column: ColumnDescriptor | undefined, name: string): string => (column?.unit ? `${name}, ${column.unit}` : name);

/** What is drawn first: pH over the job's axis, of one water; without an axis, pH against ANC of all. */
function firstChoice(columns: readonly ColumnDescriptor[]): PlotChoice {
  const amounts = columns.filter(isAmount);
  const axis = columns.find((column) => column.group === "axis" && column.type === "number");
  const y = (amounts.find((column) => column.name === "pH") ?? amounts.find((column) => column.group !== "axis") ?? amounts[0])?.name ?? "";
  const x = axis?.name ?? (amounts.find((column) => column.name === "ANC") ?? amounts.find((column) => column.name !== y))?.name ?? y;
  return { kind: "xy", x, y, of: axis ? "water" : "points", water: "", isLogX: null, isLogY: null };
}

/** Rows under a choice and how they were read; the choice goes with them, so that new words never stand on an old picture. */
interface Read extends PlotRows { kind: PlotChoice["kind"]; x: string; y: string; of: PlotChoice["of"]; water: string }

/** A picture of a job's rows under the present conditions: curves, points or counts of any column. */
export function JobPlot({ job, revision, where }: { job: Job; revision: number; where: readonly string[] }) {
  const columns = useMemo(() => job.columns ?? [], [job.columns]);
  const [choice, setChoice] = useState(() => firstChoice(columns));
  const [read, setRead] = useState<Read | null>(null);
  const [error, setError] = useState("");
  const figure = useRef<HTMLDivElement>(null);
  const conditions = where.join("\n");
  const hasRows = job.counts.done > 0;
  const waters = useWaters(job, hasRows, revision);
  const { kind, x, y } = choice;
  const axes = useMemo(() => columns.filter((column) => column.group === "axis"), [columns]);
  const isOverAxis = axes.some((axis) => axis.name === x);
  const of = choice.of === "middle" && !isOverAxis ? "points" : choice.of;
  const water = kind === "xy" && of === "water" ? choice.water || waters.names[0] || "" : "";

  useEffect(() => {
    if (!hasRows || (kind === "xy" && of === "water" && !water)) return;
    const end = new AbortController();
    const own = ["status = ok", ...(conditions ? conditions.split("\n") : []), ...(water ? [`water = ${water}`] : [])];
    const select = ["water", "case", ...(kind === "xy" ? [...axes.map((axis) => axis.name), x] : []), y];
    readPlotRows(job.id, { select, where: own }, kind === "xy" && of !== "middle" ? MOST_POINTS : MOST_COUNTED, end.signal)
      .then((rows) => { if (!end.signal.aborted) { setRead({ ...rows, kind, x, y, of, water }); setError(""); } },
        (reason: unknown) => { if (!end.signal.aborted) setError(reason instanceof Error ? reason.message : "The rows cannot be read."); });
    return () => end.abort();
  }, [job.id, hasRows, revision, conditions, kind, x, y, of, water, axes]);

  const drawn = useMemo(() => (read?.kind === "xy" ? draw(read, axes) : null), [read, axes]);
  const isLogX = choice.isLogX ?? (drawn !== null && suggestsLog(drawn.curves.flatMap((curve) => curve.points.map((point) => point.x)), X_RATIO));
  const isLogY = choice.isLogY ?? (drawn !== null && suggestsLog(drawn.curves.flatMap((curve) => curve.points.map((point) => point.y)), Y_RATIO));
  const find = (name: string): ColumnDescriptor | undefined => columns.find((column) => column.name === name);
  const save = (): void => { const svg = figure.current?.querySelector("svg[role=img]"); if (svg instanceof SVGSVGElement) saveSvg(svg, `${job.title} ${y}`); };
  const isEmpty = read !== null && read.rows.length === 0;
  return (
    <div ref={figure} className="flex flex-col gap-2 text-sm">
      <PlotControls columns={columns} choice={{ ...choice, of }} waters={waters} isLogX={isLogX} isLogY={isLogY} onChange={(part) => setChoice({ ...choice, ...part })} />
      {error ? <p role="alert" className="text-bad">{error}</p>
        : !read ? <p className="text-dim">{hasRows ? "Reading rows …" : "No row is solved yet."}</p>
        : isEmpty ? <p className="text-dim">No row that is ok answers to the conditions{read.water ? ` for water ${read.water}` : ""}.</p>
        : drawn ? <CurveChart curves={drawn.curves} xLabel={labelOf(find(read.x), read.x)} yLabel={labelOf(find(read.y), read.y)} isLogX={isLogX} isLogY={isLogY} mark={null} title={`${read.y} over ${read.x} of ${job.title}`} asPoints={!drawn.isLines} />
        : <Counts read={read} column={find(read.y)} title={job.title} />}
      {read && !isEmpty && !error && <p className="text-xs text-dim">{sayRead(read, drawn?.left ?? 0)}{drawn && sayUnplaced(drawn.curves, isLogX, isLogY)}</p>}
      <div><Button onClick={save} disabled={!read || isEmpty}>Save as SVG</Button></div>
    </div>
  );
}

function useWaters(job: Job, hasRows: boolean, revision: number): Waters {
  const [waters, setWaters] = useState<Waters>({ names: [], isWhole: true });
  const asked = useRef(job);
  useEffect(() => { asked.current = job; });
  useEffect(() => {
    if (!hasRows) return;
    const end = new AbortController();
    readWaters(asked.current, end.signal).then((read) => { if (!end.signal.aborted) setWaters(read); }, () => {});
    return () => end.abort();
  }, [job.id, hasRows, revision]);
  return waters;
}

function draw(read: Read, axes: readonly ColumnDescriptor[]): { curves: DrawnCurve[]; left: number; isLines: boolean } {
  const { rows, x, y, of } = read;
  const isLines = of !== "points" && axes.some((axis) => axis.name === x);
  if (!isLines) return { curves: pointsOf(rows, x, y), left: 0, isLines };
  return { ...curvesOver(rows, x, y, axes.filter((axis) => axis.name !== x), of === "middle"), isLines };
}

/** What of the job the picture is made from. */
function sayRead(read: Read, left: number): string {
  const used = read.rows.length < read.rowCount
    ? `${grouped(read.rows.length)} of ${grouped(read.rowCount)} rows that are ok, in ${read.runs} runs spread evenly over them.` : `${grouped(read.rowCount)} rows that are ok.`;
  const whose = read.water ? ` Water ${read.water}.` : read.kind === "xy" && read.of === "middle" ? " Line: median; band: the range of eight waters in ten." : "";
  return `${used}${whose}${left > 0 ? ` ${MOST_CURVES} of ${MOST_CURVES + left} curves, from all over; a condition narrows them.` : ""}`;
}

/** A logarithm has no place for zero and below: what it hides is said. */
function sayUnplaced(curves: readonly DrawnCurve[], isLogX: boolean, isLogY: boolean): string {
  const hidden = curves.reduce((sum, curve) => sum + curve.points.filter((point) => (isLogX && point.x <= 0) || (isLogY && point.y <= 0)).length, 0);
  return hidden > 0 ? ` ${grouped(hidden)} of the points are at zero or below, where a logarithm has no place.` : "";
}

function Counts({ read, column, title }: { read: Read; column: ColumnDescriptor | undefined; title: string }) {
  const { labels, lists } = useMemo(() => byLabel(read.rows, caseOf, (row) => { const value = row[read.y]; return typeof value === "number" ? value : null; }), [read]);
  return <Histogram lists={lists} labels={labels} xLabel={labelOf(column, read.y)} title={`Counts of ${read.y} of ${title}`} isZeroMarked={column?.group === "SI"} />;
}
