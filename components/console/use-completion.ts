"use client";
import { useCallback, useState } from "react";
import type { LineCompletion } from "@/lib/commands/read-line";

export interface OpenList extends LineCompletion { active: number }

/** The list that Tab opens: which options, which one is active. */
export function useCompletion() {
  const [list, setList] = useState<OpenList | null>(null);
  const close = useCallback(() => setList(null), []);
  const open = useCallback((completion: LineCompletion, active = 0) => setList(completion.options.length > 0 ? { ...completion, active } : null), []);
  const move = useCallback((step: number) => setList((now) => now && { ...now, active: (now.active + step + now.options.length) % now.options.length }), []);
  return { list, open, close, move };
}

/** The longest beginning that all options share; what Tab may put in without asking. */
export function sharedBeginning(options: readonly { insert: string }[]): string {
  if (options.length === 0) return "";
  let shared = options[0].insert;
  for (const { insert } of options) {
    let length = 0;
    while (length < shared.length && length < insert.length && shared[length].toLowerCase() === insert[length].toLowerCase()) length++;
    shared = shared.slice(0, length);
  }
  return shared;
}
