/**
 * Every key the console binds, in one table: handlers match against it and the help lists it, so that the two cannot
 * differ. Commands carry their own key; these are the ones that are no commands.
 */
import type { KeyScope } from "./command";

/** Where a key is listened to; several scopes may hold at once, narrower first. */
export type Scope = KeyScope | "prompt" | "stream";

export interface KeyBinding {
  id: string;
  /** "Mod" is Ctrl, or Command on Apple keyboards. */
  combo: string;
  scope: Scope;
  does: string;
}

export const KEYS = [
  { id: "palette", combo: "Mod+K", scope: "everywhere", does: "Open the palette: every command, job, sample set, constant and page" },
  { id: "run", combo: "Enter", scope: "prompt", does: "Run the line" },
  { id: "new-line", combo: "Shift+Enter", scope: "prompt", does: "Begin a new line within the prompt" },
  { id: "complete", combo: "Tab", scope: "prompt", does: "Complete the word; with nothing to complete, move on" },
  { id: "older", combo: "ArrowUp", scope: "prompt", does: "The line before, to run again or change" },
  { id: "newer", combo: "ArrowDown", scope: "prompt", does: "The line after" },
  { id: "search", combo: "Ctrl+R", scope: "prompt", does: "Search the lines you typed, newest first; again for the next older" },
  { id: "peel", combo: "Escape", scope: "console", does: "Close what is open; else back to the prompt" },
  { id: "keys", combo: "?", scope: "prompt", does: "In an empty prompt: these keys" },
  { id: "entry-before", combo: "Alt+ArrowUp", scope: "console", does: "To the entry before" },
  { id: "entry-after", combo: "Alt+ArrowDown", scope: "console", does: "To the entry after" },
  { id: "entry-refer", combo: "Enter", scope: "stream", does: "On an entry: put its number into the prompt" },
  { id: "stop", combo: "Ctrl+C", scope: "prompt", does: "With nothing selected: empty the prompt (the line stays in the history)" },
  { id: "format", combo: "Mod+Shift+F", scope: "editor", does: "Lay the document out afresh" },
  { id: "submit-spec", combo: "Mod+Enter", scope: "editor", does: "Submit the spec as a job" },
  { id: "suggest", combo: "Ctrl+Space", scope: "editor", does: "Suggest what may stand here" },
  { id: "leave-editor", combo: "Escape Tab", scope: "editor", does: "Leave the editor" },
] as const satisfies readonly KeyBinding[];

export type KeyId = (typeof KEYS)[number]["id"];

/** The combo of a key by its id. */
export const comboOf = (id: KeyId): string => KEYS.find((each) => each.id === id)!.combo;

/** Keys that belong to browsers and screen readers; a test refuses them in any scope. */
export const NEVER_BOUND: readonly string[] = ["Mod+W", "Mod+T", "Mod+N", "Mod+L", "Mod+Q", "Mod+Shift+T", "Mod+Shift+N", "Ctrl+W", "Ctrl+T", "Ctrl+N", "F5", "F6", "F7", "F11", "F12"];

interface PressedKey { key: string; ctrlKey: boolean; metaKey: boolean; altKey: boolean; shiftKey: boolean }

/** True where the event is the combo, no modifier more or less. `isApple` makes Mod the Command key. */
export function matchesCombo(event: PressedKey, combo: string, isApple: boolean): boolean {
  const parts = combo.split("+");
  const key = parts.pop()!;
  const wants = (name: string): boolean => parts.includes(name);
  const ctrl = wants("Ctrl") || (wants("Mod") && !isApple);
  const meta = wants("Mod") && isApple;
  // A character that needs Shift on some keyboards ("?") is matched as the character.
  const shiftFits = key.length === 1 && !/[a-z0-9]/i.test(key) ? true : event.shiftKey === wants("Shift");
  return event.key.toLowerCase() === (key === "Space" ? " " : key.toLowerCase())
    && event.ctrlKey === ctrl && event.metaKey === meta && event.altKey === wants("Alt") && shiftFits;
}

/** True where the event is the binding of that id. */
export function isKey(event: PressedKey, id: KeyId, isApple = onApple()): boolean {
  return matchesCombo(event, comboOf(id), isApple);
}

/** Whether Mod is the Command key on this machine. */
export function onApple(): boolean {
  return typeof navigator !== "undefined" && /Mac|iPhone|iPad/.test(navigator.platform);
}

/** The combo as keycaps, e.g. ["Ctrl", "K"] or ["⌘", "K"]. */
export function keycaps(combo: string, isApple = onApple()): string[] {
  return combo.split(/[+ ]/).map((part) => ({ Mod: isApple ? "⌘" : "Ctrl", ArrowUp: "↑", ArrowDown: "↓", Escape: "Esc" })[part] ?? part);
}
