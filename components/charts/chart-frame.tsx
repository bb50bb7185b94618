"use client";
import { useEffect, useRef, useState, type ReactNode, type RefObject } from "react";

/** A label with the counts of its formulas lowered; SVG has no <sub>. */
export function chartLabel(text: string): ReactNode[] {
  return text.split(/(?<=CO|SO|NO|PO)([234])/).flatMap<ReactNode>((part, index) => (index % 2 === 1
    ? [<tspan key={index} dy="0.25em" fontSize="75%">{part}</tspan>, <tspan key={`${index}-back`} dy="-0.19em">{"\u200b"}</tspan>] : [part]));
}

/** Width of an element, followed as it changes. */
export function useWidth(mostWidth: number): [RefObject<HTMLElement | null>, number] {
  const box = useRef<HTMLElement>(null);
  const [width, setWidth] = useState(mostWidth);
  useEffect(() => {
    if (!box.current) return;
    const observer = new ResizeObserver(([entry]) => { if (entry.contentRect.width > 0) setWidth(Math.min(mostWidth, Math.round(entry.contentRect.width))); });
    observer.observe(box.current);
    return () => observer.disconnect();
  }, [mostWidth]);
  return [box, width];
}

/** Line styles and markers tell cases apart without colour. */
export const DASHES = ["", "7 4", "2 4", "9 3 2 3"];
export const COLOURS = ["var(--accent)", "var(--water)", "var(--warn)", "var(--good)"];
export const colourOf = (index: number): string => COLOURS[index % COLOURS.length];
export const dashOf = (index: number): string => DASHES[index % DASHES.length];

/** A point's mark: disc, ring, square, open square, by case. */
export function Marker({ x, y, index }: { x: number; y: number; index: number }) {
  const colour = colourOf(index);
  const fill = index % 2 === 0 ? colour : "none";
  if (index % 4 < 2) return <circle cx={x.toFixed(1)} cy={y.toFixed(1)} r={2.6} fill={fill} stroke={colour} strokeWidth={1.1} />;
  return <rect x={(x - 2.4).toFixed(1)} y={(y - 2.4).toFixed(1)} width={4.8} height={4.8} fill={fill} stroke={colour} strokeWidth={1.1} />;
}

/** Writes a chart on the page into an SVG file that stands by itself: the theme's colours become plain ones. */
export function saveSvg(svg: SVGSVGElement, name: string): void {
  const copy = svg.cloneNode(true) as SVGSVGElement;
  const styles = getComputedStyle(document.documentElement);
  copy.setAttribute("xmlns", "http://www.w3.org/2000/svg");
  copy.setAttribute("font-family", "JetBrains Mono, monospace");
  copy.setAttribute("font-size", "12");
  const text = new XMLSerializer().serializeToString(copy).replace(/var\((--[a-z-]+)\)/g, (_, variable: string) => styles.getPropertyValue(variable).trim());
  const link = document.createElement("a");
  link.href = URL.createObjectURL(new Blob([text], { type: "image/svg+xml" }));
  link.download = `${name.replace(/[^\w-]+/g, "-")}.svg`;
  link.click();
  URL.revokeObjectURL(link.href);
}
