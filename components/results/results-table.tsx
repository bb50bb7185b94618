"use client";
import { useEffect, useId, useMemo, useState, type KeyboardEvent } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { cellText, STATUS_COLOURS } from "./cell-text";
import { columnsInSight, placeColumns, type PlacedColumn } from "./column-layout";
import { moveCell } from "./move-cell";
import type { Row } from "./row-pages";
import { ROW_HEIGHT } from "./scroll-map";
import type { RowWindow } from "./use-rows";
import { useScroller } from "./use-scroller";

const HEAD_HEIGHT = 44;
/** Rows drawn beyond both edges, so that a quick scroll shows rows and not paper. */
const OVERSCAN = 10;

/** The rows of a job as a grid that holds only what is in sight, whatever the job's length. */
export function ResultsTable({ columns, rows, sort, onSort, label, announce }: {
  columns: readonly ColumnDescriptor[]; rows: RowWindow; sort: string; onSort: (column: string) => void; label: string; announce: (text: string) => void;
}) {
  const id = useId();
  const rowCount = rows.rowCount ?? 0;
  const sight = useScroller(rowCount, HEAD_HEIGHT);
  const [active, setActive] = useState<{ row: number; column: number } | null>(null);
  const { placed, width } = useMemo(() => placeColumns(columns), [columns]);
  const first = Math.max(0, Math.floor(sight.topRow) - OVERSCAN);
  const last = Math.min(rowCount, Math.ceil(sight.topRow + sight.height / ROW_HEIGHT) + OVERSCAN);
  const shown = columnsInSight(placed, sight.left, sight.left + sight.width);
  const { show } = rows;
  useEffect(() => show(first, Math.max(last, first + 1)), [show, first, last]);

  if (placed.length === 0) return <p className="p-4 text-dim">No column is chosen.</p>;

  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.target !== event.currentTarget) return;
    if (event.key.toLowerCase() === "c" && (event.ctrlKey || event.metaKey) && active && String(window.getSelection()) === "") {
      const row = rows.row(active.row);
      const value = row?.[placed[active.column].name];
      if (value !== null && value !== undefined) void navigator.clipboard.writeText(String(value)).then(() => announce("Copied."), () => announce("The clipboard refused."));
      return;
    }
    const next = moveCell(event, active, { rows: rowCount, columns: placed.length, page: Math.max(1, Math.floor(sight.height / ROW_HEIGHT) - 1) });
    if (!next) return;
    event.preventDefault();
    setActive(next);
    sight.reveal(next.row);
    revealColumn(sight.box.current, placed[0].width, placed[next.column]);
  };

  return (
    <div ref={sight.box} role="grid" aria-label={label} aria-rowcount={rowCount + 1} aria-colcount={placed.length} tabIndex={0} onScroll={sight.onScroll} onKeyDown={onKeyDown}
      onFocus={(event) => { if (event.target === event.currentTarget && !active && rowCount > 0) setActive({ row: Math.ceil(sight.topRow), column: 0 }); }}
      aria-activedescendant={active ? `${id}-cell` : undefined} className="group relative min-h-0 flex-1 overflow-auto bg-raised text-[13px] tabular-nums outline-offset-[-2px]">
      <div role="row" aria-rowindex={1} className="sticky top-0 z-20 flex border-b border-line bg-sunken" style={{ width, height: HEAD_HEIGHT }}>
        {[placed[0], ...shown].map((column, k) => <HeaderCell key={column.name} column={column} isFirst={k === 0} gap={k === 1 ? column.left - placed[0].width : 0} sort={sort} onSort={onSort} onFocus={() => revealColumn(sight.box.current, placed[0].width, column)} />)}
      </div>
      <div style={{ height: sight.map.contentHeight, width, position: "relative" }}>
        <div className="absolute left-0" style={{ top: sight.map.scrollTopOf(sight.topRow) - (sight.topRow - first) * ROW_HEIGHT, width }}>
          {Array.from({ length: Math.max(0, last - first) }, (_, k) => {
            const index = first + k;
            return <BodyRow key={index} id={id} index={index} row={rows.row(index)} first={placed[0]} shown={shown} width={width} activeColumn={active?.row === index ? active.column : -1}
              onPick={(column) => setActive({ row: index, column })} />;
          })}
        </div>
      </div>
      {rows.rowCount === 0 && <p className="absolute left-4 top-16 text-dim">No row answers to these conditions.</p>}
    </div>
  );
}

