import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { SampleSetView } from "@/components/samples/sample-set-view";
import { AppError } from "@/lib/errors";
import { requireActor } from "@/lib/http/page-auth";
import { canChange } from "@/lib/services/access";
import { getSampleSet } from "@/lib/services/samples/find";

export const metadata: Metadata = { title: "Sample set" };

export default async function SampleSetPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requireActor();
  const set = await getSampleSet(actor, (await params).id).catch((error: unknown) => {
    if (error instanceof AppError && error.code === "not-found") notFound();
    throw error;
  });
  return <SampleSetView set={set} me={{ id: actor.userId, mayChange: canChange(actor, { ownerId: set.owner.id, visibility: set.visibility }) }} />;
}
