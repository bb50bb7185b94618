"use client";
import { useCallback, useEffect, useId, useMemo, useState, type KeyboardEvent } from "react";
import { grouped } from "@/lib/commands/numbers";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { BodyRow } from "./body-row";
import { columnsInSight, placeColumns, type PlacedColumn } from "./column-layout";
import { HeaderCell } from "./header-cell";
import { type Cell, moveCell, moveInHead } from "./move-cell";
import { ROW_HEIGHT } from "./scroll-map";
import type { RowWindow } from "./use-rows";
import { useScroller } from "./use-scroller";

const HEAD_HEIGHT = 44;
/** Rows drawn beyond both edges, so that a quick scroll shows rows and not paper. */
const OVERSCAN = 10;

interface TableProps {
  columns: readonly ColumnDescriptor[]; rows: RowWindow; sort: string; onSort: (column: string) => void; label: string; announce: (text: string) => void;
  /** Names the order of the rows: another one begins at the top again. */
  order: string;
}

/** The rows of a job as a grid that holds only what is in sight, whatever the job's length. It needs one column at least. */
export function ResultsTable({ columns, rows, sort, order, onSort, label, announce }: TableProps) {
  const id = useId();
  const rowCount = rows.rowCount ?? 0;
  const sight = useScroller(rowCount, HEAD_HEIGHT);
  const [active, setActive] = useState<Cell | null>(null);
  /** A header that gets the focus as soon as it is drawn. */
  const [awaited, setAwaited] = useState<number | null>(null);
  const { placed, width } = useMemo(() => placeColumns(columns, sight.width), [columns, sight.width]);
  const first = Math.max(0, Math.floor(sight.topRow) - OVERSCAN);
  const last = Math.min(rowCount, Math.ceil(sight.topRow + sight.height / ROW_HEIGHT) + OVERSCAN);
  const span = columnsInSight(placed, sight.left, sight.left + sight.width);
  const shown = useMemo(() => placed.slice(span.first, span.last + 1), [placed, span.first, span.last]);
  const { show } = rows;
  const { box, moveTo } = sight;
  useEffect(() => show(first, Math.max(last, first + 1)), [show, first, last]);
  const [seenOrder, setSeenOrder] = useState(order);
  useEffect(() => {
    if (order === seenOrder) return;
    setSeenOrder(order);
    setActive(null);
    moveTo(0);
  }, [order, seenOrder, moveTo]);
  useEffect(() => {
    if (awaited === null) return;
    const header = box.current?.querySelector<HTMLElement>(`[role=columnheader][aria-colindex="${awaited + 1}"] button`);
    if (!header) return;
    header.focus();
    setAwaited(null);
  }, [awaited, box, span.first, span.last]);
  const pick = useCallback((row: number, column: number) => setActive({ row, column }), []);

  const stuck = placed[0].width;
  const toHead = (column: number): void => { setAwaited(column); revealColumn(box.current, stuck, placed[column]); };
  const toCell = (cell: Cell): void => {
    setActive(cell);
    sight.reveal(cell.row);
    revealColumn(box.current, stuck, placed[cell.column]);
  };

  const onHeadKey = (event: KeyboardEvent): void => {
    const column = Number((event.target as Element).closest("[role=columnheader]")?.getAttribute("aria-colindex")) - 1;
    const next = moveInHead(event, column, placed.length);
    if (next === null) return;
    event.preventDefault();
    if (next !== "rows") { toHead(next); return; }
    if (rowCount === 0) return;
    box.current?.focus({ preventScroll: true });
    toCell({ row: Math.ceil(sight.topRow), column });
  };

  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.target !== event.currentTarget) { onHeadKey(event); return; }
    if (event.key.toLowerCase() === "c" && (event.ctrlKey || event.metaKey) && active && String(window.getSelection()) === "") {
      const value = rows.row(active.row)?.[placed[active.column]?.name];
      if (value !== null && value !== undefined) void navigator.clipboard.writeText(String(value)).then(() => announce("Copied."), () => announce("The clipboard refused."));
      return;
    }
    const extent = { rows: rowCount, columns: placed.length, page: Math.max(1, Math.floor(sight.height / ROW_HEIGHT) - 1) };
    const isToHead = event.key === "ArrowUp" && (active === null || active.row === 0) && !event.ctrlKey && !event.metaKey && !event.altKey && !event.shiftKey;
    const next = isToHead ? null : moveCell(event, active, extent);
    if (!next && !isToHead) return;
    event.preventDefault();
    if (next) toCell(next); else toHead(active?.column ?? 0);
  };

  // The active cell may have been scrolled away, and columns taken out: what is not drawn cannot be pointed at.
  const isDrawn = active !== null && active.row >= first && active.row < last && (active.column === 0 || (active.column >= span.first && active.column <= span.last));
  return (
    <div ref={box} role="grid" aria-label={label} aria-rowcount={rowCount + 1} aria-colcount={placed.length} aria-busy={rows.isStale} tabIndex={0} onScroll={sight.onScroll} onKeyDown={onKeyDown}
      onFocus={(event) => { if (event.target === event.currentTarget && !active && rowCount > 0) setActive({ row: Math.ceil(sight.topRow), column: 0 }); }}
      aria-activedescendant={isDrawn ? `${id}-cell` : undefined} className="group relative min-h-0 flex-1 overflow-auto bg-raised text-[13px] tabular-nums outline-offset-[-2px]">
      <div role="row" aria-rowindex={1} className="sticky top-0 z-20 flex border-b border-line bg-sunken" style={{ width, height: HEAD_HEIGHT }}>
        {[placed[0], ...shown].map((column, k) => <HeaderCell key={column.name} column={column} isFirst={k === 0} gap={k === 1 ? column.left - stuck : 0} sort={sort} onSort={onSort} onFocus={() => revealColumn(box.current, stuck, column)} />)}
      </div>
      <div style={{ height: sight.map.contentHeight, width, position: "relative" }}>
        <div className={`absolute left-0 ${rows.isStale ? "opacity-60" : ""}`} style={{ top: sight.map.scrollTopOf(sight.topRow) - (sight.topRow - first) * ROW_HEIGHT, width }}>
          {Array.from({ length: Math.max(0, last - first) }, (_, k) => {
            const index = first + k;
            return <BodyRow key={index} id={id} index={index} row={rows.row(index)} first={placed[0]} shown={shown} width={width} activeColumn={active?.row === index ? active.column : -1} onPick={pick} />;
          })}
        </div>
      </div>
      {rows.rowCount === 0 && !rows.isStale && <p className="absolute left-4 top-16 text-dim">No row answers to these conditions.</p>}
      {rows.rowCount === null && <p className="absolute left-4 top-16 text-dim">{rows.error ? "No rows." : "Reading rows …"}</p>}
      {sight.map.isScaled && <span className="sr-only">{grouped(rowCount)} rows: the scrollbar is on a scale, wheel and keys move by rows.</span>}
    </div>
  );
}

/** Scrolls sideways just far enough that a column stands clear of the sticking one. */
function revealColumn(box: HTMLElement | null, stuck: number, column: PlacedColumn | undefined): void {
  if (!box || !column || column.index === 0) return;
  if (column.left - stuck < box.scrollLeft) box.scrollLeft = column.left - stuck;
  else if (column.left + column.width > box.scrollLeft + box.clientWidth) box.scrollLeft = Math.min(column.left - stuck, column.left + column.width - box.clientWidth);
}
