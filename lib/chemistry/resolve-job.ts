/** A checked spec and its waters as numbers in base units, ready to be compiled. */
import { pointCount, readAxis } from "@/lib/chemistry/axis-values";
import { DEFAULT_REPORT } from "@/lib/chemistry/column-plan";
import { constantsSetOf } from "@/lib/chemistry/extension";
import { effectiveCases } from "@/lib/chemistry/effective-cases";
import { resolveCase } from "@/lib/chemistry/resolve-case";
import { resolveWater } from "@/lib/chemistry/resolve-water";
import type { ResolvedJob } from "@/lib/chemistry/types";
import type { JobSpec } from "@/lib/schemas/job-spec";

export { checkWaters } from "@/lib/chemistry/check-waters";

const TOLERANCE = 1e-10;
const MAX_ITERATIONS = 100;

/** Result rows of a spec over that many waters: waters × cases × points of each axis. */
export function countRows(spec: Pick<JobSpec, "cases" | "vary">, waterCount: number): number {
  return (spec.vary ?? []).reduce((product, axis) => product * pointCount(axis), waterCount * spec.cases.length);
}

/**
 * @param spec passed by checkSpec without issues. @param rows its waters, inline or from the stored set.
 * @returns numbers in base units. A value of a row that cannot be read, or is negative, becomes a fault of that water alone.
 * @throws Error where the spec was not checked.
 */
export function resolveJob(spec: JobSpec, rows: readonly Readonly<Record<string, unknown>>[]): ResolvedJob {
  const units = spec.waters.units ?? {};
  const set = constantsSetOf(spec.extend);
  const belowLimit = spec.waters.belowLimit ?? "half";
  return {
    waters: rows.map((row, index) => resolveWater(row, index, units, belowLimit, set)),
    cases: effectiveCases(spec.cases).map((kase) => resolveCase(kase, units, belowLimit, set)),
    axes: (spec.vary ?? []).map((axis) => {
      const read = readAxis(axis, units, set);
      if (Array.isArray(read)) throw new Error(`axis ${axis.field}: ${read[0].message}`);
      return read;
    }),
    missing: spec.waters.missing ?? "refuse",
    units, constantsSet: set,
    report: spec.report && spec.report.length > 0 ? [...spec.report] : [...DEFAULT_REPORT],
    solver: { tolerance: spec.solver?.tolerance ?? TOLERANCE, maxIterations: spec.solver?.maxIterations ?? MAX_ITERATIONS },
  };
}
