"use client";
import { useEffect, useId, useMemo, useRef, useState, type ReactNode } from "react";
import { Button } from "@/components/ui/button";
import { grouped } from "@/lib/commands/numbers";
import type { Job } from "@/lib/schemas/api";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { saveSvg } from "./chart-frame";
import { CurveChart } from "./curve-chart";
import { Histogram } from "./histogram";
import { byCase, type PlotRows, readPlotRows } from "./plot-data";

const MOST_POINTS = 4000;
const MOST_COUNTED = 20_000;

interface Choice { kind: "xy" | "counts"; x: string; y: string; water: string }

const isAmount = (column: ColumnDescriptor): boolean => column.type === "number" && column.group !== "row";
const labelOf = (column: ColumnDescriptor | undefined, name: string): string => (column?.unit ? `${name}, ${column.unit}` : name);

/** What is drawn first: pH over the job's axis, of one water; without an axis, pH against ANC of all. */
function firstChoice(columns: readonly ColumnDescriptor[]): Choice {
  const amounts = columns.filter(isAmount);
  const axis = columns.find((column) => column.group === "axis" && column.type === "number");
  const y = (amounts.find((column) => column.name === "pH") ?? amounts.find((column) => column.group !== "axis") ?? amounts[0])?.name ?? "";
  const x = axis?.name ?? (amounts.find((column) => column.name === "ANC") ?? amounts.find((column) => column.name !== y))?.name ?? y;
  return { kind: "xy", x, y, water: axis ? "first" : "" };
}

/** A picture of a job's rows under the present conditions: curves, points or counts of any column. */
export function JobPlot({ job, revision, where }: { job: Job; revision: number; where: readonly string[] }) {
  const columns = useMemo(() => job.columns ?? [], [job.columns]);
  const [choice, setChoice] = useState(() => firstChoice(columns));
  const [data, setData] = useState<(PlotRows & { water: string }) | null>(null);
  const [waters, setWaters] = useState<string[]>([]);
  const [error, setError] = useState("");
  const figure = useRef<HTMLDivElement>(null);
  const conditions = where.join("\n");
  const hasRows = job.counts.done > 0;
  const { kind, x, y, water } = choice;

  useEffect(() => {
    if (!hasRows) return;
    const end = new AbortController();
    readPlotRows(job.id, { select: ["water"], where: [] }, 1000, end.signal).then(({ rows }) => setWaters([...new Set(rows.map((row) => String(row.water)))]), () => {});
    return () => end.abort();
  }, [job.id, hasRows, revision]);
  const chosenWater = water === "first" ? waters[0] ?? "" : water;

  useEffect(() => {
    if (!hasRows || (water === "first" && !chosenWater)) return;
    const end = new AbortController();
    const own = ["status = ok", ...(conditions ? conditions.split("\n") : []), ...(chosenWater && kind === "xy" ? [`water = ${chosenWater}`] : [])];
    readPlotRows(job.id, { select: ["water", "case", ...(kind === "xy" ? [x] : []), y], where: own }, kind === "xy" ? MOST_POINTS : MOST_COUNTED, end.signal)
      .then((read) => { if (!end.signal.aborted) { setData({ ...read, water: chosenWater }); setError(""); } },
        (reason: unknown) => { if (!end.signal.aborted) setError(reason instanceof Error ? reason.message : "The rows cannot be read."); });
    return () => end.abort();
  }, [job.id, hasRows, revision, conditions, kind, x, y, water, chosenWater]);

  const xColumn = columns.find((column) => column.name === x);
  const yColumn = columns.find((column) => column.name === y);
  const save = (): void => { const svg = figure.current?.querySelector("svg[role=img]"); if (svg instanceof SVGSVGElement) saveSvg(svg, `${job.title} ${y}`); };
  return (
    <div ref={figure} className="flex flex-col gap-2 text-sm">
      <Controls columns={columns} choice={choice} waters={waters} onChange={(part) => setChoice({ ...choice, ...part })} />
      {error ? <p role="alert" className="text-bad">{error}</p> : !data ? <p className="text-dim">{hasRows ? "Reading rows …" : "No row is solved yet."}</p>
        : kind === "xy" ? <Curves data={data} x={x} y={y} xColumn={xColumn} yColumn={yColumn} title={job.title} /> : <Counts data={data} y={y} yColumn={yColumn} title={job.title} />}
      {data && <p className="text-xs text-dim">{data.rows.length < data.rowCount ? `The first ${grouped(data.rows.length)} of ${grouped(data.rowCount)} rows that are ok.` : `${grouped(data.rowCount)} rows that are ok.`}{data.water && kind === "xy" ? ` Water ${data.water}.` : ""}</p>}
      <div><Button onClick={save} disabled={!data}>Save as SVG</Button></div>
    </div>
  );
}

