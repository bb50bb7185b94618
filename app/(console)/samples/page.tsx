import type { Metadata } from "next";
import { SampleSetList } from "@/components/samples/sample-set-list";

export const metadata: Metadata = { title: "Sample sets" };

export default function SamplesPage() {
  return <SampleSetList />;
}
