"use client";
import { useEffect, useRef, useState } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

const GROUPS: readonly [ColumnDescriptor["group"], string][] = [
  ["row", "Row"], ["axis", "Axes"], ["main", "State"], ["SI", "Saturation"], ["solids", "Solids and gas"], ["dissolved", "Dissolved totals"], ["species", "Species"], ["activities", "Activities"],
];
/** Groups shown without being asked for; hundreds of species would bury the rest. */
const USUAL = new Set<ColumnDescriptor["group"]>(["row", "axis", "main", "SI", "solids"]);
const FEW = 30;

/** Columns shown where nobody chose: all of a narrow job, the main groups of a wide one; never the solver's own diary first. */
export function usualColumns(columns: readonly ColumnDescriptor[]): ColumnDescriptor[] {
  return columns.length <= FEW ? [...columns] : columns.filter((column) => USUAL.has(column.group));
}

/** The table's own order: what the row says of itself comes last, so that the numbers stand in sight. */
const LAST = ["message", "warnings", "iterations", "residual"];
export const inTableOrder = (columns: readonly ColumnDescriptor[]): ColumnDescriptor[] =>
  [...columns.filter((column) => !LAST.includes(column.name)), ...columns.filter((column) => LAST.includes(column.name))];

/** A panel of checkboxes, by group, that says which columns are shown and downloaded. */
export function ColumnChooser({ columns, shown, onChange }: { columns: readonly ColumnDescriptor[]; shown: readonly ColumnDescriptor[]; onChange: (names: string[] | null) => void }) {
  const [isOpen, setOpen] = useState(false);
  const [sought, setSought] = useState("");
  const box = useRef<HTMLDivElement>(null);
  const button = useRef<HTMLButtonElement>(null);
  const names = new Set(shown.map((column) => column.name));
  useEffect(() => {
    if (!isOpen) return;
    const onPointer = (event: PointerEvent): void => { if (!box.current?.contains(event.target as Node)) setOpen(false); };
    document.addEventListener("pointerdown", onPointer);
    return () => document.removeEventListener("pointerdown", onPointer);
  }, [isOpen]);
  const set = (some: readonly ColumnDescriptor[], isShown: boolean): void => {
    const changed = new Set(some.map((column) => column.name));
    onChange(columns.filter((column) => (changed.has(column.name) ? isShown : names.has(column.name))).map((column) => column.name));
  };
  return (
    <div ref={box} className="relative" onKeyDown={(event) => { if (event.key === "Escape" && isOpen) { event.preventDefault(); setOpen(false); button.current?.focus(); } }}>
      <button ref={button} type="button" aria-expanded={isOpen} onClick={() => setOpen(!isOpen)} className="min-h-8 rounded border border-line bg-raised px-2.5 text-sm hover:bg-sunken">
        Columns <span className="text-dim">{shown.length} of {columns.length}</span>
      </button>
      {isOpen && (
        <div role="group" aria-label="Columns" className="absolute right-0 z-30 mt-1 max-h-[60vh] w-72 max-w-[86vw] overflow-auto rounded border border-line bg-raised p-3 text-sm shadow-lg">
          {columns.length > FEW && <input type="search" aria-label="Find a column" placeholder="Find a column" value={sought} onChange={(event) => setSought(event.target.value)} autoComplete="off" spellCheck={false} className="mb-2 min-h-8 w-full rounded border border-line bg-page px-2 placeholder:text-faint" />}
          <button type="button" className="mb-2 min-h-7 text-accent underline-offset-4 hover:underline" onClick={() => onChange(null)}>The usual ones</button>
          {GROUPS.map(([group, title]) => {
            const own = columns.filter((column) => column.group === group && column.name.toLowerCase().includes(sought.trim().toLowerCase()));
            if (own.length === 0) return null;
            const count = own.filter((column) => names.has(column.name)).length;
            return (
              <fieldset key={group} className="mb-2">
                <label className="flex min-h-7 items-center gap-2 font-semibold">
                  <input type="checkbox" checked={count === own.length} ref={(input) => { if (input) input.indeterminate = count > 0 && count < own.length; }} onChange={(event) => set(own, event.target.checked)} />
                  {title} <span className="font-normal text-dim">{count} of {own.length}</span>
                </label>
                <div className="ml-5">
                  {own.map((column) => (
                    <label key={column.name} className="flex min-h-7 items-center gap-2" title={column.description}>
                      <input type="checkbox" checked={names.has(column.name)} onChange={(event) => set([column], event.target.checked)} /><FormulaText>{column.name}</FormulaText>
                      <span className="text-xs text-dim">{column.unit}</span>
                    </label>
                  ))}
                </div>
              </fieldset>
            );
          })}
        </div>
      )}
    </div>
  );
}
