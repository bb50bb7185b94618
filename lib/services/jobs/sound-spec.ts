import { AppError } from "@/lib/errors";
import type { JobSpec } from "@/lib/schemas/job-spec";
import type { PreparedSpec } from "../intake/prepare-spec";

/** Every fault of the spec as one problem. */
export function requireSoundSpec(prepared: PreparedSpec): JobSpec {
  if (prepared.head && prepared.issues.length === 0) return prepared.head;
  const { issues } = prepared;
  const first = issues[0] ? ` First: ${issues[0].pointer || "document"}: ${issues[0].message}` : "";
  throw new AppError("invalid-spec", `The spec has ${issues.length === 1 ? "one fault" : `${issues.length} faults`}.${first}`, { errors: issues });
}