function Controls({ columns, choice, waters, onChange }: { columns: readonly ColumnDescriptor[]; choice: Choice; waters: readonly string[]; onChange: (part: Partial<Choice>) => void }) {
  const amounts = columns.filter(isAmount);
  const options = amounts.map((column) => <option key={column.name} value={column.name}>{column.name}</option>);
  return (
    <div className="flex flex-wrap gap-x-4 gap-y-2">
      <Select label="Chart" value={choice.kind} onChange={(kind) => onChange({ kind: kind as Choice["kind"] })}><option value="xy">one against another</option><option value="counts">counts of one</option></Select>
      <Select label={choice.kind === "xy" ? "Upwards" : "Column"} value={choice.y} onChange={(y) => onChange({ y })}>{options}</Select>
      {choice.kind === "xy" && <Select label="Along" value={choice.x} onChange={(x) => onChange({ x })}>{options}</Select>}
      {choice.kind === "xy" && <Select label="Water" value={choice.water === "first" ? waters[0] ?? "" : choice.water} onChange={(water) => onChange({ water })}><option value="">all of them</option>{waters.map((each) => <option key={each} value={each}>{each}</option>)}</Select>}
    </div>
  );
}

function Select({ label, value, onChange, children }: { label: string; value: string; onChange: (value: string) => void; children: ReactNode }) {
  const id = useId();
  return (
    <span className="flex min-w-0 flex-col gap-0.5">
      <label htmlFor={id} className="text-xs text-dim">{label}</label>
      <select id={id} value={value} onChange={(event) => onChange(event.target.value)} className="min-h-8 max-w-52 rounded border border-line bg-raised px-1.5">{children}</select>
    </span>
  );
}

interface DrawnProps { data: PlotRows & { water: string }; y: string; yColumn: ColumnDescriptor | undefined; title: string }

function Curves({ data, x, y, xColumn, yColumn, title }: DrawnProps & { x: string; xColumn: ColumnDescriptor | undefined }) {
  const curves = useMemo(() => {
    const { labels, lists } = byCase(data.rows, (row) => (typeof row[x] === "number" && typeof row[y] === "number" ? { x: row[x], y: row[y] } : null));
    return labels.map((label, k) => ({ label, points: lists[k] }));
  }, [data, x, y]);
  const isLine = xColumn?.group === "axis" && data.water !== "";
  const all = curves.flatMap((curve) => curve.points.map((point) => point.x));
  // A range of more than a decade and a half reads better on a logarithm; one that touches zero has none.
  const isLog = all.length > 1 && all.every((value) => value > 0) && all.reduce((a, b) => Math.max(a, b)) / all.reduce((a, b) => Math.min(a, b)) > 30;
  return <CurveChart curves={curves} xLabel={labelOf(xColumn, x)} yLabel={labelOf(yColumn, y)} isLogX={isLog} mark={null} title={`${y} over ${x} of ${title}`} asPoints={!isLine} />;
}

function Counts({ data, y, yColumn, title }: DrawnProps) {
  const { labels, lists } = useMemo(() => byCase(data.rows, (row) => (typeof row[y] === "number" ? row[y] : null)), [data, y]);
  return <Histogram lists={lists} labels={labels} xLabel={labelOf(yColumn, y)} title={`Counts of ${y} of ${title}`} />;
}
