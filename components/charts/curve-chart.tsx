"use client";
import { useId, useMemo } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import type { Curve } from "@/components/console/grid-facts";
import { significant } from "@/lib/commands/numbers";
import { chartLabel, colourOf, dashOf, Marker, useWidth } from "./chart-frame";
import { scaleFor } from "./scale";

/** Drawn at the size it is shown at, so that its letters keep theirs on a narrow screen. */
const MOST_WIDTH = 760;
const MARGIN = { left: 62, right: 20, top: 12, bottom: 44 };

/** Curves over one field, with a mark where the entry's own point lies. The table below it holds the same numbers. */
export function CurveChart({ curves, xLabel, yLabel, isLogX, mark, title, asPoints = false }: {
  curves: readonly Curve[]; xLabel: string; yLabel: string; isLogX: boolean; mark: { x: number; y: number } | null; title: string;
  /** Draws every point by itself instead of joining them. */
  asPoints?: boolean;
}) {
  const id = useId();
  const [box, width] = useWidth(MOST_WIDTH);
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
        <text x={(MARGIN.left + width - MARGIN.right) / 2} y={height - 6} textAnchor="middle" fill="var(--ink)">{chartLabel(xLabel)}</text>
        <text transform={`translate(14 ${(MARGIN.top + height - MARGIN.bottom) / 2}) rotate(-90)`} textAnchor="middle" fill="var(--ink)">{chartLabel(yLabel)}</text>
        {asPoints && curves.map((curve, index) => curve.points.map((point, at) => (
          <Marker key={`${index}-${at}`} x={x.at(point.x)} y={y.at(point.y)} index={index} />
        )))}
        {!asPoints && paths.map((path, index) => <path key={index} d={path} fill="none" stroke={colourOf(index)} strokeWidth={1.8} strokeDasharray={dashOf(index)} />)}
        {mark && <circle cx={x.at(mark.x)} cy={y.at(mark.y)} r={4.5} fill="var(--page)" stroke="var(--ink)" strokeWidth={1.6} />}
      </svg>
      {(curves.length > 1 || mark) && (
        <figcaption className="flex flex-wrap gap-x-5 pl-2 text-xs text-dim">
          {curves.length > 1 && curves.map((curve, index) => (
            <span key={curve.label}><svg aria-hidden="true" width="26" height="8" className="mr-1 inline-block">{asPoints ? <Marker x={13} y={4} index={index} /> : <line x1="0" x2="26" y1="4" y2="4" stroke={colourOf(index)} strokeWidth={1.8} strokeDasharray={dashOf(index)} />}</svg><FormulaText>{curve.label}</FormulaText></span>
          ))}
          {mark && <span>○ the entry it came from</span>}
        </figcaption>
      )}
    </figure>
  );
}
