"use client";
import { useEffect, useId, useMemo, useRef, useState, type ReactNode, type RefObject } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import type { Curve } from "./grid-facts";
import { significant } from "@/lib/commands/numbers";

/** Drawn at the size it is shown at, so that its letters keep theirs on a narrow screen. */
const MOST_WIDTH = 760;
const MARGIN = { left: 62, right: 20, top: 12, bottom: 44 };
/** Line styles tell cases apart without colour. */
const DASHES = ["", "7 4", "2 4", "9 3 2 3"];
const COLOURS = ["var(--accent)", "var(--water)", "var(--warn)", "var(--good)"];

interface Scale { at(value: number): number; ticks: number[] }

/** Round steps of 1, 2 or 5 times a power of ten, about `count` of them. */
function linearTicks(low: number, high: number, count: number): number[] {
  const raw = (high - low) / count;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = [1, 2, 5, 10].map((each) => each * power).reduce((best, each) => (Math.abs(Math.log(each / raw)) < Math.abs(Math.log(best / raw)) ? each : best));
  const ticks: number[] = [];
  for (let k = Math.ceil(low / step - 1e-9); k * step <= high + step * 1e-9; k++) ticks.push(Number((k * step).toPrecision(12)));
  return ticks;
}

function logTicks(low: number, high: number, isNarrow: boolean): number[] {
  const ticks: number[] = [];
  const factors = high / low > (isNarrow ? 50 : 2000) ? [1] : [1, 2, 5];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++) {
    for (const factor of factors) {
      const tick = factor * 10 ** power;
      if (tick >= low * 0.999 && tick <= high * 1.001) ticks.push(Number(tick.toPrecision(6)));
    }
  }
  return ticks;
}

function scaleFor(values: readonly number[], from: number, to: number, isLog: boolean, isPadded: boolean): Scale {
  let low = Math.min(...values);
  let high = Math.max(...values);
  if (low === high) { low -= Math.abs(low) * 0.05 || 0.5; high += Math.abs(high) * 0.05 || 0.5; }
  const pad = isPadded ? (high - low) * 0.06 : 0;
  if (isLog) return { at: (value) => from + ((Math.log(value) - Math.log(low)) / (Math.log(high) - Math.log(low))) * (to - from), ticks: logTicks(low, high, Math.abs(to - from) < 400) };
  low -= pad;
  high += pad;
  return { at: (value) => from + ((value - low) / (high - low)) * (to - from), ticks: linearTicks(low, high, Math.max(3, Math.round(Math.abs(to - from) / (isPadded ? 52 : 85)))) };
}

/** A label with the counts of its formulas lowered; SVG has no <sub>. */
function label(text: string): ReactNode[] {
  return text.split(/(?<=CO|SO|NO|PO)([234])/).flatMap<ReactNode>((part, index) => (index % 2 === 1
    ? [<tspan key={index} dy="0.25em" fontSize="75%">{part}</tspan>, <tspan key={`${index}-back`} dy="-0.19em">{"\u200b"}</tspan>] : [part]));
}

/** Width of an element, followed as it changes. */
function useWidth(): [RefObject<HTMLElement | null>, number] {
  const box = useRef<HTMLElement>(null);
  const [width, setWidth] = useState(MOST_WIDTH);
  useEffect(() => {
    if (!box.current) return;
    const observer = new ResizeObserver(([entry]) => { if (entry.contentRect.width > 0) setWidth(Math.min(MOST_WIDTH, Math.round(entry.contentRect.width))); });
    observer.observe(box.current);
    return () => observer.disconnect();
  }, []);
  return [box, width];
}

