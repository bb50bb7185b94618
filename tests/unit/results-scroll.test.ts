import { describe, expect, it } from "vitest";
import { columnsInSight, placeColumns } from "@/components/results/column-layout";
import { moveCell, moveInHead } from "@/components/results/move-cell";
import { PAGE_ROWS, RowPages } from "@/components/results/row-pages";
import { makeScrollMap, ROW_HEIGHT } from "@/components/results/scroll-map";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

const VIEW = 520;
const COUNTS = [0, 1, 7, 100_000, 576_923, 576_924, 1_000_000, 50_000_000];

describe("the scrollbar of a table", () => {
  it.each(COUNTS)("shows the first of %d rows at its top and the last at its bottom, exactly", (rows) => {
    const map = makeScrollMap(rows, VIEW);
    const bottom = Math.max(0, map.contentHeight - VIEW);
    expect(map.topRowAt(0)).toBe(0);
    expect(map.topRowAt(bottom) + VIEW / ROW_HEIGHT).toBeCloseTo(Math.max(rows, VIEW / ROW_HEIGHT), 9);
    expect(map.scrollTopOf(map.lastTopRow)).toBeCloseTo(bottom, 6);
  });

  it.each(COUNTS)("never takes more pixels for %d rows than a browser draws", (rows) => {
    expect(makeScrollMap(rows, VIEW).contentHeight).toBeLessThan(16_700_000);
  });

  it.each(COUNTS)("goes down through %d rows as it goes down, and back to where it was", (rows) => {
    const map = makeScrollMap(rows, VIEW);
    const bottom = Math.max(1, map.contentHeight - VIEW);
    let before = -1;
    for (let k = 0; k <= 1000; k++) {
      const row = map.topRowAt((k / 1000) * bottom);
      expect(row).toBeGreaterThanOrEqual(before);
      expect(map.topRowAt(map.scrollTopOf(row))).toBeCloseTo(row, 6);
      before = row;
    }
  });

  it("keeps to the table where a browser bounces beyond its ends", () => {
    for (const rows of [100, 1_000_000]) {
      const map = makeScrollMap(rows, VIEW);
      expect(map.topRowAt(-80)).toBe(0);
      expect(map.topRowAt(map.contentHeight + 80)).toBe(map.lastTopRow);
    }
  });

  it("is to scale while the rows fit", () => {
    const map = makeScrollMap(100_000, VIEW);
    expect(map.isScaled).toBe(false);
    expect(map.topRowAt(ROW_HEIGHT * 4321)).toBe(4321);
  });
});

describe("pages of rows", () => {
  const page = (of: number) => Array.from({ length: PAGE_ROWS }, (_, k) => ({ at: of * PAGE_ROWS + k }));

  it("give the row asked for, and nothing for a page that is not here", () => {
    const pages = new RowPages();
    pages.put(3, page(3));
    expect(pages.row(3 * PAGE_ROWS + 17)).toEqual({ at: 3 * PAGE_ROWS + 17 });
    expect(pages.row(2 * PAGE_ROWS)).toBeNull();
    expect(pages.row(4 * PAGE_ROWS)).toBeNull();
  });

  it("name what a span lacks, each page once", () => {
    const pages = new RowPages();
    pages.put(1, page(1));
    expect(pages.missing(0, 3 * PAGE_ROWS)).toEqual([0, 2]);
    expect(pages.missing(PAGE_ROWS, 2 * PAGE_ROWS)).toEqual([]);
    expect(pages.missing(-50, 1)).toEqual([0]);
  });

  it("drop the page that was seen longest ago, never the one in sight", () => {
    const pages = new RowPages();
    for (let k = 0; k < 40; k++) pages.put(k, page(k));
    pages.missing(0, 1);
    for (let k = 40; k < 60; k++) { pages.put(k, page(k)); pages.missing(0, 1); }
    expect(pages.row(0)).toEqual({ at: 0 });
    expect(pages.row(PAGE_ROWS)).toBeNull();
    expect(pages.row(59 * PAGE_ROWS)).toEqual({ at: 59 * PAGE_ROWS });
  });
});

