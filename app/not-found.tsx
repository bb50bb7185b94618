import type { Metadata } from "next";
import { Nowhere } from "@/components/shell/nowhere";
import { Wordmark } from "@/components/ui/wordmark";

export const metadata: Metadata = { title: "Not found" };

export default function NotFound() {
  return <main className="px-5 pt-10"><Wordmark className="mx-auto flex max-w-md px-5 text-2xl" /><Nowhere /></main>;
}
