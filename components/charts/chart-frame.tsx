"use client";
import { useCallback, useEffect, useRef, useState, type ReactNode } from "react";
import { type Scale, tickLabel } from "./scale";

/** Drawn at the size it is shown at, so that its letters keep theirs on a narrow screen. */
export const MOST_WIDTH = 760;
const MARGIN = { left: 66, right: 20, top: 12, bottom: 44 };
/** Width of a letter of the monospaced 12 px face. */
const LETTER = 7.25;
const LINE = 18;
const SAMPLE = 32;

/** A label with its formulas' counts lowered and charges raised; SVG has no <sub>. */
export function chartLabel(text: string): ReactNode[] {
  return text.split(/((?<=CO|SO|NO|PO|SiO|NH|H)[234](?![\d.])|\^\d*[+-])/).flatMap<ReactNode>((part, index) => {
    if (index % 2 === 0) return part === "" ? [] : [part];
    const isRaised = part.startsWith("^");
    return [<tspan key={index} dy={isRaised ? "-0.4em" : "0.25em"} fontSize="75%">{part.replace("^", "").replace("-", "−")}</tspan>,
      <tspan key={`${index}-back`} dy={isRaised ? "0.3em" : "-0.19em"}>{"\u200b"}</tspan>];
  });
}

/** Width of an element, followed as it changes. */
export function useWidth(mostWidth: number): [(element: HTMLElement | null) => void, number] {
  const [width, setWidth] = useState(mostWidth);
  const observer = useRef<ResizeObserver | null>(null);
  const box = useCallback((element: HTMLElement | null) => {
    observer.current?.disconnect();
    observer.current = null;
    if (!element) return;
    observer.current = new ResizeObserver(([entry]) => { if (entry.contentRect.width > 0) setWidth(Math.min(mostWidth, Math.round(entry.contentRect.width))); });
    observer.current.observe(element);
  }, [mostWidth]);
  useEffect(() => () => observer.current?.disconnect(), []);
  return [box, width];
}

/** Line styles and markers tell cases apart without colour. */
const DASHES = ["", "7 4", "2 4", "9 3 2 3", "12 4", "4 2 1 2", "1 2", "12 3 2 3 2 3"];
const COLOURS = ["var(--accent)", "var(--water)", "var(--warn)", "var(--good)", "var(--bad)"];
export const colourOf = (index: number): string => COLOURS[index % COLOURS.length];
export const dashOf = (index: number): string => DASHES[index % DASHES.length];
const isFilled = (index: number): boolean => index % 2 === 0;

/** A point's mark as path data: disc, ring, square, open square, triangle, open triangle, by case. */
function markData(x: number, y: number, index: number): string {
  const at = (dx: number, dy: number): string => `${(x + dx).toFixed(1)} ${(y + dy).toFixed(1)}`;
  const shape = Math.floor((index % 6) / 2);
  if (shape === 0) return `M${at(-2.6, 0)}a2.6 2.6 0 1 0 5.2 0a2.6 2.6 0 1 0 -5.2 0`;
  if (shape === 1) return `M${at(-2.4, -2.4)}h4.8v4.8h-4.8z`;
  return `M${at(-3, 2.4)}h6L${at(0, -3)}z`;
}

/** All marks of one case: one element, however many there are. */
export function Marks({ points, index }: { points: readonly (readonly [number, number])[]; index: number }) {
  const data = points.map(([x, y]) => markData(x, y, index)).join("");
  return <path d={data} fill={isFilled(index) ? colourOf(index) : "none"} fillOpacity={points.length > 400 ? 0.5 : 1} stroke={colourOf(index)} strokeWidth={1} strokeOpacity={points.length > 400 ? 0.6 : 1} />;
}

export interface LegendItem { label: string; /** Draws the sample, 26 px wide, around a middle line. */ sample: ReactNode }

export interface Frame { width: number; height: number; left: number; right: number; top: number; bottom: number; legend: { x: number; y: number; label: string }[] }

/** Measures of a chart: the plot's edges, and where the legend's entries stand below it. */
export function frameFor(width: number, labels: readonly string[]): Frame {
  const plot = Math.round(Math.min(320, Math.max(220, width * 0.6)));
  const letters = Math.max(4, Math.floor((width - SAMPLE - 12) / LETTER));
  let x = 8;
  let line = 0;
  const legend = labels.map((full) => {
    const label = full.length > letters ? `${full.slice(0, letters - 1)}…` : full;
    const needed = SAMPLE + label.length * LETTER + 16;
    if (x > 8 && x + needed > width) { x = 8; line++; }
    const place = { x, y: plot + 6 + line * LINE, label };
    x += needed;
    return place;
  });
  const height = legend.length > 0 ? plot + (line + 1) * LINE + 4 : plot;
  return { width, height, left: MARGIN.left, right: width - MARGIN.right, top: MARGIN.top, bottom: plot - MARGIN.bottom, legend };
}

