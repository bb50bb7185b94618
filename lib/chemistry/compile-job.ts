/**
 * compileJob: a resolved job becomes one compiled case after another, then rows are solved in order. Everything that does not depend
 * on the row is settled here: species and stoichiometry per case, where each axis writes, which columns exist and how they are read.
 */
import { makeCaseSolver } from "@/lib/chemistry/case-solver";
import { planColumns } from "@/lib/chemistry/column-plan";
import { columnValues } from "@/lib/chemistry/column-values";
import { type CompiledJob, type ResolvedJob, type SolvedRows, STATUS } from "@/lib/chemistry/types";

/**
 * @param job numbers in base units (resolveJob).
 * @returns the job ready to solve. Row = (water·cases + case)·points + point, first axis outermost. Every row starts cold, so that its
 *   answer depends on the spec alone.
 * @throws Error where the job names what the constants set lacks, or closes on facts that are no pair: checkSpec lets neither through.
 */
export function compileJob(job: ResolvedJob): CompiledJob {
  const solvers = job.cases.map((kase) => makeCaseSolver(job, kase));
  const columns = planColumns(job.report, solvers, job.units);
  const readers = solvers.map((solver) => columnValues(columns, solver, job.units));
  const pointsPerCase = job.axes.reduce((product, axis) => product * axis.base.length, 1);
  const rowCount = job.waters.length * job.cases.length * pointsPerCase;

  const solve = (from: number, to: number): SolvedRows => {
    if (!(from >= 0 && to >= from && to <= rowCount)) throw new RangeError(`rows ${from} to ${to} are outside 0 to ${rowCount}`);
    const rows = emptyRows(from, to - from, columns.length);
    const texts = new Map([["", 0]]);
    const textIndex = (text: string): number => {
      let index = texts.get(text);
      if (index === undefined) { index = texts.size; texts.set(text, index); rows.texts.push(text); }
      return index;
    };
    for (let row = from; row < to; row++) {
      const at = row - from;
      const point = row % pointsPerCase;
      const waterAndCase = (row - point) / pointsPerCase;
      const caseIndex = waterAndCase % solvers.length;
      const solver = solvers[caseIndex];
      solver.solve(job.waters[(waterAndCase - caseIndex) / solvers.length], point);
      rows.status[at] = solver.status;
      rows.iterations[at] = solver.iterations;
      if (solver.message) rows.message[at] = textIndex(solver.message);
      if (solver.status !== STATUS.ok) continue;
      if (solver.warnings.length > 0) rows.warnings[at] = textIndex(solver.warnings.join("; "));
      rows.residual[at] = solver.residual;
      const values = readers[caseIndex];
      for (let k = 0; k < values.length; k++) rows.values[k][at] = values[k]();
    }
    return rows;
  };
  return {
    rowCount, waterIds: job.waters.map((w) => w.id), caseNames: job.cases.map((c) => c.name),
    axes: job.axes.map(({ field, unit, shown }) => ({ field, unit, shown })), pointsPerCase, columns, solve,
  };
}

function emptyRows(from: number, count: number, columnCount: number): SolvedRows {
  return {
    from, count, status: new Uint8Array(count), message: new Int32Array(count), warnings: new Int32Array(count), iterations: new Int32Array(count),
    residual: new Float64Array(count).fill(NaN),
    values: Array.from({ length: columnCount }, () => new Float64Array(count).fill(NaN)),
    texts: [""],
  };
}
