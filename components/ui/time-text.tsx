"use client";
import { useSyncExternalStore } from "react";

const never = (): (() => void) => () => {};
const FORM = new Intl.DateTimeFormat("en-GB", { year: "numeric", month: "short", day: "2-digit", hour: "2-digit", minute: "2-digit" });

/** An instant in the reader's own time, with the exact one in its title. The server writes UTC, so that both paint the same first. */
export function TimeText({ at, fallback = "–" }: { at: string | null; fallback?: string }) {
  const isClient = useSyncExternalStore(never, () => true, () => false);
  if (at === null) return <>{fallback}</>;
  return <time dateTime={at} title={at} className="whitespace-nowrap">{isClient ? FORM.format(new Date(at)) : at.slice(0, 16).replace("T", " ")}</time>;
}
