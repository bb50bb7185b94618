/** A spec cut down to its first few result rows, for solving beside the editor. */
import type { JobSpec } from "@/lib/schemas/job-spec";

/** Result rows a dry run shows at most. */
export const DRY_ROWS = 12;

type Axis = NonNullable<JobSpec["vary"]>[number];

/**
 * The spec with as few waters and axis points as give about DRY_ROWS rows; all cases stay, since they are what one
 * wants to see. Axes keep their ends, so that the cut run spans the same range. null for specs over a stored set:
 * their rows are the server's to cut (POST /jobs?dry=true).
 */
export function cutSpec(spec: JobSpec): JobSpec | null {
  const rows = "rows" in spec.waters ? spec.waters.rows : undefined;
  if (!rows) return null;
  const perWater = Math.max(1, spec.cases.length);
  const points = spec.vary?.length ? Math.max(2, Math.floor(DRY_ROWS / perWater / 2 ** (spec.vary.length - 1))) : 1;
  const vary = spec.vary?.map((axis, index): Axis => {
    const most = index === 0 ? points : 2;
    if ("values" in axis && Array.isArray(axis.values)) return { ...axis, values: axis.values.slice(0, most) } as Axis;
    return { ...axis, points: Math.min((axis as { points?: number }).points ?? most, most) } as Axis;
  });
  const perWaterRows = perWater * (vary?.length ? points * 2 ** (vary.length - 1) : 1);
  const waters = Math.max(1, Math.floor(DRY_ROWS / perWaterRows));
  return { ...spec, ...(vary ? { vary } : {}), waters: { ...spec.waters, rows: rows.slice(0, waters) } as JobSpec["waters"] };
}

/** Seconds a job of this many rows takes at the rate given, said roughly. */
export function estimateText(rows: number, rowsPerSecond: number): string {
  const seconds = rows / rowsPerSecond;
  if (seconds < 1) return "under a second";
  if (seconds < 90) return `about ${Math.ceil(seconds)} s`;
  return `about ${Math.ceil(seconds / 60)} min`;
}