/** Curves over one field, with a mark where the entry's own point lies. The table below it holds the same numbers. */
export function CurveChart({ curves, xLabel, yLabel, isLogX, mark, title, asPoints = false }: {
  curves: readonly Curve[]; xLabel: string; yLabel: string; isLogX: boolean; mark: { x: number; y: number } | null; title: string;
  /** Draws every point by itself instead of joining them. */
  asPoints?: boolean;
}) {
  const id = useId();
  const [box, width] = useWidth();
  const height = Math.round(Math.min(320, Math.max(220, width * 0.6)));
  const drawing = useMemo(() => {
    const points = [...curves.flatMap((curve) => curve.points), ...(mark ? [mark] : [])];
    if (points.length === 0) return null;
    const x = scaleFor(points.map((point) => point.x), MARGIN.left, width - MARGIN.right, isLogX, false);
    const y = scaleFor(points.map((point) => point.y), height - MARGIN.bottom, MARGIN.top, false, true);
    const paths = curves.map((curve) => curve.points.map((point, index) => `${index === 0 ? "M" : "L"}${x.at(point.x).toFixed(1)} ${y.at(point.y).toFixed(1)}`).join(""));
    return { x, y, paths };
  }, [curves, isLogX, mark, width, height]);
  if (!drawing) return <p className="text-sm text-dim">No point of this range was solved.</p>;
  const { x, y, paths } = drawing;
  return (
    <figure ref={box} className="max-w-[760px]">
      <svg viewBox={`0 0 ${width} ${height}`} role="img" aria-labelledby={id} width={width} height={height} className="block max-w-full text-xs">
        <title id={id}>{title}</title>
        {x.ticks.map((tick) => (
          <g key={tick} transform={`translate(${x.at(tick).toFixed(1)} 0)`}>
            <line y1={MARGIN.top} y2={height - MARGIN.bottom} stroke="var(--line)" strokeWidth={0.6} />
            <text y={height - MARGIN.bottom + 16} textAnchor="middle" fill="var(--dim)">{significant(tick, 3).replace(/(\.\d*?)0+$/, "$1").replace(/\.$/, "")}</text>
          </g>
        ))}
        {y.ticks.map((tick) => (
          <g key={tick} transform={`translate(0 ${y.at(tick).toFixed(1)})`}>
            <line x1={MARGIN.left} x2={width - MARGIN.right} stroke="var(--line)" strokeWidth={0.6} />
            <text x={MARGIN.left - 8} dy="0.35em" textAnchor="end" fill="var(--dim)">{tick.toString().replace("-", "−")}</text>
          </g>
        ))}
        <text x={(MARGIN.left + width - MARGIN.right) / 2} y={height - 6} textAnchor="middle" fill="var(--ink)">{label(xLabel)}</text>
        <text transform={`translate(14 ${(MARGIN.top + height - MARGIN.bottom) / 2}) rotate(-90)`} textAnchor="middle" fill="var(--ink)">{label(yLabel)}</text>
        {asPoints && curves.map((curve, index) => curve.points.map((point, at) => (
          <circle key={`${index}-${at}`} cx={x.at(point.x).toFixed(1)} cy={y.at(point.y).toFixed(1)} r={2.6} fill={index % 2 === 0 ? COLOURS[index % COLOURS.length] : "none"} stroke={COLOURS[index % COLOURS.length]} />
        )))}
        {!asPoints && paths.map((path, index) => <path key={index} d={path} fill="none" stroke={COLOURS[index % COLOURS.length]} strokeWidth={1.8} strokeDasharray={DASHES[index % DASHES.length]} />)}
        {mark && <circle cx={x.at(mark.x)} cy={y.at(mark.y)} r={4.5} fill="var(--page)" stroke="var(--ink)" strokeWidth={1.6} />}
      </svg>
      {(curves.length > 1 || mark) && (
        <figcaption className="flex flex-wrap gap-x-5 pl-2 text-xs text-dim">
          {curves.length > 1 && curves.map((curve, index) => (
            <span key={curve.label}><svg aria-hidden="true" width="26" height="8" className="mr-1 inline-block"><line x1="0" x2="26" y1="4" y2="4" stroke={COLOURS[index % COLOURS.length]} strokeWidth={1.8} strokeDasharray={DASHES[index % DASHES.length]} /></svg><FormulaText>{curve.label}</FormulaText></span>
          ))}
          {mark && <span>○ the entry it came from</span>}
        </figcaption>
      )}
    </figure>
  );
}
