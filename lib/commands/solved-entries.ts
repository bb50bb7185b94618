import type { JobSpec } from "@/lib/schemas/job-spec";
import type { ApiCall } from "./command";
import type { Entry } from "./entry";
import type { Answered } from "./case-changes";

export const SOLVE_PATH = "/api/v1/solve";

/** True for an answered water: the entries that most commands work on. */
export const isWaterEntry = (entry: Entry): boolean => entry.body.kind === "state";

export function specOfWater(entry: Entry): JobSpec {
  if (entry.body.kind !== "state") throw new Error(`Entry ${entry.number} holds no water.`);
  return entry.body.spec;
}

/** The first row of the entry's answer; empty where it has none. */
export function firstAnswered(entry: Entry): Answered {
  return entry.body.kind === "state" || entry.body.kind === "grid" ? (entry.body.response.rows[0] ?? {}) : {};
}

/** Columns that the answer to one water shows. */
export const STATE_REPORT = [
  "pH", "ANC", "ANCions", "conservedANC", "alkalinity", "chargeError", "balanceError", "DIC", "ionicStrength", "pCO2",
  "conductivity", "SI", "species", "solids", "gas:CO2",
];

/** A copy of the spec that reports what an entry shows. */
export function withStateReport(spec: JobSpec): JobSpec {
  return { ...structuredClone(spec), report: STATE_REPORT as JobSpec["report"] };
}

/** The request that made an entry; null for entries made in the browser. */
export function apiCallOf(entry: Entry): ApiCall | null {
  const body = entry.body;
  switch (body.kind) {
    case "state":
    case "grid": return { method: "POST", path: SOLVE_PATH, body: body.spec };
    case "job": return { method: "GET", path: `/api/v1/jobs/${body.jobId}` };
    case "jobs": return { method: "GET", path: "/api/v1/jobs" };
    case "sets": return { method: "GET", path: "/api/v1/sample-sets" };
    case "constants": return { method: "GET", path: `/api/v1/constants?temperature=${body.temperature}` };
    default: return null;
  }
}
