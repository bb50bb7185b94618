"use client";
import { useMemo, useSyncExternalStore } from "react";
import { keycaps, onApple } from "./keys";

const never = (): (() => void) => () => {};

/** The keycaps of a combo; "Ctrl" or "⌘" as the machine has it, decided after hydration. */
export function useKeycaps(combo: string): string[] {
  const isApple = useSyncExternalStore(never, onApple, () => false);
  return useMemo(() => keycaps(combo, isApple), [combo, isApple]);
}
