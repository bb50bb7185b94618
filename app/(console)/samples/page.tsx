import type { Metadata } from "next";
import { SampleSetList } from "@/components/samples/sample-set-list";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Sample sets" };

export default async function SamplesPage() {
  await requireActor("/samples");
  return <SampleSetList />;
}
