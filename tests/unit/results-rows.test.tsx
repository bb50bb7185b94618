// @vitest-environment jsdom
import { act, cleanup, renderHook } from "@testing-library/react";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { useRows } from "@/components/results/use-rows";
import { PAGE_ROWS } from "@/components/results/row-pages";

interface Asked { firstRow: number; sort: string | null; signal: AbortSignal; answer: (rowCount: number) => Promise<void>; refuse: () => Promise<void> }
let asked: Asked[];

const settle = (): Promise<void> => act(async () => { for (let k = 0; k < 8; k++) await Promise.resolve(); });

beforeEach(() => {
  asked = [];
  vi.useFakeTimers();
  vi.stubGlobal("fetch", (address: string, { signal }: { signal: AbortSignal }) => new Promise((resolve) => {
    const query = new URL(address, "http://tufa.test").searchParams;
    const firstRow = Number(query.get("firstRow"));
    const reply = (status: number, body: unknown): Promise<void> => { resolve(new Response(JSON.stringify(body), { status, headers: { "content-type": "application/json" } })); return settle(); };
    asked.push({
      firstRow, sort: query.get("sort"), signal,
      answer: (rowCount) => reply(200, { rowCount, rows: Array.from({ length: Math.min(PAGE_ROWS, rowCount - firstRow) }, (_, k) => ({ water: `${query.get("sort") ?? "as solved"} ${firstRow + k} of ${rowCount}` })) }),
      refuse: () => reply(400, { detail: "two faults", errors: [{ pointer: "/where/0", code: "unknown-column", message: "There is no column \"pX\"", remedy: "Did you mean \"pH\"?" }] }),
    });
  }));
});
afterEach(() => { cleanup(); vi.unstubAllGlobals(); vi.useRealTimers(); });

const view = () => renderHook(({ sort, revision }: { sort: string; revision: number }) => useRows("job_1", { where: [], sort, select: "" }, revision), { initialProps: { sort: "", revision: 0 } });

describe("rows as they come into sight", () => {
  it("are fetched once, by position", async () => {
    const { result } = view();
    await asked[0].answer(100_000);
    expect(result.current.rowCount).toBe(100_000);
    expect(result.current.row(7)?.water).toBe("as solved 7 of 100000");
    act(() => result.current.show(0, 40));
    expect(asked).toHaveLength(1);
    act(() => { vi.advanceTimersByTime(200); result.current.show(50_000, 50_040); });
    expect(asked.map((each) => each.firstRow)).toEqual([0, 49_800, 50_000]);
  });

  it("are not asked for page by page while a scrollbar is dragged past them, nor waited for", async () => {
    const { result } = view();
    await asked[0].answer(1_000_000);
    act(() => { for (let k = 0; k < 100; k++) { result.current.show(k * 9000, k * 9000 + 40); vi.advanceTimersByTime(16); } });
    expect(asked.length).toBeLessThan(30);
    act(() => void vi.advanceTimersByTime(200));
    expect(asked.at(-1)?.firstRow).toBe(891_000);
    expect(asked.slice(1, -2).every((each) => each.signal.aborted)).toBe(true);
    expect(asked.at(-1)?.signal.aborted).toBe(false);
  });

  it("stay until those of another order are here, and are told to be old till then", async () => {
    const { result, rerender } = view();
    await asked[0].answer(500);
    rerender({ sort: "-pH", revision: 0 });
    expect(result.current.isStale).toBe(true);
    expect(result.current.row(0)?.water).toBe("as solved 0 of 500");
    await asked[1].answer(500);
    expect(result.current.isStale).toBe(false);
    expect(result.current.row(0)?.water).toBe("-pH 0 of 500");
  });

  it("of an order given up are never shown, however late they come", async () => {
    const { result, rerender } = view();
    await asked[0].answer(500);
    rerender({ sort: "pH", revision: 0 });
    rerender({ sort: "", revision: 0 });
    await asked[1].answer(500);
    expect(asked[1].signal.aborted).toBe(true);
    expect(result.current.row(0)?.water).toBe("as solved 0 of 500");
  });

  it("are read again as the job goes on, and change all at once", async () => {
    const { result, rerender } = view();
    await asked[0].answer(400);
    act(() => result.current.show(190, 230));
    await asked[1].answer(400);
    rerender({ sort: "", revision: 1 });
    await asked[2].answer(900);
    expect(result.current.rowCount).toBe(400);
    await asked[3].answer(900);
    expect(result.current.rowCount).toBe(900);
    expect([195, 205].map((index) => result.current.row(index)?.water)).toEqual(["as solved 195 of 900", "as solved 205 of 900"]);
  });

  it("give the server's reason, with its remedy, where there are none", async () => {
    const { result } = view();
    await asked[0].refuse();
    expect(result.current.error).toBe("There is no column \"pX\". Did you mean \"pH\"?");
    expect(result.current.rowCount).toBeNull();
  });
});
