"use client";
import { useCallback, useMemo, useRef } from "react";

export interface Recall {
  /** One line back (+1) or forward (−1); the line being written waits at the end. */
  step(by: 1 | -1): void;
  /** Ends the walk: the next step back begins at the newest line. */
  reset(): void;
  isBack(): boolean;
}

/** Walking through the lines typed before. `current` reads the field, `put` fills it. */
export function useRecall(history: readonly string[], current: () => string, put: (line: string) => void): Recall {
  const back = useRef(0);
  const draft = useRef("");
  const step = useCallback((by: 1 | -1) => {
    const next = back.current + by;
    if (next < 0 || next > history.length) return;
    if (back.current === 0) draft.current = current();
    back.current = next;
    put(next === 0 ? draft.current : history[history.length - next]);
  }, [current, history, put]);
  return useMemo(() => ({ step, reset: () => { back.current = 0; }, isBack: () => back.current > 0 }), [step]);
}
