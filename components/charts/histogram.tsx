"use client";
import { useId, useMemo } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import { significant } from "@/lib/commands/numbers";
import { chartLabel, colourOf, dashOf, useWidth } from "./chart-frame";
import { binsOf } from "./histogram-bins";
import { scaleFor } from "./scale";

const MOST_WIDTH = 760;
const MARGIN = { left: 62, right: 20, top: 12, bottom: 44 };

/** Counts of a column's values, an outline for each case. */
export function Histogram({ lists, labels, xLabel, title }: { lists: readonly (readonly number[])[]; labels: readonly string[]; xLabel: string; title: string }) {
  const id = useId();
  const [box, width] = useWidth(MOST_WIDTH);
  const height = Math.round(Math.min(320, Math.max(220, width * 0.6)));
  const bins = useMemo(() => binsOf(lists), [lists]);
  if (!bins) return <p className="text-sm text-dim">No value to count.</p>;
  const x = scaleFor(bins.edges, MARGIN.left, width - MARGIN.right, false, false);
  const most = Math.max(...bins.counts.flat());
  const y = scaleFor([0, most * 1.06], height - MARGIN.bottom, MARGIN.top, false, false);
  return (
    <figure ref={box} className="max-w-[760px]">
      <svg viewBox={`0 0 ${width} ${height}`} role="img" aria-labelledby={id} width={width} height={height} className="block max-w-full text-xs">
        <title id={id}>{title}</title>
        {y.ticks.filter(Number.isInteger).map((tick) => (
          <g key={tick} transform={`translate(0 ${y.at(tick).toFixed(1)})`}>
            <line x1={MARGIN.left} x2={width - MARGIN.right} stroke="var(--line)" strokeWidth={0.6} />
            <text x={MARGIN.left - 8} dy="0.35em" textAnchor="end" fill="var(--dim)">{tick}</text>
          </g>
        ))}
        {x.ticks.map((tick) => <text key={tick} x={x.at(tick).toFixed(1)} y={height - MARGIN.bottom + 16} textAnchor="middle" fill="var(--dim)">{significant(tick, 3).replace(/(\.\d*?)0+$/, "$1").replace(/\.$/, "")}</text>)}
        {bins.counts.map((counts, index) => {
          const steps = counts.map((count, k) => `L${x.at(bins.edges[k]).toFixed(1)} ${y.at(count).toFixed(1)}L${x.at(bins.edges[k + 1]).toFixed(1)} ${y.at(count).toFixed(1)}`).join("");
          const path = `M${x.at(bins.edges[0]).toFixed(1)} ${y.at(0).toFixed(1)}${steps}L${x.at(bins.edges[counts.length]).toFixed(1)} ${y.at(0).toFixed(1)}`;
          return <path key={index} d={path} fill={colourOf(index)} fillOpacity={0.14} stroke={colourOf(index)} strokeWidth={1.5} strokeDasharray={dashOf(index)} />;
        })}
        <text x={(MARGIN.left + width - MARGIN.right) / 2} y={height - 6} textAnchor="middle" fill="var(--ink)">{chartLabel(xLabel)}</text>
        <text transform={`translate(14 ${(MARGIN.top + height - MARGIN.bottom) / 2}) rotate(-90)`} textAnchor="middle" fill="var(--ink)">rows</text>
      </svg>
      {labels.length > 1 && (
        <figcaption className="flex flex-wrap gap-x-5 pl-2 text-xs text-dim">
          {labels.map((label, index) => <span key={label}><svg aria-hidden="true" width="26" height="8" className="mr-1 inline-block"><line x1="0" x2="26" y1="4" y2="4" stroke={colourOf(index)} strokeWidth={1.8} strokeDasharray={dashOf(index)} /></svg><FormulaText>{label}</FormulaText></span>)}
        </figcaption>
      )}
    </figure>
  );
}
