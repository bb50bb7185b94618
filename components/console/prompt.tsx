"use client";
import { forwardRef, useCallback, useEffect, useId, useImperativeHandle, useMemo, useRef, useState, type KeyboardEvent } from "react";
import type { ConsoleView } from "@/lib/commands/command";
import { isKey } from "@/lib/commands/keys";
import { completeLine, readLine, type ReadLine } from "@/lib/commands/read-line";
import { CompletionList, optionId } from "./completion-list";
import { completeAtCaret, replaceText, takeOption } from "./edit-field";
import { HistorySearch } from "./history-search";
import { PromptMirror } from "./prompt-mirror";
import { PromptStatus } from "./prompt-status";
import { useCompletion } from "./use-completion";
import { useRecall } from "./use-recall";

export interface PromptHandle {
  focus(): void;
  /** Puts text in place of what stands there; native undo brings the old text back. */
  fill(text: string): void;
}

interface PromptProps {
  view: ConsoleView;
  history: readonly string[];
  onRun(line: string, read: ReadLine): void;
  onKeysWanted(): void;
  onDrop(line: string): void;
}

/** The text of the field, how it reads, and what may stand at its caret. */
function usePromptText(view: ConsoleView) {
  const field = useRef<HTMLTextAreaElement>(null);
  const [text, setText] = useState("");
  const [caret, setCaret] = useState(0);
  /** True once Enter met a fault: then every fault shows, also that of the word at the caret. */
  const [isChecked, setChecked] = useState(false);
  const read = useMemo(() => readLine(text, view), [text, view]);
  const completion = useMemo(() => completeLine(text, caret, view), [text, caret, view]);
  const problems = useMemo(() => (isChecked ? read.problems
    : read.problems.filter((each) => each.end > each.start && !(each.start <= caret && caret <= each.end))), [read, caret, isChecked]);
  const put = useCallback((value: string) => { if (field.current) replaceText(field.current, 0, field.current.value.length, value); }, []);
  const current = useCallback(() => field.current?.value ?? "", []);
  const noteCaret = useCallback(() => { if (field.current) setCaret(field.current.selectionStart); }, []);
  const noteText = useCallback(() => { setText(current()); noteCaret(); setChecked(false); }, [current, noteCaret]);
  return { field, text, read, completion, problems, isChecked, setChecked, put, current, noteCaret, noteText };
}

/** The line one types. It knows the words of the console and shows at once how each was read. */
export const Prompt = forwardRef<PromptHandle, PromptProps>(function Prompt({ view, history, onRun, onKeysWanted, onDrop }, handle) {
  const prompt = usePromptText(view);
  const { field, text, read, completion, put } = prompt;
  const [isSearching, setSearching] = useState(false);
  const { list, open, close, move } = useCompletion();
  const recall = useRecall(history, prompt.current, put);
  const statusId = useId();

  useImperativeHandle(handle, () => ({ focus: () => field.current?.focus(), fill: (value) => { recall.reset(); put(value); } }), [field, put, recall]);
  useEffect(() => { field.current?.focus(); }, [field]);

  const take = (index: number): void => { if (list && field.current) takeOption(field.current, list, index); close(); };
  const run = (): void => {
    if (read.kind === "empty") return;
    if (read.problems.length > 0) {
      prompt.setChecked(true);
      const first = read.problems.find((each) => each.end > each.start);
      if (first) field.current?.setSelectionRange(first.end, first.end);
      prompt.noteCaret();
      return;
    }
    recall.reset();
    onRun(text.trim(), read);
    put("");
  };

  const onKeyDown = (event: KeyboardEvent<HTMLTextAreaElement>): void => {
    // Enter, Tab and arrows belong to the input method while it composes.
    if (event.nativeEvent.isComposing || event.keyCode === 229) return;
    const at = event.currentTarget;
    const isBare = at.selectionStart === at.selectionEnd;
    const act = (what: () => void): void => { event.preventDefault(); event.stopPropagation(); what(); };
    if (list) {
      if (event.key === "Escape") return act(close);
      if (event.key === "ArrowDown" || (event.key === "Tab" && !event.shiftKey)) return act(() => move(1));
      if (event.key === "ArrowUp" || event.key === "Tab") return act(() => move(-1));
      if (event.key === "Enter") return act(() => take(list.active));
    }
    if (isKey(event, "run")) return act(run);
    if (isKey(event, "complete")) { if (completeAtCaret(at, completion, read.problems, () => open(completion))) act(() => {}); return; }
    if (isKey(event, "search")) return act(() => setSearching(true));
    if (isKey(event, "keys") && text === "") return act(onKeysWanted);
    if (isKey(event, "older") && isBare && !text.slice(0, at.selectionStart).includes("\n")) return act(() => recall.step(1));
    if (isKey(event, "newer") && isBare && recall.isBack() && !text.slice(at.selectionStart).includes("\n")) return act(() => recall.step(-1));
    if (isKey(event, "stop") && isBare && text !== "" && (getSelection()?.toString() ?? "") === "") return act(() => { onDrop(text); put(""); });
    if (event.key === "Escape" && prompt.isChecked) return act(() => prompt.setChecked(false));
  };

  return (
    <div className="relative">
      {list && <CompletionList list={list} onTake={take} />}
      {isSearching && (
        <HistorySearch history={history} onTake={(line) => { setSearching(false); put(line); }} onClose={() => { setSearching(false); field.current?.focus(); }} />
      )}
      <div className="flex items-start gap-2">
        <span aria-hidden="true" className="select-none pt-2 text-base leading-7 text-accent">›</span>
        <div className="relative min-h-12 min-w-0 flex-1 py-1 text-base leading-10">
          <PromptMirror text={text} marks={read.marks} problems={prompt.problems} hint={completion.hint} />
          <textarea ref={field} rows={1} defaultValue="" spellCheck={false} autoComplete="off" autoCorrect="off" autoCapitalize="off"
            aria-label="Prompt: type a water or a command" aria-autocomplete="list" aria-describedby={statusId}
            aria-controls={list ? "prompt-options" : undefined} aria-activedescendant={list ? optionId(list.active) : undefined}
            aria-invalid={prompt.isChecked && read.problems.length > 0}
            placeholder="Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C"
            onInput={() => { prompt.noteText(); close(); }} onSelect={prompt.noteCaret} onKeyDown={onKeyDown} onBlur={close}
            className="absolute inset-0 h-full w-full resize-none overflow-hidden whitespace-pre-wrap bg-transparent py-1 text-transparent caret-accent outline-none [overflow-wrap:anywhere] selection:bg-select placeholder:text-dim placeholder:opacity-80" />
        </div>
      </div>
      <PromptStatus id={statusId} text={text} read={read} problems={prompt.problems} isChecked={prompt.isChecked} completion={completion} />
    </div>
  );
});
