"use client";
import { useId, useMemo } from "react";
import { ChartFrame, colourOf, dashOf, frameFor, MOST_WIDTH, useWidth } from "./chart-frame";
import { binsOf } from "./histogram-bins";
import { scaleFor, tickLabel } from "./scale";

interface HistogramProps {
  lists: readonly (readonly number[])[]; labels: readonly string[]; xLabel: string; title: string;
  /** Marks zero, where it divides: a saturation index of zero is equilibrium. */
  isZeroMarked?: boolean;
}

/** Counts of a column's values, an outline for each case. */
export function Histogram({ lists, labels, xLabel, title, isZeroMarked = false }: HistogramProps) {
  const id = useId();
  const [box, width] = useWidth(MOST_WIDTH);
  const bins = useMemo(() => binsOf(lists), [lists]);
  if (!bins) return <p className="text-sm text-dim">No value to count.</p>;
  const { edges, counts } = bins;
  const isMany = labels.length > 1;
  const frame = frameFor(width, isMany ? labels : []);
  const x = scaleFor(edges, frame.left, frame.right, false, false);
  const most = counts.flat().reduce((a, b) => Math.max(a, b), 1);
  const y = scaleFor([0, most * 1.06], frame.bottom, frame.top, false, false);
  const wholeY = { ...y, ticks: y.ticks.filter(Number.isInteger) };
  const legend = isMany ? labels.map((label, index) => ({ label, sample: <line x2="26" stroke={colourOf(index)} strokeWidth={1.8} strokeDasharray={dashOf(index)} /> })) : [];
  const total = counts.flat().reduce((a, b) => a + b, 0);
  const hasZero = isZeroMarked && edges[0] < 0 && edges[edges.length - 1] > 0;
  return (
    <figure ref={box} className="max-w-[760px]">
      <ChartFrame frame={frame} x={x} y={wholeY} xLabel={xLabel} yLabel="rows" isXLined={false} titleId={id} title={title} legend={legend}
        description={`${total} values in ${edges.length - 1} classes of ${tickLabel(Number((edges[1] - edges[0]).toPrecision(6)))}, from ${tickLabel(edges[0])} to ${tickLabel(edges[edges.length - 1])}; at most ${most} in one. The table of rows holds the same numbers.`}>
        {hasZero && <line x1={x.at(0).toFixed(1)} x2={x.at(0).toFixed(1)} y1={frame.top} y2={frame.bottom} stroke="var(--dim)" strokeWidth={1} strokeDasharray="1 3" />}
        {counts.map((own, index) => {
          const steps = own.map((count, k) => `L${x.at(edges[k]).toFixed(1)} ${y.at(count).toFixed(1)}L${x.at(edges[k + 1]).toFixed(1)} ${y.at(count).toFixed(1)}`).join("");
          const data = `M${x.at(edges[0]).toFixed(1)} ${y.at(0).toFixed(1)}${steps}L${x.at(edges[own.length]).toFixed(1)} ${y.at(0).toFixed(1)}`;
          return <path key={index} d={data} fill={colourOf(index)} fillOpacity={0.14} stroke={colourOf(index)} strokeWidth={1.5} strokeDasharray={dashOf(index)} />;
        })}
      </ChartFrame>
    </figure>
  );
}
