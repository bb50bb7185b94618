import { getTableColumns } from "drizzle-orm";
import { job } from "@/db/schema";

const { spec: _spec, ...columns } = getTableColumns(job);
void _spec;

/** Every column of a job but its spec, which may hold 50 MB of inline waters and is read by its own route only. */
export const jobColumns = columns;
export type JobRow = Omit<typeof job.$inferSelect, "spec">;
