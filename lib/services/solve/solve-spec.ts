import { db } from "@/db/client";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { compileJob } from "@/lib/chemistry/compile-job";
import { CONSTANTS_VERSION } from "@/lib/chemistry/data";
import { countRows, resolveJob } from "@/lib/chemistry/resolve-job";
import type { CompiledJob } from "@/lib/chemistry/types";
import { ENGINE_VERSION } from "@/lib/chemistry/version";
import { AppError, type Issue } from "@/lib/errors";
import type { Actor } from "@/lib/schemas/actor";
import type { JobDryRun, SolveResponse } from "@/lib/schemas/api";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { ROLE_LIMITS, ROWS_PER_SOLVE } from "../access";
import type { PreparedSpec } from "../intake/prepare-spec";
import { requireSoundSpec } from "../jobs/sound-spec";
import { readSetWaters, specWithSetUnits } from "../samples/read-waters";
import { resolveSetReference } from "../samples/resolve-reference";
import { columnsOf, rowObjects, summarise } from "./result-objects";

/** Rows that a dry run solves. */
const DRY_ROWS = 20;

interface Waters { spec: JobSpec; count: number; rows(limit: number): Promise<Record<string, unknown>[]> }

/** The spec with its waters within reach: counted now, read only when asked for. */
async function openWaters(actor: Actor, prepared: PreparedSpec): Promise<Waters> {
  const head = requireSoundSpec(prepared);
  if (prepared.inlineWaters === null) {
    const set = await resolveSetReference(db(), actor, head);
    return {
      spec: specWithSetUnits(head, set.units), count: set.waterCount,
      rows: async (limit) => (await readSetWaters(set.id, set.version, limit)).waters,
    };
  }
  const spec = prepared.spec ?? checkSpec(JSON.parse(prepared.json)).spec ?? head;
  const rows = (spec.waters.rows ?? []) as Record<string, unknown>[];
  return { spec, count: prepared.inlineWaters, rows: async (limit) => rows.slice(0, limit) };
}

const compile = (spec: JobSpec, waters: Record<string, unknown>[]): CompiledJob => compileJob(resolveJob(spec, waters));

/**
 * Solves a small spec within the request. Throws `invalid-spec` with every fault, or where it has more than 500 rows
 * (the remedy is POST /jobs). Rows that fail are data, with status and message.
 */
export async function solveSpec(actor: Actor, prepared: PreparedSpec): Promise<SolveResponse> {
  const started = performance.now();
  const { spec, count, rows } = await openWaters(actor, prepared);
  const rowCount = countRows(spec, count);
  if (rowCount > ROWS_PER_SOLVE) {
    const message = `This spec has ${rowCount} rows; /solve answers up to ${ROWS_PER_SOLVE}.`;
    throw new AppError("invalid-spec", `${message} Send the same document to POST /api/v1/jobs.`, {
      errors: [{ pointer: spec.vary ? "/vary" : "/waters", code: "too-many-rows", message, value: String(rowCount), remedy: "POST /api/v1/jobs takes the same document." }],
    });
  }
  const compiled = compile(spec, await rows(count));
  const solved = compiled.solve(0, compiled.rowCount);
  const { warnings, ...counts } = summarise(solved);
  return {
    rows: rowObjects(compiled, solved), columns: columnsOf(compiled),
    summary: {
      ...counts, milliseconds: Math.round((performance.now() - started) * 100) / 100,
      engineVersion: ENGINE_VERSION, constantsVersion: CONSTANTS_VERSION,
    },
    warnings,
  };
}

/**
 * What a spec would do: its faults as data, its rows counted, its first rows solved; nothing is stored. Only waters
 * that those first rows need are compiled.
 */
export async function dryRun(actor: Actor, prepared: PreparedSpec): Promise<JobDryRun> {
  if (!prepared.head || prepared.issues.length > 0) {
    return { rowCount: 0, waterCount: 0, cases: [], issues: prepared.issues, columns: [], rows: [] };
  }
  const { spec, count, rows } = await openWaters(actor, prepared);
  const rowCount = countRows(spec, count);
  const issues: Issue[] = [];
  const limit = ROLE_LIMITS[actor.role].rowsPerJob;
  if (!(rowCount <= limit)) {
    issues.push({ pointer: spec.vary ? "/vary" : "/waters", code: "too-many-rows", message: `The job would have ${rowCount} rows; the role ${actor.role} may submit ${limit} at once.` });
    return { rowCount, waterCount: count, cases: spec.cases.map((each) => each.name), issues, columns: [], rows: [] };
  }
  const rowsPerWater = Math.max(1, countRows(spec, 1));
  const compiled = compile(spec, await rows(Math.max(1, Math.ceil(DRY_ROWS / rowsPerWater))));
  const solved = compiled.solve(0, Math.min(DRY_ROWS, compiled.rowCount));
  return { rowCount, waterCount: count, cases: compiled.caseNames, issues, columns: columnsOf(compiled), rows: rowObjects(compiled, solved) };
}
