"use client";
import { useCallback, useEffect, useMemo, useRef, useState, type KeyboardEvent, type RefObject } from "react";
import type { Entry, EntryBody } from "@/lib/commands/entry";
import { isKey, matchesCombo, onApple } from "@/lib/commands/keys";
import { COMMANDS } from "@/lib/commands/registry";
import { takePassedLine } from "@/lib/commands/stream-memory";
import type { Me } from "@/lib/schemas/api";
import { openDoor } from "./console-bridge";
import { EntryView, type EntryActions } from "./entry-view";
import { Prompt, type PromptHandle } from "./prompt";
import { useConsole } from "./use-console";
import { Welcome } from "./welcome";

/** Entries rendered at once; earlier ones come on demand, so that a long stream costs no keystroke. */
const SHOWN_AT_ONCE = 60;

/** Brings the newest entry into sight when one comes or is answered. */
function useNewestInSight(box: RefObject<HTMLElement | null>, count: number, body: EntryBody | undefined): void {
  useEffect(() => {
    const settle = requestAnimationFrame(() => {
      const last = box.current?.querySelector<HTMLElement>("article:last-of-type");
      // An answer taller than the view is read from its head.
      if (box.current) last?.scrollIntoView({ block: last.offsetHeight > box.current.clientHeight ? "start" : "end" });
    });
    return () => cancelAnimationFrame(settle);
  }, [box, count, body]);
}

/** Takes lines from the palette: while the console is in front, and the one that brought the person here. */
function useDoor(run: (line: string) => void, fill: (text: string) => void, isLoaded: boolean): void {
  useEffect(() => openDoor({ run, fill }), [run, fill]);
  useEffect(() => {
    if (!isLoaded) return;
    const passed = takePassedLine(sessionStorage);
    if (passed?.startsWith("run:")) run(passed.slice(4));
    else if (passed?.startsWith("fill:")) fill(passed.slice(5));
  }, [isLoaded, run, fill]);
}

/** The console: a stream of entries above a prompt that keeps the focus unless it is moved. */
export function Console({ me }: { me: Pick<Me, "id" | "role"> }) {
  const { stream, view, viewNow, history, remember, said, announce, run, runRead } = useConsole(me);
  const prompt = useRef<PromptHandle>(null);
  const scroller = useRef<HTMLDivElement>(null);
  const [shown, setShown] = useState(SHOWN_AT_ONCE);
  const fill = useCallback((text: string) => { prompt.current?.fill(text); prompt.current?.focus(); }, []);
  useDoor(run, fill, stream.isLoaded);
  const count = stream.entries.length;
  const newest = stream.entries[count - 1];
  useNewestInSight(scroller, count, newest?.body);

  const actions = useMemo<EntryActions>(() => ({
    onTry: fill, onRun: run, view: viewNow,
    onCopy: (text) => { void navigator.clipboard.writeText(text).then(() => announce("Copied."), () => announce("The clipboard refused.")); },
  }), [announce, fill, run, viewNow]);

  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.nativeEvent.isComposing || event.defaultPrevented) return;
    const act = (what: () => void): void => { event.preventDefault(); what(); };
    if (isKey(event, "peel")) return act(() => prompt.current?.focus());
    if (isKey(event, "entry-before")) return act(() => moveEntry(scroller.current, -1, () => prompt.current?.focus()));
    if (isKey(event, "entry-after")) return act(() => moveEntry(scroller.current, 1, () => prompt.current?.focus()));
    const command = COMMANDS.find((each) => each.key?.scope === "console" && matchesCombo(event, each.key.combo, onApple()));
    if (!command) return;
    const reason = command.isAvailable(viewNow());
    act(() => (reason ? announce(reason) : run(command.name)));
  };

  return (
    <div onKeyDown={onKeyDown} className="flex h-full min-h-0 flex-col">
      <div ref={scroller} role="log" aria-label="Stream" aria-live="off" tabIndex={-1} className="relative min-h-0 flex-1 overflow-y-auto outline-none">
        <div className="mx-auto w-full max-w-6xl">
          {stream.isLoaded && count === 0 && <Welcome onTry={fill} />}
          {count > shown && (
            <button type="button" onClick={() => setShown(shown + SHOWN_AT_ONCE)} className="block min-h-8 w-full px-4 py-2 text-left text-xs text-dim hover:text-accent">
              Show {Math.min(SHOWN_AT_ONCE, count - shown)} earlier of {count - shown}
            </button>
          )}
          {stream.entries.slice(-shown).map((entry: Entry) => <EntryView key={entry.number} entry={entry} isNewest={entry === newest} actions={actions} />)}
        </div>
      </div>
      <div className="border-t border-line bg-page">
        <div className="mx-auto w-full max-w-6xl px-4 pb-2 pt-1">
          <Prompt ref={prompt} view={view} history={history} onRun={(line, read) => void runRead(line, read)} onKeysWanted={() => run("help")} onDrop={remember} />
          {/* What was done without an entry (cleared, copied, theme) is shown here; answers are only spoken, the entry shows them. */}
          <p role="status" aria-live="polite" className={said.isShown ? "pl-5 text-xs leading-5 text-ink" : "sr-only"}>{said.text}</p>
        </div>
      </div>
    </div>
  );
}

/** Moves the focus between entries; past the newest it goes back to the prompt. */
function moveEntry(box: HTMLElement | null, step: -1 | 1, toPrompt: () => void): void {
  const all = [...(box?.querySelectorAll<HTMLElement>("[data-entry]") ?? [])];
  const here = all.findIndex((entry) => entry.contains(document.activeElement));
  const next = here < 0 ? (step < 0 ? all.length - 1 : all.length) : here + step;
  if (next >= all.length) return toPrompt();
  if (next < 0) return;
  all[next].focus();
  all[next].scrollIntoView({ block: "nearest" });
}
