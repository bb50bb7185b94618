import type { z } from "zod";
import type { Issue } from "@/lib/errors";

const pointerOf = (path: readonly PropertyKey[]): string =>
  path.map((part) => "/" + String(part).replaceAll("~", "~0").replaceAll("/", "~1")).join("");

function valueAt(document: unknown, path: readonly PropertyKey[]): string | undefined {
  let at = document;
  for (const part of path) {
    if (at === null || typeof at !== "object" || !Object.hasOwn(at, part)) return undefined;
    at = (at as Record<PropertyKey, unknown>)[part];
  }
  if (at === undefined || (typeof at === "object" && at !== null)) return undefined;
  const text = String(at);
  return text.length > 80 ? text.slice(0, 79) + "…" : text;
}

/** Every fault zod found, each at its place; one issue per unknown key. `hide` keeps values of secrets out. */
export function bodyIssues(error: z.ZodError, document: unknown, hide: readonly string[] = []): Issue[] {
  return error.issues.flatMap((found): Issue[] => {
    if (found.code === "unrecognized_keys") {
      return found.keys.map((key) => ({
        pointer: pointerOf([...found.path, key]), code: "unknown-key", message: `Unknown key ${key}.`, remedy: "Leave it out.",
      }));
    }
    const pointer = pointerOf(found.path);
    const value = hide.includes(pointer) ? undefined : valueAt(document, found.path);
    return [{ pointer, code: found.code.replaceAll("_", "-"), message: found.message, ...(value === undefined ? {} : { value }) }];
  });
}
