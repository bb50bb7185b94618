import type { Metadata } from "next";
import { ConstantsView } from "@/components/constants/constants-view";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Constants" };

export default async function ConstantsPage() {
  await requireActor("/constants");
  return <ConstantsView />;
}
