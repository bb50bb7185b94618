import { AppError } from "@/lib/errors";
import { findJsonFault } from "./json-fault";

/** Nesting beyond this is nothing any document of ours needs, and would overflow whatever walks it. */
const MAX_DEPTH = 64;

/** Throws `bad-request` where brackets nest deeper than 64, at a cost of one look per byte. */
function requireShallow(bytes: Uint8Array): void {
  let depth = 0;
  let inText = false;
  for (let i = 0; i < bytes.length; i++) {
    const byte = bytes[i];
    if (inText) {
      if (byte === 0x5c) i++;
      else if (byte === 0x22) inText = false;
    } else if (byte === 0x22) inText = true;
    else if (byte === 0x7b || byte === 0x5b) {
      if (++depth > MAX_DEPTH) {
        throw new AppError("bad-request", `The JSON nests deeper than ${MAX_DEPTH} levels, at byte ${i}.`, {
          errors: [{ pointer: "", code: "too-deep", message: `Brackets nest deeper than ${MAX_DEPTH} levels at byte ${i}.`, remedy: "Flatten the document." }],
        });
      }
    } else if (byte === 0x7d || byte === 0x5d) depth--;
  }
}

/**
 * A JSON document from UTF-8 bytes. Throws `bad-request` naming line, column and JSON Pointer of the first fault of
 * syntax, or that the bytes are no UTF-8, or that the document nests too deep.
 */
export function parseJson(bytes: Uint8Array): unknown {
  requireShallow(bytes);
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw new AppError("bad-request", "The body is not UTF-8 text.", {
      errors: [{ pointer: "", code: "not-utf-8", message: "The body is not UTF-8 text.", remedy: "Encode it as UTF-8." }],
    });
  }
  try {
    return JSON.parse(text);
  } catch (error) {
    const fault = findJsonFault(text);
    const message = `The body is not JSON: ${fault.message} at line ${fault.line}, column ${fault.column}.`;
    throw new AppError("bad-request", message, {
      cause: error,
      errors: [{ pointer: fault.pointer, code: "json-syntax", message, ...(fault.near ? { value: fault.near } : {}) }],
    });
  }
}
