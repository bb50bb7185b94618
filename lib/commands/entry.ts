/** What stands in the console's stream. Entries are plain data: they go to localStorage and back. */
import type { ConstantEntry, Job, SampleSet, SolveResponse } from "@/lib/schemas/api";
import type { Issue } from "@/lib/errors";
import type { JobSpec } from "@/lib/schemas/job-spec";

/** A fault of a line, at characters [start, end) of it. */
export interface LineProblem {
  start: number;
  end: number;
  message: string;
  /** What to write in place of the marked characters. */
  suggestion?: string;
}

/** A solved spec, as an entry keeps it. */
export interface Solved {
  spec: JobSpec;
  response: SolveResponse;
}

export interface ComparedState extends Solved {
  number: number;
  label: string;
}

export type EntryBody =
  | { kind: "waiting"; what: string }
  | ({ kind: "state"; from: number | null; changes: string[] } & Solved)
  | ({ kind: "grid"; from: number | null; field: string; y: string; caption: string } & Solved)
  | { kind: "comparison"; states: ComparedState[] }
  | { kind: "job"; jobId: string; title: string; showChart: boolean }
  | { kind: "jobs"; jobs: Job[] }
  | { kind: "sets"; sets: SampleSet[] }
  | { kind: "constants"; temperature: number; entries: ConstantEntry[] }
  | { kind: "code"; caption: string; language: string; text: string }
  | { kind: "help"; topic: string | null }
  | { kind: "note"; text: string }
  | { kind: "problem"; detail: string; problems: LineProblem[]; issues: Issue[] }
  /** An answer too large to keep over a reload; its line is still there to run again. */
  | { kind: "not-kept" };

export interface Entry {
  number: number;
  at: string;
  line: string;
  body: EntryBody;
}

/** The entry's spec, where it has one that can be changed, opened or submitted. */
export function specOf(entry: Entry): JobSpec | null {
  return entry.body.kind === "state" || entry.body.kind === "grid" ? entry.body.spec : null;
}

/** One line about an entry, for completion and the palette. */
export function describeEntry(entry: Entry): string {
  return entry.line.length > 60 ? `${entry.line.slice(0, 59)}…` : entry.line;
}
