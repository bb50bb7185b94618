import { AppError } from "@/lib/errors";

export const MEBIBYTE = 1024 * 1024;
/** Limit of ordinary bodies. */
export const BODY_LIMIT = MEBIBYTE;
/** Limit of job specs and sample uploads. */
export const DOCUMENT_LIMIT = 50 * MEBIBYTE;

function tooLarge(limit: number): AppError {
  const size = limit >= MEBIBYTE ? `${limit / MEBIBYTE} MiB` : `${limit / 1024} KiB`;
  const remedy = limit === DOCUMENT_LIMIT ? " Store the waters as a sample set and refer to it, or split the document." : "";
  return new AppError("too-large", `The body is larger than ${size}.${remedy}`);
}

/** Media type of a request without its parameters, lower case; "" when there is none. */
export const mediaTypeOf = (request: Request): string =>
  (request.headers.get("content-type") ?? "").split(";")[0].trim().toLowerCase();

/** Throws `unsupported-media-type` unless the body is of one of the types and uncompressed. */
export function requireMediaType(request: Request, types: readonly string[]): string {
  const type = mediaTypeOf(request);
  if (!types.includes(type)) {
    throw new AppError("unsupported-media-type", `Content-Type is ${type || "missing"}; taken here: ${types.join(", ")}.`);
  }
  const encoding = request.headers.get("content-encoding");
  // A small compressed body may unfold into a huge one before any limit can act.
  if (encoding && encoding !== "identity") {
    throw new AppError("unsupported-media-type", `Content-Encoding ${encoding} is not taken; send the body as it is.`);
  }
  return type;
}

/** The body's bytes, counted while they come in, so that no more than `limit` is ever held. */
export async function readBody(request: Request, limit: number): Promise<Uint8Array> {
  const announced = Number(request.headers.get("content-length") ?? 0);
  if (announced > limit) throw tooLarge(limit);
  if (!request.body) return new Uint8Array(0);
  const parts: Uint8Array[] = [];
  let size = 0;
  const reader = request.body.getReader();
  try {
    for (;;) {
      const { done, value } = await reader.read();
      if (done) break;
      size += value.byteLength;
      if (size > limit) {
        await reader.cancel().catch(() => {});
        throw tooLarge(limit);
      }
      parts.push(value);
    }
  } catch (error) {
    if (error instanceof AppError) throw error;
    throw new AppError("bad-request", "The body broke off before its end.", { cause: error });
  }
  const bytes = new Uint8Array(size);
  let at = 0;
  for (const part of parts) {
    bytes.set(part, at);
    at += part.byteLength;
  }
  return bytes;
}
