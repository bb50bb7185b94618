import type { sampleSet, sampleSetVersion } from "@/db/schema";
import type { SampleSet } from "@/lib/schemas/api";

/** Columns of a version that lists need; waters and the raw upload stay where they are. */
export type VersionHead = Pick<typeof sampleSetVersion.$inferSelect, "version" | "waterCount" | "columns" | "units" | "createdAt"> & { flagCount: number };

/** A sample set as the API shows it, at its latest version. */
export function presentSampleSet(
  row: typeof sampleSet.$inferSelect, version: VersionHead, owner: { id: string; name: string },
): SampleSet {
  return {
    id: row.id, name: row.name, description: row.description, visibility: row.visibility,
    owner: { id: owner.id, name: owner.name }, version: version.version, waterCount: version.waterCount,
    columns: version.columns, units: version.units, flagCount: version.flagCount,
    createdAt: row.createdAt.toISOString(), updatedAt: version.createdAt.toISOString(),
  };
}
