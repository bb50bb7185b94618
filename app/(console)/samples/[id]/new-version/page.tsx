import type { Metadata } from "next";
import { UploadForm } from "@/components/samples/upload-form";
import { loadOrNotFound } from "@/lib/http/load-page-data";
import { requireActor } from "@/lib/http/page-auth";
import { getSampleSet } from "@/lib/services/samples/find";

export const metadata: Metadata = { title: "New version" };

export default async function NewVersionPage({ params }: { params: Promise<{ id: string }> }) {
  const { id } = await params;
  const actor = await requireActor(`/samples/${id}/new-version`);
  const set = await loadOrNotFound(getSampleSet(actor, id));
  return <UploadForm set={{ id: set.id, name: set.name, version: set.version }} />;
}
