"use client";
import { useEffect, useRef } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import type { OpenList } from "./use-completion";

export const optionId = (index: number): string => `prompt-option-${index}`;

/** Options for the word at the caret, above the prompt. Focus stays in the prompt; it names the active option. */
export function CompletionList({ list, onTake }: { list: OpenList; onTake: (index: number) => void }) {
  const box = useRef<HTMLUListElement>(null);
  useEffect(() => { box.current?.children[list.active]?.scrollIntoView({ block: "nearest" }); }, [list.active]);
  return (
    <ul ref={box} id="prompt-options" role="listbox" aria-label="Completions"
      className="absolute bottom-full left-0 z-20 mb-1 max-h-64 w-full max-w-xl overflow-y-auto rounded-md border border-line bg-raised py-1 shadow-lg">
      {list.options.map((option, index) => (
        <li key={option.insert + index} id={optionId(index)} role="option" aria-selected={index === list.active}
          onMouseDown={(event) => { event.preventDefault(); onTake(index); }}
          className={`flex min-h-7 cursor-default items-baseline justify-between gap-6 px-3 py-0.5 text-sm ${index === list.active ? "bg-select text-ink" : "text-ink"}`}>
          <span className="whitespace-pre"><FormulaText>{option.insert}</FormulaText></span>
          <span className="truncate text-xs text-dim">{option.detail}</span>
        </li>
      ))}
    </ul>
  );
}
