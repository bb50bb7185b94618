// @vitest-environment jsdom
import { act, cleanup, fireEvent, render, screen, within } from "@testing-library/react";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { ResultsTable } from "@/components/results/results-table";
import type { RowWindow } from "@/components/results/use-rows";
import { type ColumnDescriptor, LEADING_COLUMNS } from "@/lib/schemas/columns";

const column = (name: string, group: ColumnDescriptor["group"], unit = ""): ColumnDescriptor => ({ name, type: "number", unit, basis: null, description: "", group });
const COLUMNS = [LEADING_COLUMNS[0], LEADING_COLUMNS[1], LEADING_COLUMNS[2], column("pH", "main"), column("ANC", "main", "µeq/L")];
const MANY = 1_000_000;
const write = vi.fn((text: string) => Promise.resolve(void text));

/** jsdom lays nothing out: the grid is then taken to be 1000 by 480 pixels. */
class StillObserver { observe(): void {} disconnect(): void {} unobserve(): void {} }
beforeEach(() => {
  vi.stubGlobal("ResizeObserver", StillObserver);
  Object.defineProperty(navigator, "clipboard", { configurable: true, value: { writeText: write } });
  write.mockClear();
});
afterEach(() => { cleanup(); vi.unstubAllGlobals(); });

const rowAt = (index: number) => (index % 3 === 2
  ? { water: `W-${index}`, case: "c", status: "invalid", message: "no charge balance", warnings: null, pH: null, ANC: null }
  : { water: `W-${index}`, case: "c", status: "ok", message: null, warnings: index === 1 ? "poor ion balance" : null, pH: 7 + index * 1e-6, ANC: -12.345678 });

function shown(rowCount = MANY, more: Partial<RowWindow> = {}) {
  const rows: RowWindow = { rowCount, error: null, isStale: false, row: rowAt, show: vi.fn(), ...more };
  const onSort = vi.fn();
  const draw = (order: string, sort = "") => <ResultsTable columns={COLUMNS} rows={rows} sort={sort} order={order} onSort={onSort} label="Rows" announce={vi.fn()} />;
  const view = render(draw("as solved"));
  const grid = screen.getByRole("grid");
  const press = (key: string, init = {}): void => { fireEvent.keyDown(grid, { key, ...init }); };
  /** Row and column of the active cell, both from 1 as ARIA counts them, the head being row 1. */
  const active = (): string | null => {
    const cell = document.getElementById(grid.getAttribute("aria-activedescendant") ?? "");
    return cell && `${cell.parentElement?.getAttribute("aria-rowindex")}:${cell.getAttribute("aria-colindex")}`;
  };
  return { rows, onSort, grid, press, active, reorder: (order: string, sort: string) => view.rerender(draw(order, sort)) };
}

describe("the table of a job's rows", () => {
  it("tells its whole size and draws what is in sight", () => {
    const { grid, rows } = shown();
    expect(grid.getAttribute("aria-rowcount")).toBe(String(MANY + 1));
    expect(grid.getAttribute("aria-colcount")).toBe(String(COLUMNS.length));
    expect(within(grid).getAllByRole("row").length).toBeLessThan(60);
    expect(rows.show).toHaveBeenCalled();
  });

  it("moves by keys to any cell of a million rows, always drawn", () => {
    const { grid, press, active } = shown();
    act(() => grid.focus());
    expect(active()).toBe("2:1");
    press("ArrowDown");
    press("ArrowRight");
    expect(active()).toBe("3:2");
    press("End", { ctrlKey: true });
    expect(active()).toBe(`${MANY + 1}:5`);
    press("ArrowUp");
    press("Home");
    expect(active()).toBe(`${MANY}:1`);
    press("Home", { ctrlKey: true });
    for (let k = 0; k < 200; k++) press("ArrowDown");
    expect(active()).toBe("202:1");
  });

  it("leads from the first row up into the head, along it, and down again", () => {
    const { grid, press, active } = shown();
    act(() => grid.focus());
    press("ArrowUp");
    const focused = (): string => document.activeElement?.textContent ?? "";
    expect(focused()).toMatch(/^water/);
    fireEvent.keyDown(document.activeElement!, { key: "End" });
    expect(focused()).toMatch(/^ANC/);
    fireEvent.keyDown(document.activeElement!, { key: "ArrowLeft" });
    expect(focused()).toMatch(/^pH/);
    fireEvent.keyDown(document.activeElement!, { key: "ArrowDown" });
    expect(document.activeElement).toBe(grid);
    expect(active()).toBe("2:4");
  });

  it("sorts by a header, keeps the focus on it, and begins at the top", () => {
    const { grid, press, onSort, reorder, active } = shown();
    press("End", { ctrlKey: true });
    expect(Number(within(grid).getAllByRole("row")[1].getAttribute("aria-rowindex"))).toBeGreaterThan(900_000);
    const header = within(screen.getByRole("columnheader", { name: /^case/ })).getByRole("button");
    act(() => header.focus());
    fireEvent.click(header);
    expect(onSort).toHaveBeenCalledWith("case");
    reorder("by case", "case");
    expect(document.activeElement).toBe(header);
    expect(screen.getByRole("columnheader", { name: /^case/ }).getAttribute("aria-sort")).toBe("ascending");
    expect(active()).toBeNull();
    expect(within(grid).getAllByRole("row")[1].getAttribute("aria-rowindex")).toBe("2");
    reorder("by case, down", "-case");
    expect(screen.getByRole("columnheader", { name: /^case/ }).getAttribute("aria-sort")).toBe("descending");
  });

  it("copies the whole number of a cell, but leaves a selection's copy to the browser", () => {
    const { grid, press } = shown();
    act(() => grid.focus());
    press("End");
    press("c", { ctrlKey: true });
    expect(write).toHaveBeenCalledWith("-12.345678");
    vi.spyOn(window, "getSelection").mockReturnValue({ toString: () => "7.9" } as Selection);
    press("c", { ctrlKey: true });
    expect(write).toHaveBeenCalledTimes(1);
    vi.restoreAllMocks();
  });

  it.each(["Tab", "Escape", "f", "F5", " "])("leaves %j to the browser", (key) => {
    const { grid } = shown();
    const wasTaken = !fireEvent.keyDown(grid, { key });
    expect(wasTaken).toBe(false);
  });

  it("says why a row failed where its numbers would stand, and marks one with warnings", () => {
    const { grid } = shown();
    const rows = within(grid).getAllByRole("row");
    expect(within(rows[3]).getAllByRole("gridcell").map((cell) => cell.textContent)).toEqual(["W-2", "c", "invalid", "no charge balance", ""]);
    expect(within(rows[2]).getByLabelText("with warnings").closest("[role=gridcell]")?.getAttribute("title")).toBe("poor ion balance");
    expect(within(rows[1]).getAllByRole("gridcell")[4].title).toBe("-12.345678 µeq/L");
  });

  it("holds places for rows still to come, and says when none answers", () => {
    const { grid } = shown(500, { row: () => null });
    expect(within(grid).getAllByText("…").length).toBeGreaterThan(5);
    cleanup();
    shown(0);
    expect(screen.getByText(/No row answers/)).toBeTruthy();
  });
});