/** Scrolls sideways just far enough that a column stands clear of the sticking one. */
function revealColumn(box: HTMLElement | null, stuck: number, column: PlacedColumn): void {
  if (!box || column.index === 0) return;
  if (column.left - stuck < box.scrollLeft) box.scrollLeft = column.left - stuck;
  else if (column.left + column.width > box.scrollLeft + box.clientWidth) box.scrollLeft = column.left + column.width - box.clientWidth;
}

const ARROWS: Record<string, string> = { ascending: "↑", descending: "↓", none: "" };

function HeaderCell({ column, isFirst, gap, sort, onSort, onFocus }: { column: PlacedColumn; isFirst: boolean; gap: number; sort: string; onSort: (column: string) => void; onFocus: () => void }) {
  const order = sort === column.name ? "ascending" : sort === `-${column.name}` ? "descending" : "none";
  return (
    <div role="columnheader" aria-colindex={column.index + 1} aria-sort={order} title={`${column.description}${column.basis ? ` (${column.basis})` : ""}`}
      className={isFirst ? "sticky left-0 z-10 bg-sunken" : ""} style={{ width: column.width, marginLeft: gap, flex: "none" }}>
      <button type="button" onClick={() => onSort(column.name)} onFocus={onFocus}
        className={`flex h-full w-full flex-col justify-center px-2 leading-tight outline-offset-[-2px] hover:text-accent ${column.type === "text" ? "items-start" : "items-end"}`}>
        <span className="max-w-full truncate text-ink"><FormulaText>{column.name}</FormulaText> <span className="text-accent">{ARROWS[order]}</span></span>
        <span className="text-[11px] text-dim">{column.unit || "\u00a0"}</span>
      </button>
    </div>
  );
}

function BodyRow({ id, index, row, first, shown, width, activeColumn, onPick }: {
  id: string; index: number; row: Row | null; first: PlacedColumn; shown: readonly PlacedColumn[]; width: number; activeColumn: number; onPick: (column: number) => void;
}) {
  return (
    <div role="row" aria-rowindex={index + 2} className="flex border-b border-line/40" style={{ width, height: ROW_HEIGHT, background: index % 2 === 0 ? "var(--raised)" : "color-mix(in srgb, var(--sunken) 45%, var(--raised))" }}>
      {[first, ...shown].map((column, k) => {
        const text = row ? cellText(row, column) : "";
        const value = row?.[column.name];
        const isActive = activeColumn === column.index;
        const colour = column.name === "status" ? STATUS_COLOURS[text] ?? "" : column.name === "message" ? "text-bad" : column.name === "warnings" ? "text-warn" : "";
        return (
          <div key={column.name} role="gridcell" aria-colindex={column.index + 1} id={isActive ? `${id}-cell` : undefined} onMouseDown={() => onPick(column.index)}
            title={typeof value === "number" ? String(value) : column.width < 300 && text.length < 24 ? undefined : text}
            className={`truncate px-2 leading-[25px] ${column.type === "text" ? "" : "text-right"} ${k === 0 ? "sticky left-0 z-[5] bg-inherit" : ""} ${colour} ${isActive ? "outline-2 outline-offset-[-2px] outline-transparent group-focus:outline-focus" : ""}`}
            style={{ width: column.width, marginLeft: k === 1 ? column.left - first.width : 0, flex: "none" }}>
            {row === null ? (k === 0 ? <span className="text-faint">…</span> : "") : text}
          </div>
        );
      })}
    </div>
  );
}
