/** Specs to bend: what checkSpec says of them, and what they resolve to. */
import { expect } from "vitest";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { compileJob } from "@/lib/chemistry/compile-job";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import { type ResolvedJob, STATUS_NAMES } from "@/lib/chemistry/types";
import type { Issue } from "@/lib/errors";

export type Plain = Record<string, unknown>;

/** Every analyte that electroneutrality asks for, with a temperature. */
export const ROW: Plain = { id: "B-03", temperature: 10, Ca: 60, Mg: 6, Na: 5, K: 1, Cl: 9, SO4: 20, alkalinity: 3, pH: 7.9 };
export const CASE: Plain = { name: "sampled", close: ["pH", "alkalinity"] };

export interface Parts { row?: Plain; rows?: unknown[]; waters?: Plain; kase?: Plain; cases?: unknown[]; vary?: unknown[]; report?: unknown[]; more?: Plain }

/** A spec of one row and one case, apart from what is given. */
export function specOf({ row, rows, waters, kase, cases, vary, report, more }: Parts = {}): Plain {
  return {
    spec: 1, waters: { rows: rows ?? [{ ...ROW, ...row }], ...waters }, cases: cases ?? [{ ...CASE, ...kase }],
    ...(vary ? { vary } : {}), ...(report ? { report } : {}), ...more,
  };
}

export const issuesOf = (parts: Parts): Issue[] => checkSpec(specOf(parts)).issues;

/** Pointer and code of each fault. */
export const faultsOf = (parts: Parts): string[] => issuesOf(parts).map(({ pointer, code }) => `${pointer} ${code}`);

/** The one fault that a spec has. */
export function onlyIssue(parts: Parts): Issue {
  const issues = issuesOf(parts);
  expect(issues, JSON.stringify(issues)).toHaveLength(1);
  return issues[0];
}

/** Numbers in base units of a spec without faults. */
export function resolved(parts: Parts): ResolvedJob {
  const { spec, issues } = checkSpec(specOf(parts));
  expect(issues, JSON.stringify(parts)).toEqual([]);
  return resolveJob(spec!, spec!.waters.rows as Plain[]);
}

export interface Outcome { status: string; message: string; warnings: string; values: Record<string, number> }

/** The rows of a spec without faults. */
export function outcomes(parts: Parts): Outcome[] {
  const job = compileJob(resolved(parts));
  const solved = job.solve(0, job.rowCount);
  return Array.from({ length: job.rowCount }, (_, at) => ({
    status: STATUS_NAMES[solved.status[at]], message: solved.texts[solved.message[at]], warnings: solved.texts[solved.warnings[at]],
    values: Object.fromEntries(job.columns.map(({ name }, k) => [name, solved.values[k][at]])),
  }));
}
