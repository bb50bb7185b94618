/** The browser's typed calls of the HTTP API, by the session's cookie. Each throws ApiError, or TypeError without a network. */
import type { ConstantsTable, Job, JobDryRun, Me, ResultPage, SampleSet, SolveResponse } from "@/lib/schemas/api";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { errorOf } from "./errors";
import { signInAddress } from "./sign-in-address";

export const ROOT = "/api/v1";

type Query = Record<string, string | number | readonly string[] | undefined>;

/** Address of a route with its query; lists repeat their name. */
export function withQuery(path: string, query: Query): string {
  const parameters = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value === undefined) continue;
    for (const each of Array.isArray(value) ? value : [value]) parameters.append(name, String(each));
  }
  const text = parameters.toString();
  return ROOT + path + (text ? `?${text}` : "");
}

/** One request, JSON both ways. */
export async function call<T>(method: "GET" | "POST" | "PATCH" | "DELETE", address: string, options: { body?: unknown; signal?: AbortSignal; headers?: Record<string, string> } = {}): Promise<T> {
  const response = await fetch(address, {
    method, signal: options.signal, cache: "no-store",
    // A content type on every write: the server takes it as proof of a same-origin request.
    headers: { Accept: "application/json", ...(method === "GET" ? {} : { "Content-Type": "application/json" }), ...options.headers },
    body: options.body === undefined ? (method === "POST" ? "{}" : undefined) : JSON.stringify(options.body),
  });
  if (response.status === 401 && typeof location !== "undefined") location.assign(signInAddress());
  if (!response.ok) throw await errorOf(response);
  return (response.status === 204 ? null : await response.json()) as T;
}

export const getMe = (): Promise<Me> => call("GET", `${ROOT}/me`);
export const solve = (spec: JobSpec, signal?: AbortSignal): Promise<SolveResponse> => call("POST", `${ROOT}/solve`, { body: spec, signal });

/** Submits a job. The key makes a repeated click or retried request one job. */
export const submitJob = (spec: JobSpec, key: string = crypto.randomUUID()): Promise<Job> =>
  call("POST", `${ROOT}/jobs`, { body: spec, headers: { "Idempotency-Key": key } });
export const dryRunJob = (spec: JobSpec, signal?: AbortSignal): Promise<JobDryRun> => call("POST", withQuery("/jobs", { dry: "true" }), { body: spec, signal });
export const getJob = (id: string, signal?: AbortSignal): Promise<Job> => call("GET", `${ROOT}/jobs/${id}`, { signal });
export const cancelJob = (id: string): Promise<Job> => call("POST", `${ROOT}/jobs/${id}/cancel`);
export const retryJob = (id: string): Promise<Job> => call("POST", `${ROOT}/jobs/${id}/retry`);
export const getJobSpec = (id: string): Promise<JobSpec> => call("GET", `${ROOT}/jobs/${id}/spec`);
export const listJobs = (query: { q?: string; status?: string; owner?: string; limit?: number; cursor?: string } = {}): Promise<{ jobs: Job[]; nextCursor: string | null }> =>
  call("GET", withQuery("/jobs", query));
export const getResults = (
  id: string, query: { select?: string; where?: readonly string[]; sort?: string; limit?: number; firstRow?: number; cursor?: string }, signal?: AbortSignal,
): Promise<ResultPage> => call("GET", withQuery(`/jobs/${id}/results`, query), { signal });
export const listSampleSets = (query: { q?: string; limit?: number; cursor?: string } = {}): Promise<{ sampleSets: SampleSet[]; nextCursor: string | null }> =>
  call("GET", withQuery("/sample-sets", query));
export const getConstants = (temperature: number): Promise<ConstantsTable> => call("GET", withQuery("/constants", { temperature }));
