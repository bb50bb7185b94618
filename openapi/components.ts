import { z } from "zod";
import * as api from "@/lib/schemas/api";
import { columnDescriptor } from "@/lib/schemas/columns";
import { jobSpecSchema } from "@/lib/schemas/job-spec";

/** Schemas with a name of their own in the document. Bodies are described as they are sent, answers as they arrive. */
const BODIES: Record<string, z.ZodType> = {
  JobSpec: jobSpecSchema, SampleSetCreate: api.sampleSetCreate, SampleSetVersionCreate: api.sampleSetVersionCreate,
  TokenCreate: api.tokenCreate, UserCreate: api.userCreate, UserPatch: api.userPatch, PasswordSet: api.passwordSet,
};
const ANSWERS: Record<string, z.ZodType> = {
  Problem: api.problem, Issue: api.issue, Job: api.job, JobPage: api.jobPage, JobDryRun: api.jobDryRun, JobEvent: api.jobEvent,
  ResultPage: api.resultPage, SolveResponse: api.solveResponse, ColumnDescriptor: columnDescriptor,
  SampleSet: api.sampleSet, SampleSetPage: api.sampleSetPage, SampleRows: api.sampleRows, SampleFlag: api.sampleFlag,
  Token: api.token, TokenPage: api.tokenPage, TokenCreated: api.tokenCreated, Me: api.me,
  User: api.user, UserPage: api.userPage, UserCreated: api.userCreated, PasswordLink: api.passwordLink, PasswordSetDone: api.passwordSetDone,
  AuditPage: api.auditPage, AuditEvent: api.auditEvent, ConstantsTable: api.constantsTable, ConstantEntry: api.constantEntry, Health: api.health,
};

type JsonObject = Record<string, unknown>;
const address = (name: string): string => `#/components/schemas/${name}`;

function convert(schemas: Record<string, z.ZodType>, io: "input" | "output"): Record<string, JsonObject> {
  const registry = z.registry<{ id?: string }>();
  for (const [name, schema] of Object.entries(schemas)) registry.add(schema, { id: name });
  const { schemas: made } = z.toJSONSchema(registry, { io, uri: address, unrepresentable: "any" });
  return Object.fromEntries(Object.entries(made).map(([name, schema]) => {
    const { $id: _id, $schema: _schema, ...rest } = schema as JsonObject;
    void _id; void _schema;
    // Parts shared inside one schema are addressed as "<schema>#/$defs/…"; inside one document that is a plain path.
    return [name === "__shared" ? `Shared${io === "input" ? "In" : "Out"}` : name,
      JSON.parse(JSON.stringify(rest).replaceAll(/(#\/components\/schemas\/[^"#]+)#\//g, "$1/")
        .replaceAll(`"#/$defs/`, `"${address(name)}/$defs/`)
        .replaceAll(address("__shared"), address(`Shared${io === "input" ? "In" : "Out"}`))) as JsonObject];
  }));
}

/** components.schemas of the document. */
export const componentSchemas = (): Record<string, JsonObject> => ({ ...convert(BODIES, "input"), ...convert(ANSWERS, "output") });

const names = new Map<z.ZodType, string>([...Object.entries(BODIES), ...Object.entries(ANSWERS)].map(([name, schema]) => [schema, name]));

/** A reference to a named schema. Throws for one that has no name: name it above. */
export function schemaReference(schema: z.ZodType): { $ref: string } {
  const name = names.get(schema);
  if (!name) throw new Error("A schema of the OpenAPI document has no name in openapi/components.ts");
  return { $ref: address(name) };
}
