/** A spec document solved in this process, the whole way from words to numbers: schema, resolveJob, compileJob. */
import { compileJob } from "@/lib/chemistry/compile-job";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import { STATUS_NAMES } from "@/lib/chemistry/types";
import { readStoredSpec } from "@/lib/chemistry/check-spec";

export interface SolvedRow { water: string; case: string; point: number; status: string; message: string; warnings: string; residual: number; values: Record<string, number> }

export function solveSpec(document: Record<string, unknown>): SolvedRow[] {
  const waters = document.waters as { rows: Record<string, unknown>[] };
  const job = compileJob(resolveJob(readStoredSpec(document), waters.rows));
  const rows = job.solve(0, job.rowCount);
  return Array.from({ length: rows.count }, (_, at) => {
    const point = at % job.pointsPerCase;
    const waterAndCase = (at - point) / job.pointsPerCase;
    return {
      water: job.waterIds[Math.floor(waterAndCase / job.caseNames.length)], case: job.caseNames[waterAndCase % job.caseNames.length], point,
      status: STATUS_NAMES[rows.status[at]], message: rows.texts[rows.message[at]], warnings: rows.texts[rows.warnings[at]], residual: rows.residual[at],
      values: Object.fromEntries(job.columns.map((column, k) => [column.name, rows.values[k][at]])),
    };
  });
}

/** One water in one case; fails with the row's own message where it is not ok. */
export function solveOneWater(row: Record<string, unknown>, kase: Record<string, unknown>, report: string[]): Record<string, number> {
  const [solved] = solveSpec({ spec: 1, title: "check", waters: { missing: "zero", rows: [{ id: "w", ...row }] }, cases: [{ name: "c", ...kase }], report });
  if (solved.status !== "ok") throw new Error(`${solved.status}: ${solved.message}`);
  return solved.values;
}
