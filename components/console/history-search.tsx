"use client";
import { useEffect, useRef, useState, type KeyboardEvent } from "react";
import { isKey } from "@/lib/commands/keys";
import { searchHistory } from "@/lib/commands/stream-memory";

/** Search through the lines typed, newest first. Enter takes the found line into the prompt, Escape leaves it as it was. */
export function HistorySearch({ history, onTake, onClose }: { history: readonly string[]; onTake: (line: string) => void; onClose: () => void }) {
  const field = useRef<HTMLInputElement>(null);
  const [words, setWords] = useState("");
  const [found, setFound] = useState(history.length - 1);
  useEffect(() => { field.current?.focus(); }, []);

  const search = (value: string): void => {
    setWords(value);
    setFound(searchHistory(history, value));
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.nativeEvent.isComposing) return;
    const act = (what: () => void): void => { event.preventDefault(); event.stopPropagation(); what(); };
    if (event.key === "Escape") return act(onClose);
    if (event.key === "Enter" || event.key === "Tab") return act(() => (found >= 0 ? onTake(history[found]) : onClose()));
    if (isKey(event, "search") || event.key === "ArrowUp") {
      return act(() => { const next = searchHistory(history, words, Math.max(found, 0)); if (next >= 0) setFound(next); });
    }
    if (event.key === "ArrowDown") {
      return act(() => {
        for (let i = found + 1; i < history.length; i++) if (history[i].toLowerCase().includes(words.toLowerCase())) return setFound(i);
      });
    }
  };
  const line = found >= 0 ? history[found] : null;
  return (
    <div className="absolute bottom-full left-0 z-20 mb-1 w-full max-w-xl rounded-md border border-line bg-raised p-2 shadow-lg">
      <label className="flex items-baseline gap-2 text-sm text-dim">
        Earlier lines with
        <input ref={field} value={words} onChange={(event) => search(event.target.value)} onKeyDown={onKeyDown} onBlur={onClose}
          className="min-w-0 flex-1 border-b border-line bg-transparent text-ink outline-none focus:border-accent" />
      </label>
      <output className="mt-1 block truncate text-sm text-ink" aria-live="polite">
        {line ?? (history.length === 0 ? "No lines yet." : `No line holds “${words}”.`)}
      </output>
      <p className="mt-1 text-xs text-dim">Enter takes it · Ctrl R the next older · Esc leaves</p>
    </div>
  );
}
