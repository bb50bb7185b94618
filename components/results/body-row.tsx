import { memo, type ReactNode } from "react";
import { FormulaText } from "@/components/ui/formula-text";
import { cellText, STATUS_COLOURS } from "./cell-text";
import type { PlacedColumn } from "./column-layout";
import type { Row } from "./row-pages";
import { ROW_HEIGHT } from "./scroll-map";

interface BodyRowProps {
  id: string; index: number; row: Row | null; first: PlacedColumn; shown: readonly PlacedColumn[]; width: number;
  /** Column of the active cell, where it is in this row; else -1. */
  activeColumn: number;
  onPick: (row: number, column: number) => void;
}

const STRIPES = ["var(--raised)", "color-mix(in srgb, var(--sunken) 45%, var(--raised))"];

/** One row of the table. Its cells change only with the row and the columns in sight, so scrolling draws new rows alone. */
export const BodyRow = memo(function BodyRow({ id, index, row, first, shown, width, activeColumn, onPick }: BodyRowProps) {
  const isFailed = row !== null && typeof row.status === "string" && row.status !== "ok";
  // The numbers of a failed row are empty: the first of their cells says why, across the others.
  const reasonAt = isFailed && row.message ? shown.find((column) => column.group !== "row" && column.group !== "axis")?.index : undefined;
  return (
    <div role="row" aria-rowindex={index + 2} className="flex overflow-x-clip border-b border-line/40" style={{ width, height: ROW_HEIGHT, background: STRIPES[index % 2] }}>
      {[first, ...shown].map((column, k) => {
        const isActive = activeColumn === column.index;
        const isReason = column.index === reasonAt;
        return (
          <div key={column.name} role="gridcell" aria-colindex={column.index + 1} id={isActive ? `${id}-cell` : undefined} onMouseDown={() => onPick(index, column.index)} title={titleOf(row, column, isReason)}
            className={`px-2 leading-[25px] ${isReason ? "whitespace-nowrap text-bad" : "truncate"} ${column.type === "text" || isReason ? "" : "text-right"} ${k === 0 ? "sticky left-0 z-[5] bg-inherit" : ""} ${colourOf(row, column)} ${isActive ? "outline-2 outline-offset-[-2px] outline-transparent group-focus:outline-focus" : ""}`}
            style={{ width: column.width, marginLeft: k === 1 ? column.left - first.width : 0, flex: "none" }}>
            {row === null ? (k === 0 ? <span className="text-faint">…</span> : "") : isReason ? <FormulaText>{String(row.message)}</FormulaText> : <CellBody row={row} column={column} />}
          </div>
        );
      })}
    </div>
  );
});

function CellBody({ row, column }: { row: Row; column: PlacedColumn }): ReactNode {
  const text = cellText(row, column);
  if (column.name === "status" && row.warnings) return <>{text} <span className="text-warn" aria-label="with warnings">▲</span></>;
  return column.name === "message" || column.name === "warnings" ? <FormulaText>{text}</FormulaText> : text;
}

const colourOf = (row: Row | null, column: PlacedColumn): string =>
  column.name === "status" ? STATUS_COLOURS[String(row?.status)] ?? "" : column.name === "message" ? "text-bad" : column.name === "warnings" ? "text-warn" : "";

/** The whole of what a cell shows in short. */
function titleOf(row: Row | null, column: PlacedColumn, isReason: boolean): string | undefined {
  if (row === null) return undefined;
  if (isReason) return String(row.message);
  if (column.name === "status" && row.warnings) return String(row.warnings);
  const value = row[column.name];
  if (typeof value === "number") return column.unit ? `${value} ${column.unit}` : String(value);
  return value === null || value === undefined || value.length < 20 ? undefined : value;
}
