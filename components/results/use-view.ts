"use client";
import { useCallback, useState } from "react";

/** What of a job is shown, and in which order. Kept in the address, so that a link shows the same. */
export interface ResultView {
  where: string[];
  /** "pH" or "-pH"; "" as solved. */
  sort: string;
  /** Column names shown; null for the usual ones. */
  columns: string[] | null;
}

function readAddress(search: string): ResultView {
  const query = new URLSearchParams(search);
  const columns = query.get("columns");
  return { where: query.getAll("where"), sort: query.get("sort") ?? "", columns: columns ? columns.split(",") : null };
}

/** Query of a view, as the API and the page's own address write it. */
export function viewQuery(view: ResultView): URLSearchParams {
  const query = new URLSearchParams();
  for (const condition of view.where) query.append("where", condition);
  if (view.sort) query.set("sort", view.sort);
  if (view.columns) query.set("columns", view.columns.join(","));
  return query;
}

export function useView(initialSearch: string): [ResultView, (change: Partial<ResultView>) => void] {
  const [view, setView] = useState(() => readAddress(initialSearch));
  const change = useCallback((part: Partial<ResultView>) => setView((now) => {
    const next = { ...now, ...part };
    const text = viewQuery(next).toString();
    window.history.replaceState(null, "", text ? `?${text}` : location.pathname);
    return next;
  }), []);
  return [view, change];
}

/** The order after one more press on a header: up, down, as solved. */
export function nextSort(sort: string, column: string): string {
  if (sort === column) return `-${column}`;
  return sort === `-${column}` ? "" : column;
}
