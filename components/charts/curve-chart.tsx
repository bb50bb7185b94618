"use client";
import { useId, useMemo } from "react";
import type { Curve } from "@/components/console/grid-facts";
import { ChartFrame, colourOf, dashOf, frameFor, type LegendItem, Marks, MOST_WIDTH, useWidth } from "./chart-frame";
import { extentOf, scaleFor, tickLabel } from "./scale";

/** A curve, with the range it is the middle of where there is one. */
export interface DrawnCurve extends Curve { band?: readonly { x: number; low: number; high: number }[] }

interface CurveChartProps {
  curves: readonly DrawnCurve[]; xLabel: string; yLabel: string; isLogX: boolean; isLogY?: boolean; mark: { x: number; y: number } | null; title: string;
  /** Draws every point by itself instead of joining them. */
  asPoints?: boolean;
}

const path = (points: readonly (readonly [number, number])[]): string => points.map(([x, y], index) => `${index === 0 ? "M" : "L"}${x.toFixed(1)} ${y.toFixed(1)}`).join("");

/** Curves over one field, with a mark where the entry's own point lies. The table below it holds the same numbers. */
export function CurveChart({ curves, xLabel, yLabel, isLogX, isLogY = false, mark, title, asPoints = false }: CurveChartProps) {
  const id = useId();
  const [box, width] = useWidth(MOST_WIDTH);
  // What has no place on an axis is left out rather than drawn at its edge: a NaN would undo the whole path.
  const drawable = useMemo(() => {
    const hasPlace = (x: number, y: number): boolean => Number.isFinite(x) && Number.isFinite(y) && (!isLogX || x > 0) && (!isLogY || y > 0);
    return curves.map((curve) => ({ ...curve, points: curve.points.filter((point) => hasPlace(point.x, point.y)), band: curve.band?.filter((each) => hasPlace(each.x, each.low) && Number.isFinite(each.high)) }));
  }, [curves, isLogX, isLogY]);
  const drawing = useMemo(() => {
    const points = [...drawable.flatMap((curve) => curve.points), ...(mark ? [mark] : [])];
    if (points.length === 0) return null;
    const labels = [...(curves.length > 1 ? curves.map((curve) => curve.label) : []), ...(mark ? ["the entry it came from"] : [])];
    const frame = frameFor(width, labels);
    const xs = points.map((point) => point.x);
    const ys = [...points.map((point) => point.y), ...drawable.flatMap((curve) => curve.band?.flatMap((each) => [each.low, each.high]) ?? [])];
    const x = scaleFor(xs, frame.left, frame.right, isLogX, asPoints);
    const y = scaleFor(ys, frame.bottom, frame.top, isLogY, true);
    const drawn = drawable.map((curve) => ({
      line: curve.points.map((point) => [x.at(point.x), y.at(point.y)] as const),
      band: curve.band && curve.band.length > 1
        ? `${path(curve.band.map((each) => [x.at(each.x), y.at(each.high)] as const))}L${path([...curve.band].reverse().map((each) => [x.at(each.x), y.at(each.low)] as const)).slice(1)}Z` : null,
    }));
    return { frame, x, y, drawn, description: describe(drawable, xs, ys, xLabel, yLabel, asPoints) };
  }, [curves, drawable, mark, width, isLogX, isLogY, asPoints, xLabel, yLabel]);
  if (!drawing) return <p className="text-sm text-dim">No point of this range was solved.</p>;
  const { frame, x, y, drawn, description } = drawing;
  const legend: LegendItem[] = [
    ...(curves.length > 1 ? curves.map((curve, index) => ({ label: curve.label, sample: asPoints ? <Marks points={[[13, 0]]} index={index} /> : <line x2="26" stroke={colourOf(index)} strokeWidth={1.8} strokeDasharray={dashOf(index)} /> })) : []),
    ...(mark ? [{ label: "the entry it came from", sample: <circle cx={13} r={4.5} fill="var(--page)" stroke="var(--ink)" strokeWidth={1.6} /> }] : []),
  ];
  return (
    <figure ref={box} className="max-w-[760px]">
      <ChartFrame frame={frame} x={x} y={y} xLabel={xLabel} yLabel={yLabel} isXLined titleId={id} title={title} description={description} legend={legend}>
        {drawn.map(({ band }, index) => band && <path key={`band-${index}`} d={band} fill={colourOf(index)} fillOpacity={0.14} stroke="none" />)}
        {drawn.map(({ line }, index) => (asPoints || line.length === 1
          ? <Marks key={index} points={line} index={index} />
          : <path key={index} d={path(line)} fill="none" stroke={colourOf(index)} strokeWidth={1.8} strokeDasharray={dashOf(index)} />))}
        {mark && <circle cx={x.at(mark.x).toFixed(1)} cy={y.at(mark.y).toFixed(1)} r={4.5} fill="var(--page)" stroke="var(--ink)" strokeWidth={1.6} />}
      </ChartFrame>
    </figure>
  );
}

/** The picture in words. */
function describe(curves: readonly DrawnCurve[], xs: readonly number[], ys: readonly number[], xLabel: string, yLabel: string, asPoints: boolean): string {
  const said = (values: readonly number[]): string => {
    const extent = extentOf(values);
    return extent ? `from ${tickLabel(Number(extent.low.toPrecision(4)))} to ${tickLabel(Number(extent.high.toPrecision(4)))}` : "without values";
  };
  const names = curves.length > 1 ? ` (${curves.map((curve) => curve.label).join("; ")})` : "";
  const what = asPoints ? `${xs.length} points` : `${curves.length} ${curves.length === 1 ? "curve" : "curves"}`;
  return `${what}${names}: ${yLabel} ${said(ys)} over ${xLabel} ${said(xs)}. The table of rows holds the same numbers.`;
}