describe("keys in the grid", () => {
  const extent = { rows: 1_000_000, columns: 30, page: 20 };
  const press = (key: string, more = {}) => ({ key, ctrlKey: false, metaKey: false, altKey: false, ...more });

  it.each([
    ["ArrowDown", {}, { row: 101, column: 5 }], ["ArrowUp", {}, { row: 99, column: 5 }], ["ArrowRight", {}, { row: 100, column: 6 }], ["ArrowLeft", {}, { row: 100, column: 4 }],
    ["PageDown", {}, { row: 120, column: 5 }], ["PageUp", {}, { row: 80, column: 5 }], ["Home", {}, { row: 100, column: 0 }], ["End", {}, { row: 100, column: 29 }],
    ["Home", { ctrlKey: true }, { row: 0, column: 0 }], ["End", { ctrlKey: true }, { row: 999_999, column: 29 }], ["End", { metaKey: true }, { row: 999_999, column: 29 }],
  ])("%s %o leads to %o", (key, more, to) => expect(moveCell(press(key, more), { row: 100, column: 5 }, extent)).toEqual(to));

  it("stop at the edges", () => {
    expect(moveCell(press("PageUp"), { row: 3, column: 0 }, extent)).toEqual({ row: 0, column: 0 });
    expect(moveCell(press("ArrowLeft"), { row: 3, column: 0 }, extent)).toEqual({ row: 3, column: 0 });
    expect(moveCell(press("PageDown"), { row: 999_995, column: 29 }, extent)).toEqual({ row: 999_999, column: 29 });
  });

  it.each(["a", "Tab", "Escape", " ", "Enter", "F5"])("leave %s to the browser", (key) => expect(moveCell(press(key), { row: 0, column: 0 }, extent)).toBeNull());
  it("leave the browser's own combinations alone", () => {
    expect(moveCell(press("ArrowLeft", { altKey: true }), { row: 0, column: 3 }, extent)).toBeNull();
    expect(moveCell(press("ArrowDown", { ctrlKey: true }), { row: 0, column: 3 }, extent)).toBeNull();
    expect(moveInHead(press("ArrowLeft", { altKey: true }), 3, 30)).toBeNull();
  });

  it("walk along the headers, and down from them", () => {
    expect(moveInHead(press("ArrowRight"), 29, 30)).toBe(29);
    expect(moveInHead(press("ArrowLeft"), 7, 30)).toBe(6);
    expect(moveInHead(press("End"), 7, 30)).toBe(29);
    expect(moveInHead(press("ArrowDown"), 7, 30)).toBe("rows");
    expect(moveInHead(press("Enter"), 7, 30)).toBeNull();
  });

  it("do nothing in an empty table", () => expect(moveCell(press("ArrowDown"), null, { ...extent, rows: 0 })).toBeNull());
});

describe("columns in sight", () => {
  const columns = Array.from({ length: 200 }, (_, k): ColumnDescriptor => ({ name: `conc:X${k}`, type: "number", unit: "mol/L", basis: null, description: "", group: "species" }));

  it("are few of many, and hold all that shows, wherever the table is scrolled to", () => {
    const { placed, width } = placeColumns(columns, 900);
    for (let left = 0; left <= width - 900; left += 371) {
      const { first, last } = columnsInSight(placed, left, left + 900);
      expect(last - first).toBeLessThan(16);
      for (const column of placed.slice(1)) if (column.left + column.width > left && column.left < left + 900) expect(column.index >= first && column.index <= last).toBe(true);
    }
  });

  it("are none besides the first where there is one column only", () => {
    const { placed } = placeColumns(columns.slice(0, 1), 900);
    const { first, last } = columnsInSight(placed, 0, 900);
    expect(placed.slice(first, last + 1)).toEqual([]);
  });
});
