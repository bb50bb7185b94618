import { FormulaText } from "@/components/ui/formula-text";
import type { PlacedColumn } from "./column-layout";

const ARROWS: Record<string, string> = { ascending: "↑", descending: "↓", none: "" };

/** A column's name and unit; pressing it sorts the whole job. */
export function HeaderCell({ column, isFirst, gap, sort, onSort, onFocus }: { column: PlacedColumn; isFirst: boolean; gap: number; sort: string; onSort: (column: string) => void; onFocus: () => void }) {
  const order = sort === column.name ? "ascending" : sort === `-${column.name}` ? "descending" : "none";
  return (
    <div role="columnheader" aria-colindex={column.index + 1} aria-sort={order} title={`${column.description}${column.basis ? ` (${column.basis})` : ""}`}
      className={isFirst ? "sticky left-0 z-10 bg-sunken" : ""} style={{ width: column.width, marginLeft: gap, flex: "none" }}>
      <button type="button" onClick={() => onSort(column.name)} onFocus={onFocus}
        className={`flex h-full w-full flex-col justify-center px-2 leading-tight outline-offset-[-2px] hover:text-accent ${column.type === "text" ? "items-start" : "items-end"}`}>
        <span className="max-w-full truncate text-ink"><FormulaText>{column.name}</FormulaText> <span className="text-accent" aria-hidden="true">{ARROWS[order]}</span></span>
        <span className="text-[11px] text-dim">{column.unit || "\u00a0"}</span>
      </button>
    </div>
  );
}
