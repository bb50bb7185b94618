import type { Metadata } from "next";
import { cache } from "react";
import { SampleSetView } from "@/components/samples/sample-set-view";
import { loadOrNotFound } from "@/lib/http/load-page-data";
import { requireActor } from "@/lib/http/page-auth";
import { canChange } from "@/lib/services/access";
import { getSampleSet } from "@/lib/services/samples/find";

type Params = { params: Promise<{ id: string }> };

/** Once for the title and the page together. */
const load = cache(async (id: string) => {
  const actor = await requireActor(`/samples/${id}`);
  return { actor, set: await loadOrNotFound(getSampleSet(actor, id)) };
});

export async function generateMetadata({ params }: Params): Promise<Metadata> {
  return { title: (await load((await params).id)).set.name };
}

export default async function SampleSetPage({ params }: Params) {
  const { actor, set } = await load((await params).id);
  return <SampleSetView set={set} me={{ id: actor.userId, mayChange: canChange(actor, { ownerId: set.owner.id, visibility: set.visibility }) }} />;
}
