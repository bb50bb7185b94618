import Link from "next/link";
import { Wordmark } from "@/components/ui/wordmark";

export default function NotFound() {
  return (
    <main className="mx-auto flex min-h-dvh max-w-md flex-col justify-center gap-4 px-5">
      <Wordmark className="text-2xl" />
      <h1 className="text-lg">Nothing stands at this address.</h1>
      <p className="text-sm text-dim">It may have been deleted, or belong to somebody who keeps it private.</p>
      <p className="text-sm"><Link href="/" className="text-accent underline underline-offset-4">To the console</Link></p>
    </main>
  );
}
