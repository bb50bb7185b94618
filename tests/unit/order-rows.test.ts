import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { applyCondition, type LoadedColumn, sortPositions } from "@/lib/results/order-rows";

const numbers = fc.array(fc.oneof(fc.double({ noNaN: false }), fc.constantFrom(0, -0, Number.NaN, 1, -1, Infinity, -Infinity)), { maxLength: 200 });
const texts = ["", "a", "ab", "B", "ü", "z", "a"];

const cellsOf = (column: LoadedColumn): (number | string | null)[] => (column.kind === "number"
  ? Array.from(column.data, (cell) => (Number.isNaN(cell) ? null : cell)) : Array.from(column.codes, (code) => column.texts[code] || null));

/** The same order by a comparator: missing last in either direction, ties by position. */
function plainSort(kept: Uint8Array, keys: { column: LoadedColumn; descending: boolean }[]): number[] {
  const cells = keys.map((key) => cellsOf(key.column));
  return Array.from(kept.keys()).filter((row) => kept[row]).sort((a, b) => {
    for (const [index, { descending }] of keys.entries()) {
      const [x, y] = [cells[index][a], cells[index][b]];
      if (x === null || y === null) {
        if (x === y) continue;
        return x === null ? 1 : -1;
      }
      if (x < y) return descending ? 1 : -1;
      if (x > y) return descending ? -1 : 1;
    }
    return a - b;
  });
}

describe("sorting rows", () => {
  it("agrees with a comparator sort over any numbers, texts, several keys and both directions", () => {
    fc.assert(fc.property(numbers, fc.infiniteStream(fc.nat()), fc.boolean(), fc.boolean(), fc.boolean(), (values, stream, first, second, textFirst) => {
      const next = () => stream.next().value as number;
      const number: LoadedColumn = { kind: "number", data: Float64Array.from(values) };
      const text: LoadedColumn = { kind: "text", texts, codes: Uint32Array.from(values, () => next() % texts.length) };
      const kept = Uint8Array.from(values, () => (next() % 4 === 0 ? 0 : 1));
      const keys = [{ column: textFirst ? text : number, descending: first }, { column: textFirst ? number : text, descending: second }];
      expect(Array.from(sortPositions(kept, keys))).toEqual(plainSort(kept, keys));
    }), { seed: 21, numRuns: 300 });
  });

  it("keeps the job's order without keys", () => {
    expect(Array.from(sortPositions(Uint8Array.of(1, 0, 1, 1), []))).toEqual([0, 2, 3]);
  });
});

describe("filtering rows", () => {
  const number: LoadedColumn = { kind: "number", data: Float64Array.of(1, Number.NaN, -2, 7, 0) };
  const text: LoadedColumn = { kind: "text", texts: ["", "ok", "invalid"], codes: Uint32Array.of(1, 2, 0, 1, 2) };
  it.each([
    ["=", 7, number, [3]], ["!=", 7, number, [0, 2, 4]], ["<", 1, number, [2, 4]], ["<=", 1, number, [0, 2, 4]], [">", 0, number, [0, 3]],
    [">=", 0, number, [0, 3, 4]], ["null", null, number, [1]], ["not-null", null, number, [0, 2, 3, 4]],
    ["=", "ok", text, [0, 3]], ["!=", "ok", text, [1, 4]], ["null", null, text, [2]], ["not-null", null, text, [0, 1, 3, 4]], [">", "j", text, [0, 3]],
  ] as const)("%s %s", (operator, value, column, expected) => {
    const kept = new Uint8Array(5).fill(1);
    applyCondition({ operator, value }, column, kept);
    expect(Array.from(kept.keys()).filter((row) => kept[row])).toEqual(expected);
  });
});
