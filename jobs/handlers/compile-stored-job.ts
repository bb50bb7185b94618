import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { job } from "@/db/schema";
import { readStoredSpec } from "@/lib/chemistry/check-spec";
import { compileJob } from "@/lib/chemistry/compile-job";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import type { CompiledJob } from "@/lib/chemistry/types";
import { readSetWaters, specWithSetUnits } from "@/lib/services/samples/read-waters";

/**
 * The compiled form of a job as it was submitted: its spec and, where the spec names a sample set, the version pinned
 * then. Both are immutable, so the same id always gives the same rows. Throws when the job or its waters are gone.
 */
export async function compileStoredJob(jobId: string): Promise<CompiledJob> {
  const [row] = await db().select({ spec: job.spec, setId: job.setId, setVersion: job.setVersion }).from(job).where(eq(job.id, jobId));
  if (!row) throw new Error(`No job ${jobId}`);
  const spec = readStoredSpec(row.spec);
  if (row.setId === null) return compileJob(resolveJob(spec, (spec.waters.rows ?? []) as Record<string, unknown>[]));
  const { waters, units } = await readSetWaters(row.setId, row.setVersion ?? 1);
  if (waters.length === 0) throw new Error(`The sample set ${row.setId} has no version ${row.setVersion} any more`);
  return compileJob(resolveJob(specWithSetUnits(spec, units), waters));
}