interface FrameProps { frame: Frame; x: Scale; y: Scale; xLabel: string; yLabel: string; isXLined: boolean; titleId: string; title: string; description: string; legend: readonly LegendItem[]; children: ReactNode }

/** Axes, ticks, legend and the words for those who do not see the picture; the chart itself is drawn inside. */
export function ChartFrame({ frame, x, y, xLabel, yLabel, isXLined, titleId, title, description, legend, children }: FrameProps) {
  const { width, height, left, right, top, bottom } = frame;
  return (
    <svg viewBox={`0 0 ${width} ${height}`} role="img" aria-labelledby={titleId} aria-describedby={`${titleId}-desc`} width={width} height={height} className="block max-w-full text-xs">
      <title id={titleId}>{title}</title>
      <desc id={`${titleId}-desc`}>{description}</desc>
      {x.ticks.map((tick) => (
        <g key={tick} transform={`translate(${x.at(tick).toFixed(1)} 0)`}>
          {isXLined && <line y1={top} y2={bottom} stroke="var(--line)" strokeWidth={0.6} />}
          <line y1={bottom} y2={bottom + 4} stroke="var(--dim)" strokeWidth={0.8} />
          <text y={bottom + 17} textAnchor="middle" fill="var(--dim)">{tickLabel(tick)}</text>
        </g>
      ))}
      {y.ticks.map((tick) => (
        <g key={tick} transform={`translate(0 ${y.at(tick).toFixed(1)})`}>
          <line x1={left} x2={right} stroke="var(--line)" strokeWidth={0.6} />
          <text x={left - 8} dy="0.35em" textAnchor="end" fill="var(--dim)">{tickLabel(tick)}</text>
        </g>
      ))}
      <line x1={left} x2={right} y1={bottom} y2={bottom} stroke="var(--dim)" strokeWidth={0.8} />
      <line x1={left} x2={left} y1={top} y2={bottom} stroke="var(--dim)" strokeWidth={0.8} />
      <text x={(left + right) / 2} y={bottom + 36} textAnchor="middle" fill="var(--ink)">{chartLabel(xLabel)}{x.isLog ? " (log)" : ""}</text>
      <text transform={`translate(13 ${(top + bottom) / 2}) rotate(-90)`} textAnchor="middle" fill="var(--ink)">{chartLabel(yLabel)}{y.isLog ? " (log)" : ""}</text>
      {children}
      {frame.legend.map((place, index) => (
        <g key={`${index}-${place.label}`} transform={`translate(${place.x} ${place.y})`}>
          {legend[index]?.sample}
          <text x={SAMPLE} dy="0.35em" fill="var(--dim)">{chartLabel(place.label)}</text>
        </g>
      ))}
    </svg>
  );
}

/** The colours of the light theme: a picture saved goes on white paper, whatever the screen wears. */
function paperColours(): (name: string) => string {
  const root = document.documentElement;
  const isDark = root.classList.contains("dark");
  root.classList.remove("dark");
  const styles = getComputedStyle(root);
  const seen = new Map(["--line", "--dim", "--ink", "--page", ...COLOURS.map((colour) => colour.slice(4, -1))].map((name) => [name, styles.getPropertyValue(name).trim()]));
  root.classList.toggle("dark", isDark);
  return (name) => seen.get(name) || "#23272a";
}

/** A chart as an SVG document that stands by itself. */
export function standaloneSvg(svg: SVGSVGElement): string {
  const copy = svg.cloneNode(true) as SVGSVGElement;
  const colour = paperColours();
  copy.setAttribute("font-family", "JetBrains Mono, monospace");
  copy.setAttribute("font-size", "12");
  copy.removeAttribute("class");
  const paper = document.createElementNS("http://www.w3.org/2000/svg", "rect");
  paper.setAttribute("width", "100%");
  paper.setAttribute("height", "100%");
  paper.setAttribute("fill", "#ffffff");
  const description = copy.querySelector("desc");
  copy.insertBefore(paper, description ? description.nextSibling : copy.firstChild);
  return new XMLSerializer().serializeToString(copy).replace(/var\((--[a-z-]+)\)/g, (_, name: string) => colour(name));
}

export function saveSvg(svg: SVGSVGElement, name: string): void {
  const link = document.createElement("a");
  link.href = URL.createObjectURL(new Blob([standaloneSvg(svg)], { type: "image/svg+xml" }));
  link.download = `${name.replace(/[^\w-]+/g, "-")}.svg`;
  link.click();
  // Some browsers read the blob after the click has returned.
  setTimeout(() => URL.revokeObjectURL(link.href), 10_000);
}
