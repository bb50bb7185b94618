"use client";
import { useCallback, useRef, useState } from "react";

/** What of a job is shown, and in which order. Kept in the address, so that a link shows the same. */
export interface ResultView {
  where: string[];
  /** "pH" or "-pH"; "" as solved. */
  sort: string;
  /** Column names shown; null for the usual ones. */
  columns: string[] | null;
}

export function readAddress(search: string): ResultView {
  const query = new URLSearchParams(search);
  const select = query.get("select");
  return { where: query.getAll("where"), sort: query.get("sort") ?? "", columns: select === null ? null : select.split(",").filter(Boolean) };
}

/** Query of a view, in the words of the API. */
export function viewQuery(view: ResultView): URLSearchParams {
  const query = new URLSearchParams();
  for (const condition of view.where) query.append("where", condition);
  if (view.sort) query.set("sort", view.sort);
  if (view.columns) query.set("select", view.columns.join(","));
  return query;
}

export function useView(initialSearch: string): [ResultView, (change: Partial<ResultView>) => void] {
  const [view, setView] = useState(() => readAddress(initialSearch));
  const now = useRef(view);
  const change = useCallback((part: Partial<ResultView>) => {
    now.current = { ...now.current, ...part };
    const text = viewQuery(now.current).toString();
    window.history.replaceState(null, "", text ? `?${text}` : location.pathname);
    setView(now.current);
  }, []);
  return [view, change];
}

/** The order after one more press on a header: up, down, as solved. */
export function nextSort(sort: string, column: string): string {
  if (sort === column) return `-${column}`;
  return sort === `-${column}` ? "" : column;
}

/** Conditions that show one status alone; those on other columns stay. */
export const whereStatus = (where: readonly string[], status: string): string[] => [...where.filter((condition) => !/^status\b/.test(condition)), `status = ${status}`];
export const whereWarned = (where: readonly string[]): string[] => [...where.filter((condition) => !/^warnings\b/.test(condition)), "warnings != null"];
