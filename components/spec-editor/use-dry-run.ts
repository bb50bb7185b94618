"use client";
import { useEffect, useState } from "react";
import { dryRunJob, solve } from "@/lib/client/api";
import { ApiError } from "@/lib/client/errors";
import type { Issue } from "@/lib/errors";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { cutSpec, DRY_ROWS } from "./dry-run";

export interface DryRun {
  state: "idle" | "running" | "done" | "failed";
  columns: readonly ColumnDescriptor[];
  rows: readonly Record<string, unknown>[];
  /** Rows of the whole job where the server counted them (stored sets). */
  rowCount: number | null;
  message: string;
  issues: readonly Issue[];
}

const IDLE: DryRun = { state: "idle", columns: [], rows: [], rowCount: null, message: "", issues: [] };
/** Typing settles for this long before a dry run is sent. */
const SETTLE_MS = 500;

/** Solves the first rows of a sound spec whenever it has come to rest. */
export function useDryRun(spec: JobSpec | null): DryRun {
  const [run, setRun] = useState<DryRun>(IDLE);
  const text = spec ? JSON.stringify(spec) : null;
  useEffect(() => {
    if (text === null) { setRun((now) => (now.state === "done" ? { ...now, state: "idle" } : IDLE)); return; }
    const whole = JSON.parse(text) as JobSpec;
    const end = new AbortController();
    const timer = setTimeout(() => {
      setRun((now) => ({ ...now, state: "running", message: "" }));
      const cut = cutSpec(whole);
      const answer = cut
        ? solve(cut, end.signal).then((each) => ({ columns: each.columns, rows: each.rows.slice(0, DRY_ROWS), rowCount: null, issues: [] }))
        : dryRunJob(whole, end.signal).then((each) => ({ columns: each.columns, rows: each.rows.slice(0, DRY_ROWS), rowCount: each.rowCount, issues: each.issues }));
      answer.then(
        (each) => { if (!end.signal.aborted) setRun({ state: "done", message: "", ...each }); },
        (error: unknown) => {
          if (end.signal.aborted) return;
          setRun({ ...IDLE, state: "failed", message: error instanceof Error ? error.message : "The dry run failed.", issues: error instanceof ApiError ? error.errors ?? [] : [] });
        },
      );
    }, SETTLE_MS);
    return () => { clearTimeout(timer); end.abort(); };
  }, [text]);
  return run;
}
