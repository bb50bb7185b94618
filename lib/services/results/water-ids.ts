import { pool } from "@/db/client";

/** Water ids per row of job_water; jobs/handlers/plan-job.ts writes them so. */
export const WATERS_PER_ROW = 1024;
/** Rows of job_water held: about 60 KB each. */
const HELD = 128;

const held = new Map<string, string[]>();

function hold(key: string, ids: string[]): void {
  held.delete(key);
  held.set(key, ids);
  for (const oldest of held.keys()) {
    if (held.size <= HELD) break;
    held.delete(oldest);
  }
}

/** Ids of waters by their number in the job. Ids of a job never change, so they are remembered. */
export async function readWaterIds(jobId: string, waters: readonly number[]): Promise<string[]> {
  const blocks = new Map<number, string[]>();
  const missing: number[] = [];
  for (const block of new Set(waters.map((water) => Math.floor(water / WATERS_PER_ROW)))) {
    const known = held.get(`${jobId} ${block}`);
    if (known) blocks.set(block, known);
    else missing.push(block);
  }
  if (missing.length > 0) {
    const { rows } = await pool().query<{ index: number; ids: string[] }>("select index, ids from job_water where job_id = $1 and index = any($2::int[])", [jobId, missing]);
    for (const { index, ids } of rows) {
      blocks.set(index, ids);
      hold(`${jobId} ${index}`, ids);
    }
  }
  return waters.map((water) => blocks.get(Math.floor(water / WATERS_PER_ROW))?.[water % WATERS_PER_ROW] ?? "");
}
