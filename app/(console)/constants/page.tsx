import type { Metadata } from "next";
import { ConstantsView } from "@/components/constants/constants-view";

export const metadata: Metadata = { title: "Constants" };

export default function ConstantsPage() {
  return <ConstantsView />;
}
