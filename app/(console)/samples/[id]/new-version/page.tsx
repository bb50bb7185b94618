import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { UploadForm } from "@/components/samples/upload-form";
import { AppError } from "@/lib/errors";
import { requireActor } from "@/lib/http/page-auth";
import { getSampleSet } from "@/lib/services/samples/find";

export const metadata: Metadata = { title: "New version" };

export default async function NewVersionPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requireActor();
  const set = await getSampleSet(actor, (await params).id).catch((error: unknown) => {
    if (error instanceof AppError && error.code === "not-found") notFound();
    throw error;
  });
  return <UploadForm set={{ id: set.id, name: set.name, version: set.version }} />;
}
