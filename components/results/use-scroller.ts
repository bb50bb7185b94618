"use client";
import { useCallback, useEffect, useMemo, useRef, useState, type RefObject } from "react";
import { makeScrollMap, ROW_HEIGHT, type ScrollMap } from "./scroll-map";

export interface Sight {
  box: RefObject<HTMLDivElement | null>;
  map: ScrollMap;
  /** Topmost row, with its fraction. */
  topRow: number;
  left: number;
  width: number;
  height: number;
  onScroll(): void;
  /** Puts a row into sight, at the edge it is nearest to. */
  reveal(row: number): void;
  moveTo(topRow: number): void;
}

/** Where a long table is scrolled to, in rows. @param headHeight pixels of the head that stays on top. */
export function useScroller(rowCount: number, headHeight: number): Sight {
  const box = useRef<HTMLDivElement>(null);
  const [size, setSize] = useState({ width: 1000, height: 480 });
  const [place, setPlace] = useState({ topRow: 0, left: 0 });
  // A position that this code has set comes back as a scroll event; reading it would lose the fraction of a pixel that is many rows.
  const written = useRef(-1);
  const height = Math.max(ROW_HEIGHT, size.height - headHeight);
  const map = useMemo(() => makeScrollMap(rowCount, height), [rowCount, height]);

  useEffect(() => {
    const element = box.current;
    if (!element) return;
    const observer = new ResizeObserver(() => setSize({ width: element.clientWidth, height: element.clientHeight }));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);

  const onScroll = useCallback(() => {
    const element = box.current;
    if (!element) return;
    const isOurs = Math.abs(element.scrollTop - written.current) < 2;
    setPlace((now) => ({ topRow: isOurs ? now.topRow : map.topRowAt(element.scrollTop), left: element.scrollLeft }));
    if (!isOurs) written.current = -1;
  }, [map]);

  const moveTo = useCallback((topRow: number) => {
    const element = box.current;
    if (!element) return;
    const next = Math.min(map.lastTopRow, Math.max(0, topRow));
    element.scrollTop = map.scrollTopOf(next);
    written.current = element.scrollTop;
    setPlace((now) => ({ ...now, topRow: next }));
  }, [map]);

  useEffect(() => {
    const element = box.current;
    if (!element || !map.isScaled) return;
    // On a scaled bar a wheel's pixels would be thousands of rows: they are taken as rows instead.
    const onWheel = (event: WheelEvent): void => {
      if (event.ctrlKey || event.shiftKey || Math.abs(event.deltaX) > Math.abs(event.deltaY)) return;
      event.preventDefault();
      setPlace((now) => {
        const pixels = event.deltaMode === 1 ? event.deltaY * ROW_HEIGHT : event.deltaY;
        const next = Math.min(map.lastTopRow, Math.max(0, now.topRow + pixels / ROW_HEIGHT));
        element.scrollTop = map.scrollTopOf(next);
        written.current = element.scrollTop;
        return { ...now, topRow: next };
      });
    };
    element.addEventListener("wheel", onWheel, { passive: false });
    return () => element.removeEventListener("wheel", onWheel);
  }, [map]);

  const topRow = Math.min(place.topRow, map.lastTopRow);
  const reveal = useCallback((row: number) => {
    const visible = height / ROW_HEIGHT;
    if (row < topRow) moveTo(row);
    else if (row + 1 > topRow + visible) moveTo(row + 1 - visible);
  }, [height, topRow, moveTo]);
  return { box, map, topRow, left: place.left, width: size.width, height, onScroll, reveal, moveTo };
}
