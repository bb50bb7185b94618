/** Widths and places of the table's columns, and which of them are in sight. */
import type { ColumnDescriptor } from "@/lib/schemas/columns";

const WIDTHS: Record<string, number> = { water: 168, case: 176, status: 112, message: 280, warnings: 280, iterations: 92, residual: 104 };
const NUMBER_WIDTH = 118;
const CHARACTER = 7.4;

export interface PlacedColumn extends ColumnDescriptor { left: number; width: number; index: number }

export function placeColumns(columns: readonly ColumnDescriptor[]): { placed: PlacedColumn[]; width: number } {
  let left = 0;
  const placed = columns.map((column, index) => {
    const width = WIDTHS[column.name] ?? Math.max(NUMBER_WIDTH, Math.ceil(column.name.length * CHARACTER) + 34);
    const place = { ...column, left, width, index };
    left += width;
    return place;
  });
  return { placed, width: left };
}

/** Columns that show between two pixels, the first one left out: it sticks. */
export function columnsInSight(placed: readonly PlacedColumn[], from: number, to: number): PlacedColumn[] {
  return placed.filter((column) => column.index > 0 && column.left + column.width > from && column.left < to);
}
