import type { z } from "zod";
import type { ErrorCode } from "@/lib/errors";
import type { Scope } from "@/lib/schemas/actor";

export type Method = "get" | "post" | "put" | "patch" | "delete";

/** A body or answer: one entry per media type, a schema or `binary` for what JSON Schema cannot describe. */
export type Content = Record<string, z.ZodType | "binary" | "text">;

export interface Header { name: string; description: string; required?: boolean; schema?: Record<string, unknown> }

export interface Answer { description: string; content?: Content; headers?: readonly Header[] }

/** One route as the OpenAPI document shows it. A test compares method, path and scope with the handlers. */
export interface Operation {
  method: Method;
  path: string;
  id: string;
  tag: string;
  summary: string;
  description?: string;
  scope: Scope | "signed-in" | "public";
  query?: z.ZodObject;
  headers?: readonly Header[];
  body?: { description: string; content: Content };
  answers: Record<number, Answer>;
  /** Errors of this operation; those every route can answer with are added by the document. */
  errors: readonly ErrorCode[];
}

export const json = (schema: z.ZodType): Content => ({ "application/json": schema });
export const LOCATION: Header = { name: "Location", description: "Address of what was made" };
export const LINK: Header = { name: "Link", description: "Address of the next page, rel=\"next\"" };
