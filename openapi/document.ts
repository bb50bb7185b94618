/** The OpenAPI 3.1 document, built from the zod schemas that the routes validate with. */
import type * as oas31 from "openapi3-ts/oas31";
import { OpenApiBuilder } from "openapi3-ts/oas31";
import { z } from "zod";
import { type ErrorCode, ERRORS } from "@/lib/errors";
import { SCOPES } from "@/lib/schemas/actor";
import { componentSchemas, schemaReference } from "./components";
import type { Answer, Content, Header, Operation } from "./operation";
import { accountOperations } from "./paths/accounts";
import { jobOperations } from "./paths/jobs";
import { referenceOperations } from "./paths/reference";
import { sampleSetOperations } from "./paths/sample-sets";

export const OPERATIONS: readonly Operation[] = [...jobOperations, ...sampleSetOperations, ...accountOperations, ...referenceOperations];

/** What every route may answer, whatever it does. */
const COMMON_ERRORS: readonly ErrorCode[] = ["rate-limited", "internal", "unavailable"];
const PROBLEM = "application/problem+json";

function contentObject(content: Content): oas31.ContentObject {
  return Object.fromEntries(Object.entries(content).map(([type, schema]) => [type, {
    schema: schema === "binary" ? { type: "string", format: "binary" } : schema === "text" ? { type: "string" } : schemaReference(schema),
  }]));
}

const headerObject = (header: Header): oas31.HeaderObject => ({ description: header.description, schema: header.schema ?? { type: "string" } });

function answerObject(answer: Answer): oas31.ResponseObject {
  const headers = [{ name: "Request-Id", description: "Id of the request, the client's own where it sent one" }, ...(answer.headers ?? [])];
  return {
    description: answer.description, headers: Object.fromEntries(headers.map((each) => [each.name, headerObject(each)])),
    ...(answer.content ? { content: contentObject(answer.content) } : {}),
  };
}

/** Error responses by status; several codes of one status share a response that names them. */
function errorObjects(operation: Operation): Record<string, oas31.ResponseObject> {
  const codes = new Set<ErrorCode>([...operation.errors, ...COMMON_ERRORS]);
  if (operation.scope !== "public") codes.add("unauthenticated").add("forbidden");
  const byStatus = new Map<number, ErrorCode[]>();
  for (const code of codes) byStatus.set(ERRORS[code].status, [...(byStatus.get(ERRORS[code].status) ?? []), code]);
  return Object.fromEntries([...byStatus].sort(([a], [b]) => a - b).map(([status, list]) => [String(status), {
    description: list.map((code) => `${code}: ${ERRORS[code].title}`).join("; "),
    headers: { "Request-Id": headerObject({ name: "Request-Id", description: "Id of the request" }) },
    content: { [PROBLEM]: { schema: { $ref: "#/components/schemas/Problem" } } },
  }]));
}

function parameterObjects(operation: Operation): oas31.ParameterObject[] {
  const inPath = [...operation.path.matchAll(/\{(\w+)\}/g)].map(([, name]): oas31.ParameterObject => ({ name, in: "path", required: true, schema: { type: "string" } }));
  const shape = operation.query ? (z.toJSONSchema(operation.query, { io: "input", unrepresentable: "any" }) as { properties?: Record<string, oas31.SchemaObject>; required?: string[] }) : {};
  const inQuery = Object.entries(shape.properties ?? {}).map(([name, schema]): oas31.ParameterObject => {
    const { description, ...rest } = schema;
    return { name, in: "query", required: shape.required?.includes(name) ?? false, ...(description ? { description } : {}), schema: rest };
  });
  const inHeader = (operation.headers ?? []).map((header): oas31.ParameterObject => ({
    name: header.name, in: "header", required: header.required ?? false, description: header.description, schema: header.schema ?? { type: "string" },
  }));
  return [...inPath, ...inQuery, ...inHeader];
}

function operationObject(operation: Operation): oas31.OperationObject {
  const scopes = (SCOPES as readonly string[]).includes(operation.scope) ? [operation.scope] : [];
  const parameters = parameterObjects(operation);
  const needs = scopes.length > 0 ? `Needs the scope ${scopes[0]}.` : operation.scope === "public" ? "Needs no account." : "Needs any valid credential.";
  return {
    operationId: operation.id, tags: [operation.tag], summary: operation.summary,
    description: operation.description ? `${operation.description} ${needs}` : needs,
    security: operation.scope === "public" ? [] : [{ bearer: scopes }, { session: scopes }],
    ...(parameters.length > 0 ? { parameters } : {}),
    ...(operation.body ? { requestBody: { required: true, description: operation.body.description, content: contentObject(operation.body.content) } } : {}),
    responses: { ...Object.fromEntries(Object.entries(operation.answers).map(([status, answer]) => [status, answerObject(answer)])), ...errorObjects(operation) },
  };
}

/** Builds the document. */
export function buildDocument(): oas31.OpenAPIObject {
  const builder = OpenApiBuilder.create()
    .addOpenApiVersion("3.1.0")
    .addInfo({
      title: "Tufa API", version: "1",
      description: "Speciation batch jobs on water analyses. Every error is a problem document (RFC 9457) whose `type` names one of the codes below; times are RFC 3339 UTC. Calculated values are estimates under stated assumptions: confirm by measurement; local codes and licensed practice decide.",
    })
    .addServer({ url: "/api/v1" })
    .addSecurityScheme("bearer", { type: "http", scheme: "bearer", bearerFormat: "tufa_ + 36 base62 characters", description: "An API token" })
    .addSecurityScheme("session", { type: "apiKey", in: "cookie", name: "tufa-session", description: "The browser's session; its cookie's name ends in a mark of the installation. Writes need an Origin of the same host." });
  for (const name of [...new Set(OPERATIONS.map((each) => each.tag))]) builder.addTag({ name });
  for (const [name, schema] of Object.entries(componentSchemas())) builder.addSchema(name, schema as oas31.SchemaObject);
  for (const operation of OPERATIONS) builder.addPath(operation.path, { [operation.method]: operationObject(operation) });
  return builder.getSpec();
}

let text: string | undefined;

/** The document as JSON, built at first use. */
export const openApiJson = (): string => (text ??= JSON.stringify(buildDocument(), null, 1));
