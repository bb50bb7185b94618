/** Calls about sample sets. */
import type { SampleRows, SampleSet } from "@/lib/schemas/api";
import { call, ROOT, withQuery } from "./api";
import { errorOf } from "./errors";

export const getSampleSet = (id: string): Promise<SampleSet> => call("GET", `${ROOT}/sample-sets/${id}`);
export const getSampleRows = (id: string, query: { version?: number; limit?: number; firstRow?: number }): Promise<SampleRows> => call("GET", withQuery(`/sample-sets/${id}/rows`, query));
export const deleteSampleSet = (id: string): Promise<unknown> => call("DELETE", `${ROOT}/sample-sets/${id}`);

export interface Upload { name: string; description: string; visibility: "private" | "team"; note: string; file: File }

/** Sends a CSV or JSON file, as a new set or as the next version of one. @throws ApiError with every fault at its place. */
export async function uploadSamples(upload: Upload, setId: string | null): Promise<SampleSet> {
  // Browsers hold a chosen file as it was; one that was written to since cannot be read any more, which fetch would call a failed network.
  const file = await upload.file.arrayBuffer().then((bytes) => new File([bytes], upload.file.name), () => { throw new Error("The file was changed or moved after it was chosen; choose it again."); });
  const form = new FormData();
  for (const key of ["name", "description", "visibility", "note"] as const) form.set(key, upload[key]);
  form.set("file", file);
  const response = await fetch(setId ? `${ROOT}/sample-sets/${setId}/versions` : `${ROOT}/sample-sets`, { method: "POST", body: form, headers: { Accept: "application/json" } });
  if (!response.ok) throw await errorOf(response);
  return (await response.json()) as SampleSet;
}
