"use client";
import { useCallback, useEffect, useRef, useState } from "react";
import { getResults } from "@/lib/client/api";
import { ApiError } from "@/lib/client/errors";
import { PAGE_ROWS, type Row, RowPages } from "./row-pages";

export interface RowWindow {
  /** Rows under the conditions; null until the first answer. */
  rowCount: number | null;
  error: string | null;
  /** The rows at hand are those of the view before; the present ones are on their way. */
  isStale: boolean;
  row(index: number): Row | null;
  /** Says which rows are in sight; what is missing of them is fetched. */
  show(from: number, to: number): void;
}

/** Between two looks at what is missing: a dragged scrollbar passes more pages in a second than the server should be asked for. */
const PAUSE_MS = 150;
/** Rows beyond the sight that are fetched ahead. */
const AHEAD = PAGE_ROWS / 2;

interface Load { pages: RowPages; pending: Map<number, AbortController>; rowCount: number | null; isShown: boolean }
interface State { key: string; rowCount: number | null; error: string | null; pages: RowPages }

const newLoad = (): Load => ({ pages: new RowPages(), pending: new Map(), rowCount: null, isShown: false });

/** What the server says against a query, each fault with its remedy. */
function faultText(reason: unknown): string {
  if (reason instanceof ApiError && reason.errors) return reason.errors.map(({ message, remedy }) => (remedy ? `${message}. ${remedy}` : message)).join(" ");
  return reason instanceof Error ? reason.message : "The rows cannot be read.";
}

/** The rows of one view of a job, fetched as they come into sight. A new `revision` reads them again; old rows stay until new ones are here. */
export function useRows(jobId: string, query: { where: readonly string[]; sort: string; select: string }, revision: number): RowWindow {
  const { where, sort, select } = query;
  const key = JSON.stringify([jobId, where, sort, select]);
  const [state, setState] = useState<State>(() => ({ key, rowCount: null, error: null, pages: new RowPages() }));
  const sight = useRef({ from: 0, to: PAGE_ROWS });
  const load = useRef<Load>(newLoad());
  const pause = useRef<{ until: number; timer: ReturnType<typeof setTimeout> | undefined }>({ until: 0, timer: undefined });

  const fetchPage = useCallback((page: number, target: Load): void => {
    if (target.pending.has(page)) return;
    const end = new AbortController();
    target.pending.set(page, end);
    const [, conditions, order, names] = JSON.parse(key) as [string, string[], string, string];
    const isInSight = (each: number): boolean => each * PAGE_ROWS < sight.current.to && (each + 1) * PAGE_ROWS > sight.current.from;
    getResults(jobId, { where: conditions, sort: order || undefined, select: names || undefined, limit: PAGE_ROWS, firstRow: page * PAGE_ROWS }, end.signal).then((answer) => {
      if (end.signal.aborted) return;
      target.pending.delete(page);
      target.pages.put(page, answer.rows as Row[]);
      target.rowCount = answer.rowCount;
      // A second reading is shown when all that is in sight has come: half of it would blink.
      if (!target.isShown && [...target.pending.keys()].some(isInSight)) return;
      target.isShown = true;
      setState({ key, rowCount: answer.rowCount, error: null, pages: target.pages });
    }, (reason: unknown) => {
      if (end.signal.aborted) return;
      target.pending.delete(page);
      setState((now) => ({ ...now, key, rowCount: now.key === key ? now.rowCount : null, error: faultText(reason) }));
    });
  }, [jobId, key]);

  const fetchMissing = useCallback((): void => {
    const { from, to } = sight.current;
    const target = load.current;
    // What scrolled out of sight before it came is not waited for.
    for (const [page, end] of target.pending) {
      if (page * PAGE_ROWS < to + PAGE_ROWS && (page + 1) * PAGE_ROWS > from - PAGE_ROWS) continue;
      end.abort();
      target.pending.delete(page);
    }
    for (const page of target.pages.missing(from - AHEAD, Math.min(to + AHEAD, target.rowCount ?? to))) fetchPage(page, target);
  }, [fetchPage]);

  const show = useCallback((from: number, to: number): void => {
    sight.current = { from, to };
    clearTimeout(pause.current.timer);
    const wait = pause.current.until - Date.now();
    const look = (): void => { pause.current.until = Date.now() + PAUSE_MS; fetchMissing(); };
    if (wait <= 0) look(); else pause.current.timer = setTimeout(look, wait);
  }, [fetchMissing]);

  useEffect(() => {
    const target = newLoad();
    load.current = target;
    const pages = target.pages.missing(sight.current.from, sight.current.to);
    for (const page of pages.length > 0 ? pages : [0]) fetchPage(page, target);
    return () => { for (const end of target.pending.values()) end.abort(); };
  }, [fetchPage, revision]);
  useEffect(() => { const held = pause.current; return () => clearTimeout(held.timer); }, []);

  const { pages } = state;
  const row = useCallback((index: number) => pages.row(index), [pages]);
  return { rowCount: state.rowCount, error: state.key === key ? state.error : null, isStale: state.key !== key, row, show };
}
