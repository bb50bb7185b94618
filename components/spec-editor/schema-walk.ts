/** Finding one's way in the job spec's JSON Schema (draft 7): what may stand at a path. */

export interface Schema {
  $ref?: string;
  definitions?: Record<string, Schema>;
  $defs?: Record<string, Schema>;
  type?: string | string[];
  properties?: Record<string, Schema>;
  additionalProperties?: Schema | boolean;
  propertyNames?: Schema;
  items?: Schema | Schema[];
  anyOf?: Schema[];
  oneOf?: Schema[];
  allOf?: Schema[];
  enum?: unknown[];
  const?: unknown;
  required?: string[];
  description?: string;
  title?: string;
  default?: unknown;
  examples?: unknown[];
  minimum?: number;
  maximum?: number;
  exclusiveMinimum?: number;
}

/** Every plain alternative of a schema: references followed, anyOf/oneOf/allOf opened. */
export function alternatives(schema: Schema, root: Schema, depth = 0): Schema[] {
  if (depth > 12) return [];
  if (schema.$ref) {
    const target = followReference(schema.$ref, root);
    return target ? alternatives(schema.description ? { ...target, description: schema.description } : target, root, depth + 1) : [];
  }
  const inner = [...(schema.anyOf ?? []), ...(schema.oneOf ?? []), ...(schema.allOf ?? [])];
  if (inner.length === 0) return [schema];
  const opened = inner.flatMap((each) => alternatives(each, root, depth + 1));
  const { anyOf: _any, oneOf: _one, allOf: _all, ...own } = schema;
  return own.properties || own.enum || own.const !== undefined ? [own, ...opened] : opened.map((each) => ({ ...each, description: each.description ?? own.description }));
}

function followReference(reference: string, root: Schema): Schema | null {
  let here: unknown = root;
  for (const key of reference.replace(/^#\/?/, "").split("/").filter(Boolean)) {
    here = (here as Record<string, unknown> | undefined)?.[decodeURIComponent(key).replaceAll("~1", "/").replaceAll("~0", "~")];
  }
  return (here as Schema | undefined) ?? null;
}

/** The schemas that may describe the value at a path; several where the schema leaves a choice. */
export function schemasAt(root: Schema, path: readonly string[]): Schema[] {
  let here = alternatives(root, root);
  for (const key of path) {
    here = here.flatMap((schema) => {
      const own = schema.properties?.[key];
      if (own) return alternatives(own, root);
      if (/^\d+$/.test(key) && schema.items) return alternatives(Array.isArray(schema.items) ? schema.items[Number(key)] ?? {} : schema.items, root);
      if (typeof schema.additionalProperties === "object") return alternatives(schema.additionalProperties, root);
      return [];
    });
  }
  return here;
}

export interface KeyOption { name: string; schema: Schema; isRequired: boolean }

/** Keys an object at the path may have, those of closed lists of names included. */
export function keysAt(root: Schema, path: readonly string[]): KeyOption[] {
  const found = new Map<string, KeyOption>();
  for (const schema of schemasAt(root, path)) {
    for (const [name, each] of Object.entries(schema.properties ?? {})) {
      if (!found.has(name)) found.set(name, { name, schema: each, isRequired: schema.required?.includes(name) ?? false });
    }
    const names = schema.propertyNames ? alternatives(schema.propertyNames, root).flatMap((each) => each.enum ?? []) : [];
    for (const name of names) {
      if (typeof name === "string" && !found.has(name)) found.set(name, { name, schema: typeof schema.additionalProperties === "object" ? schema.additionalProperties : {}, isRequired: false });
    }
  }
  return [...found.values()];
}

/** Values that the schema names at the path: enumerations, constants, booleans, defaults and examples. */
export function valuesAt(root: Schema, path: readonly string[]): { value: unknown; detail: string }[] {
  const found = new Map<string, { value: unknown; detail: string }>();
  const put = (value: unknown, detail: string): void => {
    const key = JSON.stringify(value);
    if (!found.has(key)) found.set(key, { value, detail });
  };
  for (const schema of schemasAt(root, path)) {
    for (const value of schema.enum ?? []) put(value, "");
    if (schema.const !== undefined) put(schema.const, "");
    if (schema.type === "boolean") for (const value of [true, false]) put(value, "");
    for (const value of schema.examples ?? []) put(value, "for example");
    if (schema.default !== undefined) put(schema.default, "default");
  }
  return [...found.values()];
}

/** A skeleton for the value of a key: what to put behind the colon, with the caret's place marked by `${}`. */
export function skeletonFor(schema: Schema, root: Schema): string {
  const plain = alternatives(schema, root);
  const types = new Set(plain.flatMap((each) => each.type ?? []));
  const fixed = plain.find((each) => each.const !== undefined)?.const;
  if (plain.length === 1 && fixed !== undefined) return JSON.stringify(fixed);
  if (types.has("array")) return "[${}]";
  if (types.has("object") && !types.has("string") && !types.has("number")) return "{ ${} }";
  if (types.has("string") && !types.has("number") && !types.has("integer")) return "\"${}\"";
  return "${}";
}

/** One line on the type: "number 0 to 90", "one of davies, ideal …". */
export function typeLine(schemas: readonly Schema[]): string {
  const parts = schemas.map((schema) => {
    if (schema.const !== undefined) return JSON.stringify(schema.const);
    if (schema.enum) return schema.enum.map((each) => (typeof each === "string" ? each : JSON.stringify(each))).slice(0, 12).join(" · ") + (schema.enum.length > 12 ? " …" : "");
    const type = Array.isArray(schema.type) ? schema.type.join(" or ") : schema.type ?? "anything";
    const low = schema.minimum ?? schema.exclusiveMinimum;
    return type + (low !== undefined && Math.abs(low) < 1e9 ? ` from ${low}` : "") + (schema.maximum !== undefined && Math.abs(schema.maximum) < 1e9 ? ` to ${schema.maximum}` : "");
  });
  return [...new Set(parts)].join(", or ");
}
