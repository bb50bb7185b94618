import { job, jobCreateQuery, jobDryRun, jobListQuery, jobPage, resultPage, resultsQuery, solveResponse } from "@/lib/schemas/api";
import { jobSpecSchema } from "@/lib/schemas/job-spec";
import { json, LINK, LOCATION, type Operation } from "../operation";

const SPEC_BODY = { description: "The job spec, at most 50 MiB", content: json(jobSpecSchema) };
const ETAG = { name: "ETag", description: "Fingerprint of the content, for If-None-Match" };
const IF_NONE_MATCH = { name: "If-None-Match", description: "ETag of the copy at hand; answered 304 while nothing has changed" };
const LAST_EVENT_ID = { name: "Last-Event-ID", description: "`id:` of the last event received; the stream goes on after it" };
const ROW_COUNT = { name: "Tufa-Row-Count", description: "Rows under the present `where`", schema: { type: "integer" } };
const EVENTS = "One `data:` line of JSON (JobEvent) per event, `id:` for resuming, comment lines as keep-alive. Ends within 5 s of the token being revoked.";

export const jobOperations: Operation[] = [
  {
    method: "post", path: "/solve", id: "solve", tag: "Jobs", scope: "jobs:write", summary: "Solve a small spec within the request",
    description: "Up to 500 result rows; nothing is stored. A spec over a sample set also needs the scope samples:read.",
    body: SPEC_BODY, answers: { 200: { description: "Rows, solved", content: json(solveResponse) } },
    errors: ["bad-request", "too-large", "unsupported-media-type", "invalid-spec"],
  },
  {
    method: "get", path: "/jobs", id: "listJobs", tag: "Jobs", scope: "jobs:read", summary: "Jobs, newest first", query: jobListQuery,
    answers: { 200: { description: "A page of jobs", content: json(jobPage), headers: [LINK] } }, errors: ["bad-request"],
  },
  {
    method: "post", path: "/jobs", id: "createJob", tag: "Jobs", scope: "jobs:write", summary: "Submit a job",
    description: "All faults of the spec are answered at once. With an Idempotency-Key a repeated request gets the first answer for 24 hours (`Idempotency-Replayed: true`); the same key with other content is 422, while the first is under way 409. A spec over a sample set also needs the scope samples:read; the set's version is pinned now.",
    query: jobCreateQuery, body: SPEC_BODY,
    headers: [
      { name: "Idempotency-Key", description: "1 to 255 printable ASCII characters of the client's own choice" },
      { name: "Prefer", description: "`wait` or `wait=N`: wait up to 60 s and answer with the finished job" },
    ],
    answers: {
      200: { description: "With `dry=true`: what the spec would do; nothing is stored", content: json(jobDryRun) },
      201: { description: "The job", content: json(job), headers: [LOCATION, { name: "Idempotency-Replayed", description: "`true` when this is the stored first answer" }, { name: "Preference-Applied", description: "The wait that was applied" }] },
    },
    errors: ["bad-request", "conflict", "too-large", "unsupported-media-type", "invalid-spec", "idempotency-mismatch", "backlog-full"],
  },
  {
    method: "get", path: "/jobs/{id}", id: "getJob", tag: "Jobs", scope: "jobs:read", summary: "A job, its counts and its place in the queue",
    headers: [IF_NONE_MATCH],
    answers: { 200: { description: "The job", content: json(job), headers: [ETAG] }, 304: { description: "Nothing has changed" } }, errors: ["not-found"],
  },
  {
    method: "get", path: "/jobs/{id}/spec", id: "getJobSpec", tag: "Jobs", scope: "jobs:read", summary: "The spec of a job",
    answers: { 200: { description: "The spec as submitted", content: json(jobSpecSchema), headers: [{ name: "Tufa-Spec-Hash", description: "SHA-256 of the canonical spec" }] } }, errors: ["not-found"],
  },
  {
    method: "post", path: "/jobs/{id}/cancel", id: "cancelJob", tag: "Jobs", scope: "jobs:write", summary: "Cancel a job",
    description: "Takes effect within 2 s; rows stored so far are kept.",
    answers: { 200: { description: "The job", content: json(job) } }, errors: ["not-found", "conflict"],
  },
  {
    method: "post", path: "/jobs/{id}/retry", id: "retryJob", tag: "Jobs", scope: "jobs:write", summary: "Take up the failed or cancelled part of a job again",
    answers: { 200: { description: "The job", content: json(job) } }, errors: ["not-found", "conflict"],
  },
  {
    method: "get", path: "/jobs/{id}/results", id: "getJobResults", tag: "Results", scope: "jobs:read", summary: "Rows of a job, as pages or as one stream",
    description: "JSON comes in pages; NDJSON, CSV and Arrow stream the whole ordering, also while the job runs. `where` repeats and is ANDed. Calculated values are estimates under the job's stated assumptions; confirm by measurement before acting on them.",
    query: resultsQuery,
    answers: {
      200: {
        description: "Rows", headers: [ROW_COUNT, LINK, { name: "Content-Disposition", description: "File name of a download" }],
        content: { "application/json": resultPage, "application/x-ndjson": "text", "text/csv": "text", "application/vnd.apache.arrow.stream": "binary" },
      },
    },
    errors: ["bad-request", "not-found", "not-acceptable", "conflict"],
  },
  {
    method: "get", path: "/jobs/{id}/events", id: "getJobEvents", tag: "Results", scope: "jobs:read", summary: "Events of a job as they happen (server-sent events)",
    description: EVENTS, headers: [LAST_EVENT_ID], answers: { 200: { description: "Event stream", content: { "text/event-stream": "text" } } }, errors: ["not-found"],
  },
  {
    method: "get", path: "/events", id: "getEvents", tag: "Results", scope: "jobs:read", summary: "Events of all your jobs in one stream (server-sent events)",
    description: EVENTS, headers: [LAST_EVENT_ID], answers: { 200: { description: "Event stream", content: { "text/event-stream": "text" } } }, errors: [],
  },
];
