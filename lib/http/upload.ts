import { AppError } from "@/lib/errors";
import type { SampleDocument } from "@/lib/services/intake/prepare-samples";
import { DOCUMENT_LIMIT } from "./read-body";
import type { RawBody, RawBodyRule } from "./route";

export const UPLOAD_BODY: RawBodyRule = { types: ["application/json", "text/csv", "multipart/form-data"], maxBytes: DOCUMENT_LIMIT };

interface UploadQuery { name?: string; description: string; visibility: "private" | "team"; note: string }

const stemOf = (fileName: string): string => fileName.replace(/^.*[\\/]/, "").replace(/\.[^.]*$/, "").slice(0, 120);

/** A text field of a form, else what the query said. */
const field = (form: FormData, name: string): string | null => {
  const value = form.get(name);
  return typeof value === "string" && value.trim() !== "" ? value.trim() : null;
};

async function readForm(request: Request, raw: RawBody): Promise<{ form: FormData; file: File }> {
  let form: FormData;
  try {
    form = await new Response(raw.bytes as BodyInit, { headers: { "Content-Type": request.headers.get("content-type") ?? "" } }).formData();
  } catch (error) {
    throw new AppError("bad-request", "The form cannot be read: its parts do not fit the boundary that its Content-Type names.", { cause: error });
  }
  const file = [...form.values()].find((value) => typeof value !== "string");
  if (!file) throw new AppError("bad-request", "The form has no file.", { errors: [{ pointer: "/file", code: "missing", message: "The form has no file.", remedy: "Add the CSV as a file field." }] });
  return { form, file };
}

/** The uploaded document in one shape, whether it came as JSON, as CSV or as a file in a form. */
export async function readUpload(request: Request, raw: RawBody, query: UploadQuery, purpose: SampleDocument["purpose"]): Promise<SampleDocument> {
  const base = { purpose, description: query.description, visibility: query.visibility, note: query.note, rawName: null };
  if (raw.type === "application/json") return { ...base, format: "json", bytes: raw.bytes, name: null };
  if (raw.type === "text/csv") return { ...base, format: "csv", bytes: raw.bytes, name: query.name ?? null };
  const { form, file } = await readForm(request, raw);
  const visibility = field(form, "visibility") ?? query.visibility;
  if (visibility !== "team" && visibility !== "private") throw new AppError("bad-request", `visibility is ${visibility.slice(0, 40)}; write team or private.`);
  return {
    ...base, visibility, format: file.name.toLowerCase().endsWith(".json") ? "json" : "csv", bytes: new Uint8Array(await file.arrayBuffer()),
    name: (query.name ?? field(form, "name") ?? (stemOf(file.name) || null))?.slice(0, 120) ?? null,
    description: field(form, "description")?.slice(0, 2000) ?? query.description, note: field(form, "note")?.slice(0, 500) ?? query.note,
    rawName: file.name.slice(0, 200),
  };
}
