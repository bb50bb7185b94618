import { sampleRows, sampleRowsQuery, sampleSet, sampleSetCreate, sampleSetListQuery, sampleSetPage, sampleSetVersionCreate, sampleUploadQuery } from "@/lib/schemas/api";
import { type Content, json, LINK, LOCATION, type Operation } from "../operation";

const CSV = "CSV (comma, semicolon or tab; decimal comma where that fits; headers such as `Ca (mg/L)`, `NO3-N (mg/L)`, `Alkalinity as CaCO3 (mg/L)`; `<0.05` for values below the limit) or the same as a file in a form";
const uploads = (schema: Parameters<typeof json>[0]): Content => ({ ...json(schema), "text/csv": "text", "multipart/form-data": "binary" });
const UPLOAD_ERRORS = ["bad-request", "too-large", "unsupported-media-type", "invalid-samples"] as const;

export const sampleSetOperations: Operation[] = [
  {
    method: "get", path: "/sample-sets", id: "listSampleSets", tag: "Sample sets", scope: "samples:read", summary: "Sample sets, newest first", query: sampleSetListQuery,
    answers: { 200: { description: "A page of sample sets", content: json(sampleSetPage), headers: [LINK] } }, errors: ["bad-request"],
  },
  {
    method: "post", path: "/sample-sets", id: "createSampleSet", tag: "Sample sets", scope: "samples:write", summary: "Store waters as a sample set",
    description: `JSON, ${CSV}. Faults refuse the whole document, all at once; findings of the checks (ion balance, duplicates, impossible values) become flags and alter nothing. The upload itself is kept.`,
    query: sampleUploadQuery, body: { description: "The waters, at most 50 MiB", content: uploads(sampleSetCreate) },
    answers: { 201: { description: "The sample set", content: json(sampleSet), headers: [LOCATION] } }, errors: UPLOAD_ERRORS,
  },
  {
    method: "get", path: "/sample-sets/{id}", id: "getSampleSet", tag: "Sample sets", scope: "samples:read", summary: "A sample set at its latest version",
    answers: { 200: { description: "The sample set", content: json(sampleSet) }, 304: { description: "Nothing has changed" } }, errors: ["not-found"],
  },
  {
    method: "delete", path: "/sample-sets/{id}", id: "deleteSampleSet", tag: "Sample sets", scope: "samples:write", summary: "Delete a sample set",
    description: "It leaves every list; jobs that used it keep their results and can still be retried.",
    answers: { 204: { description: "Deleted" } }, errors: ["not-found"],
  },
  {
    method: "get", path: "/sample-sets/{id}/rows", id: "getSampleSetRows", tag: "Sample sets", scope: "samples:read", summary: "Waters of a version, in pages, with their flags", query: sampleRowsQuery,
    answers: { 200: { description: "A page of waters", content: json(sampleRows), headers: [LINK] } }, errors: ["bad-request", "not-found"],
  },
  {
    method: "post", path: "/sample-sets/{id}/versions", id: "addSampleSetVersion", tag: "Sample sets", scope: "samples:write", summary: "Store a new version of a sample set",
    description: "Earlier versions stay as they are; a spec names one as `set_…@3`.",
    query: sampleUploadQuery, body: { description: "The waters, at most 50 MiB", content: uploads(sampleSetVersionCreate) },
    answers: { 201: { description: "The sample set at its new version", content: json(sampleSet), headers: [LOCATION] } }, errors: ["not-found", ...UPLOAD_ERRORS],
  },
];
