"use client";
import { useRouter } from "next/navigation";
import { startTransition, useEffect, useRef } from "react";
import { Button } from "@/components/ui/button";

/** What stands in the place of a page that failed. What was typed in the console or the editor is kept in the browser. */
export function Failure({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  const router = useRouter();
  const again = useRef<HTMLButtonElement>(null);
  useEffect(() => again.current?.focus(), []);
  // The server's part is asked for again first: resetting alone would show the same failed answer once more.
  const retry = (): void => startTransition(() => { router.refresh(); reset(); });
  return (
    <div role="alert" className="mx-auto flex min-h-[60vh] max-w-md flex-col justify-center gap-4 px-5">
      <h1 className="text-lg font-semibold">This page failed.</h1>
      <p className="text-sm text-dim">Something went wrong on our side; nothing that is stored was touched.{error.digest ? ` Reference ${error.digest}.` : ""}</p>
      <div><Button kind="primary" buttonRef={again} onClick={retry}>Try again</Button></div>
    </div>
  );
}
