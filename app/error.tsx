"use client";
import { Button } from "@/components/ui/button";

/** A page that failed. What was typed elsewhere is kept in the browser. */
export default function ErrorPage({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <main role="alert" className="mx-auto flex min-h-[60vh] max-w-md flex-col justify-center gap-4 px-5">
      <h1 className="text-lg">This page failed.</h1>
      <p className="text-sm text-dim">Something went wrong on our side; nothing that is stored was touched.{error.digest ? ` Reference ${error.digest}.` : ""}</p>
      <div><Button kind="primary" onClick={reset}>Try again</Button></div>
    </main>
  );
}
