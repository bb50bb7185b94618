import { constantsQuery, constantsTable, health } from "@/lib/schemas/api";
import { json, type Operation } from "../operation";

export const referenceOperations: Operation[] = [
  {
    method: "get", path: "/constants", id: "listConstants", tag: "Reference", scope: "signed-in", summary: "Species and solids with log K and sources", query: constantsQuery,
    answers: { 200: { description: "The constants set", content: json(constantsTable) }, 304: { description: "Nothing has changed" } }, errors: ["bad-request"],
  },
  {
    method: "get", path: "/health", id: "getHealth", tag: "Reference", scope: "public", summary: "Database, workers, versions",
    answers: { 200: { description: "In working order, or degraded (no worker)", content: json(health) }, 503: { description: "The database does not answer", content: json(health) } }, errors: [],
  },
  {
    method: "get", path: "/openapi.json", id: "getOpenApi", tag: "Reference", scope: "public", summary: "This document",
    answers: { 200: { description: "OpenAPI 3.1", content: { "application/openapi+json;version=3.1": "text" } } }, errors: [],
  },
];
