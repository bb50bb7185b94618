import type { Metadata } from "next";
import { SpecEditor } from "@/components/spec-editor/spec-editor";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Spec editor" };

export default async function SpecPage() {
  const actor = await requireActor();
  return <SpecEditor me={{ id: actor.userId }} />;
}
