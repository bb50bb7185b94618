/** Widths and places of the table's columns, and which of them are in sight. */
import type { ColumnDescriptor } from "@/lib/schemas/columns";

const WIDTHS: Record<string, number> = { water: 168, case: 176, status: 112, message: 280, warnings: 280, iterations: 92, residual: 104 };
/** On a narrow screen the first column sticks: it must leave room for another one. */
const NARROW_WIDTHS: Record<string, number> = { ...WIDTHS, water: 128, case: 136, status: 92 };
const NARROW_BELOW = 560;
const NUMBER_WIDTH = 118;
const CHARACTER = 7.4;

export interface PlacedColumn extends ColumnDescriptor { left: number; width: number; index: number }

/** @param boxWidth pixels of the box that the table is seen in. */
export function placeColumns(columns: readonly ColumnDescriptor[], boxWidth: number): { placed: PlacedColumn[]; width: number } {
  const widths = boxWidth < NARROW_BELOW ? NARROW_WIDTHS : WIDTHS;
  let left = 0;
  const placed = columns.map((column, index) => {
    const width = widths[column.name] ?? Math.max(NUMBER_WIDTH, Math.ceil(column.name.length * CHARACTER) + 34);
    const place = { ...column, left, width, index };
    left += width;
    return place;
  });
  return { placed, width: left };
}

/** Pixels drawn beyond both edges, so that Tab and the arrows find the next header there. */
const OVERSCAN = 160;

/** First and last column that show between two pixels, the first of all left out: it sticks. Empty where last < first. */
export function columnsInSight(placed: readonly PlacedColumn[], from: number, to: number): { first: number; last: number } {
  let first = 1;
  while (first < placed.length - 1 && placed[first].left + placed[first].width <= from - OVERSCAN) first++;
  let last = placed.length - 1;
  while (last >= first && placed[last].left >= to + OVERSCAN) last--;
  return { first, last };
}
