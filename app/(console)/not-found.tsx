import type { Metadata } from "next";
import { Nowhere } from "@/components/shell/nowhere";

export const metadata: Metadata = { title: "Not found" };

/** A job or a sample set that is not there, inside the frame of the signed-in pages. */
export default function NotFound() {
  return <Nowhere />;
}
