"use client";
import { useCallback, useEffect, useRef, useState } from "react";
import { getResults } from "@/lib/client/api";
import { PAGE_ROWS, type Row, RowPages } from "./row-pages";

export interface RowWindow {
  /** Rows under the conditions; null until the first answer. */
  rowCount: number | null;
  error: string | null;
  row(index: number): Row | null;
  /** Says which rows are in sight; what is missing of them is fetched. */
  show(from: number, to: number): void;
}

/** The rows of one view of a job, fetched as they come into sight. A new `revision` reads them again; old rows stay until new ones are here. */
export function useRows(jobId: string, query: { where: readonly string[]; sort: string; select: string }, revision: number): RowWindow {
  const { where, sort, select } = query;
  const key = JSON.stringify([jobId, where, sort, select]);
  const [state, setState] = useState<{ key: string; rowCount: number | null; error: string | null; pages: RowPages }>({ key, rowCount: null, error: null, pages: new RowPages() });
  const sight = useRef({ from: 0, to: PAGE_ROWS });
  const loader = useRef<{ pages: RowPages; pending: Map<number, AbortController> }>({ pages: state.pages, pending: new Map() });
  const [, redraw] = useState(0);

  const fetchPage = useCallback((page: number, target: typeof loader.current, isFirst: boolean): void => {
    if (target.pending.has(page)) return;
    const end = new AbortController();
    target.pending.set(page, end);
    const [, conditions, order, names] = JSON.parse(key) as [string, string[], string, string];
    getResults(jobId, { where: conditions, sort: order || undefined, select: names || undefined, limit: PAGE_ROWS, firstRow: page * PAGE_ROWS }, end.signal).then((answer) => {
      target.pending.delete(page);
      if (end.signal.aborted) return;
      target.pages.put(page, answer.rows as Row[]);
      if (isFirst || loader.current === target) setState({ key, rowCount: answer.rowCount, error: null, pages: target.pages });
      redraw((n) => n + 1);
    }, (reason: unknown) => {
      target.pending.delete(page);
      if (!end.signal.aborted) setState((now) => ({ ...now, key, error: reason instanceof Error ? reason.message : "The rows cannot be read." }));
    });
  }, [jobId, key]);

  const show = useCallback((from: number, to: number): void => {
    sight.current = { from, to };
    const target = loader.current;
    const missing = target.pages.missing(from, to);
    // What scrolled out of sight before it came is not waited for.
    for (const [page, end] of target.pending) if (page * PAGE_ROWS >= to + PAGE_ROWS || (page + 1) * PAGE_ROWS <= from - PAGE_ROWS) { end.abort(); target.pending.delete(page); }
    for (const page of missing) fetchPage(page, target, false);
  }, [fetchPage]);

  useEffect(() => {
    const target = { pages: new RowPages(), pending: new Map<number, AbortController>() };
    const before = loader.current;
    for (const end of before.pending.values()) end.abort();
    before.pending.clear();
    loader.current = target;
    const pages = target.pages.missing(sight.current.from, sight.current.to);
    for (const page of pages.length > 0 ? pages : [0]) fetchPage(page, target, true);
    return () => { for (const end of target.pending.values()) end.abort(); };
  }, [fetchPage, revision]);

  const { pages } = state;
  const row = useCallback((index: number) => pages.row(index), [pages]);
  return { rowCount: state.key === key ? state.rowCount : null, error: state.key === key ? state.error : null, row, show };
}
