import type { LineProblem } from "@/lib/commands/entry";
import type { LineCompletion } from "@/lib/commands/read-line";
import { sharedBeginning } from "./use-completion";

/** Replaces characters of the field the way typing would, so that native undo knows of it. */
export function replaceText(field: HTMLTextAreaElement, from: number, to: number, text: string): void {
  field.focus();
  field.setSelectionRange(from, to);
  // The one way that keeps the field's undo stack; deprecated in name, kept by every browser for editors.
  if (!document.execCommand(text === "" ? "delete" : "insertText", false, text)) {
    field.setRangeText(text, from, to, "end");
    field.dispatchEvent(new Event("input", { bubbles: true }));
  }
}

/** Puts an option in place of the word it completes; a space follows at the end of the line. */
export function takeOption(field: HTMLTextAreaElement, completion: LineCompletion, index: number): void {
  const option = completion.options[index];
  if (option) replaceText(field, completion.from, completion.to, option.insert + (completion.to >= field.value.length ? " " : ""));
}

/**
 * What Tab does: takes the only option, writes what all options share, opens the list of them, or else writes the
 * correction of a faulty word. False where there is nothing to complete, so that the focus moves on as anywhere else.
 */
export function completeAtCaret(field: HTMLTextAreaElement, completion: LineCompletion, problems: readonly LineProblem[], openList: () => void): boolean {
  if (field.value === "") return false;
  const { options, from, to } = completion;
  if (options.length === 0) {
    const caret = field.selectionStart;
    const fault = problems.find((each) => each.suggestion && each.start <= caret && caret <= each.end + 1) ?? problems.find((each) => each.suggestion);
    if (fault) replaceText(field, fault.start, fault.end, fault.suggestion!);
    return fault !== undefined;
  }
  const shared = sharedBeginning(options);
  if (options.length === 1) takeOption(field, completion, 0);
  else if (shared.length > to - from) replaceText(field, from, to, shared);
  else openList();
  return true;
}
