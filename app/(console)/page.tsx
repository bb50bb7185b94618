import type { Metadata } from "next";
import { Console } from "@/components/console/console";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Console" };

export default async function ConsolePage() {
  const actor = await requireActor("/");
  return <Console me={{ id: actor.userId, role: actor.role }} />;
}
