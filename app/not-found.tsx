import type { Metadata } from "next";
import { Nowhere } from "@/components/shell/nowhere";
import { Wordmark } from "@/components/ui/wordmark";

export const metadata: Metadata = { title: "Not found" };

export default function NotFound() {
  return (
    <main className="pt-10">
      <div className="mx-auto max-w-md px-5"><Wordmark className="text-2xl" /></div>
      <Nowhere />
    </main>
  );
}
