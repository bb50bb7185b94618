import type { Metadata } from "next";
import { SpecEditor } from "@/components/spec-editor/spec-editor";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Spec editor" };

export default async function SpecPage() {
  const actor = await requireActor("/spec");
  return <><h1 className="sr-only">Spec editor</h1><SpecEditor me={{ id: actor.userId }} /></>;
}
