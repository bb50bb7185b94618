"use client";
import { useId, useRef, useState, type FormEvent } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import { grouped } from "@/lib/commands/numbers";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { readCondition } from "./condition";

/** Conditions on the whole job, each one a chip; a new one is typed. */
export function FilterBar({ columns, where, rowCount, total, isPartial, serverError, onChange }: {
  columns: readonly ColumnDescriptor[]; where: readonly string[]; rowCount: number | null; total: number; isPartial: boolean; serverError: string | null; onChange: (where: string[]) => void;
}) {
  const id = useId();
  const field = useRef<HTMLInputElement>(null);
  const [text, setText] = useState("");
  const [problem, setProblem] = useState("");
  const onSubmit = (event: FormEvent): void => {
    event.preventDefault();
    if (!text.trim()) return;
    const read = readCondition(text, columns);
    if ("problem" in read) { setProblem(read.problem); return; }
    setText("");
    setProblem("");
    if (!where.includes(read.condition)) onChange([...where, read.condition]);
  };
  const fault = problem || serverError;
  return (
    <div className="flex min-w-0 flex-1 flex-wrap items-center gap-x-3 gap-y-1 text-sm">
      <form onSubmit={onSubmit} className="flex min-w-0 items-center gap-2">
        <label htmlFor={id} className="whitespace-nowrap text-dim">Rows where</label>
        <input id={id} ref={field} value={text} list={`${id}-columns`} onChange={(event) => { setText(event.target.value); setProblem(""); }} placeholder="SI:calcite > 0.5"
          aria-invalid={fault ? true : undefined} aria-describedby={`${id}-fault`} autoComplete="off" spellCheck={false}
          className="min-h-8 w-52 min-w-0 rounded border border-faint/75 bg-raised px-2 placeholder:text-faint aria-[invalid=true]:border-bad" />
        <datalist id={`${id}-columns`}>{columns.map((column) => <option key={column.name} value={`${column.name} ${column.type === "text" ? "=" : ">"} `} />)}</datalist>
      </form>
      {where.map((condition) => (
        <button key={condition} type="button" onClick={() => { onChange(where.filter((each) => each !== condition)); field.current?.focus(); }} aria-label={`Take out: ${condition}`}
          className="inline-flex min-h-7 items-center gap-1 rounded-full border border-line bg-select px-2.5 text-xs"><FormulaText>{condition}</FormulaText><span aria-hidden="true"> ×</span></button>
      ))}
      <span className="text-dim" role="status">{rowCount === null ? "…" : where.length > 0 ? `${grouped(rowCount)} of ${grouped(total)} rows` : `${grouped(rowCount)} rows`}{isPartial && rowCount !== null ? " so far" : ""}</span>
      <p id={`${id}-fault`} role="alert" className={fault ? "basis-full text-xs text-bad" : "sr-only"}>{fault}</p>
    </div>
  );
}
