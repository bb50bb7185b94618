import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  BlockBuilder, cellBytes, columnSlice, decodeBlock, decodeCells, decodeTexts, encodeBlock, FIXED_COLUMNS, type StoredColumn, textTableOffset,
} from "@/lib/results/block";
import { planChunks, ROW_ALIGNMENT } from "@/lib/results/chunk-plan";
import type { SolvedRows } from "@/lib/chemistry/types";

const double = fc.double({ noDefaultInfinity: false, noNaN: false });

/** Solved rows of any size, texts with any characters, numbers with any bits. */
const solvedRows: fc.Arbitrary<SolvedRows> = fc.record({
  count: fc.integer({ min: 1, max: 300 }), columns: fc.integer({ min: 0, max: 5 }), from: fc.integer({ min: 0, max: 1000 }).map((n) => n * 256),
  texts: fc.array(fc.string({ unit: "grapheme" }), { maxLength: 5 }).map((texts) => ["", ...texts]),
}).chain(({ count, columns, from, texts }) => {
  const code = fc.array(fc.integer({ min: 0, max: texts.length - 1 }), { minLength: count, maxLength: count }).map((codes) => Int32Array.from(codes));
  const doubles = fc.array(double, { minLength: count, maxLength: count }).map((values) => Float64Array.from(values));
  return fc.record({
    from: fc.constant(from), count: fc.constant(count), texts: fc.constant(texts), message: code, warnings: code,
    status: fc.array(fc.integer({ min: 0, max: 2 }), { minLength: count, maxLength: count }).map((codes) => Uint8Array.from(codes)),
    iterations: fc.array(fc.integer({ min: 0, max: 2 ** 31 - 1 }), { minLength: count, maxLength: count }).map((values) => Int32Array.from(values)),
    residual: doubles, values: fc.array(doubles, { minLength: columns, maxLength: columns }),
  });
});

const textsOf = (codes: Int32Array, texts: string[]) => Array.from(codes, (code) => texts[code]);

describe("result block", () => {
  it("gives back every cell bit for bit", () => {
    fc.assert(fc.property(solvedRows, (rows) => {
      const decoded = decodeBlock(encodeBlock(rows).bytes);
      expect(decoded.firstRow).toBe(rows.from);
      expect(decoded.rowCount).toBe(rows.count);
      expect(decoded.status).toEqual(rows.status);
      expect(decoded.iterations).toEqual(rows.iterations);
      expect(decoded.residual).toEqual(rows.residual);
      expect(decoded.values).toEqual(rows.values);
      expect(textsOf(decoded.message, decoded.texts)).toEqual(textsOf(rows.message, rows.texts));
      expect(textsOf(decoded.warnings, decoded.texts)).toEqual(textsOf(rows.warnings, rows.texts));
    }), { seed: 11 });
  });

  it("lets one column be read from bytes at an offset that row count and column number give", () => {
    fc.assert(fc.property(solvedRows, (rows) => {
      const { bytes } = encodeBlock(rows);
      const read = (column: StoredColumn) => {
        const { offset, length } = columnSlice(rows.count, column);
        expect(offset % 8).toBe(0);
        expect(length).toBe(rows.count * cellBytes(column));
        // An odd start in memory, as a driver's buffer may have.
        const shifted = new Uint8Array(length + 3);
        shifted.set(bytes.subarray(offset, offset + length), 3);
        return decodeCells(column, shifted.subarray(3));
      };
      expect(read("status")).toEqual(rows.status);
      expect(read("iterations")).toEqual(rows.iterations);
      rows.values.forEach((values, column) => expect(read(column)).toEqual(values));
      const texts = decodeTexts(bytes.subarray(textTableOffset(rows.count, rows.values.length)));
      expect(textsOf(read("message") as Int32Array, texts)).toEqual(textsOf(rows.message, rows.texts));
    }), { seed: 12 });
  });

  it("has the same bytes however its rows are cut into pieces", () => {
    fc.assert(fc.property(solvedRows, fc.array(fc.integer({ min: 1, max: 100 })), (rows, cuts) => {
      const builder = new BlockBuilder(rows.from, rows.count, rows.values.length);
      for (let from = 0, cut = 0; from < rows.count; cut++) {
        const to = Math.min(rows.count, from + (cuts[cut] ?? rows.count));
        builder.add({
          ...rows, from: rows.from + from, count: to - from, status: rows.status.subarray(from, to), message: rows.message.subarray(from, to),
          warnings: rows.warnings.subarray(from, to), iterations: rows.iterations.subarray(from, to), residual: rows.residual.subarray(from, to),
          values: rows.values.map((values) => values.subarray(from, to)),
        });
        from = to;
      }
      expect(builder.finish().bytes).toEqual(encodeBlock(rows).bytes);
    }), { seed: 13 });
  });

  it("counts rows by status and those with a warning", () => {
    const rows: SolvedRows = {
      from: 0, count: 4, status: Uint8Array.of(0, 2, 1, 0), message: Int32Array.of(0, 1, 2, 0), warnings: Int32Array.of(0, 0, 1, 1),
      iterations: new Int32Array(4), residual: new Float64Array(4), values: [], texts: ["", "a", "b"],
    };
    expect(encodeBlock(rows).counts).toEqual({ ok: 2, invalid: 1, notConverged: 1, warned: 2 });
  });

  it("refuses rows that do not follow, missing rows, other columns and foreign bytes", () => {
    const rows = (from: number, count: number): SolvedRows => ({
      from, count, status: new Uint8Array(count), message: new Int32Array(count), warnings: new Int32Array(count), iterations: new Int32Array(count),
      residual: new Float64Array(count), values: [new Float64Array(count)], texts: [""],
    });
    expect(() => new BlockBuilder(0, 8, 1).add(rows(1, 2))).toThrow(/do not follow/);
    expect(() => new BlockBuilder(0, 1, 1).add(rows(0, 2))).toThrow(/do not follow/);
    expect(() => new BlockBuilder(0, 8, 2).add(rows(0, 2))).toThrow(/2 value columns was given 1/);
    expect(() => new BlockBuilder(0, 8, 1).finish()).toThrow(/holds only 0/);
    expect(() => decodeBlock(new Uint8Array(100))).toThrow(/Not a result block/);
    expect(() => decodeBlock(encodeBlock(rows(0, 8)).bytes.subarray(0, -1))).toThrow(/does not fit its header/);
  });

  it("keeps all fixed columns apart", () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 8192 }), (rowCount) => {
      const slices = [...FIXED_COLUMNS, 0, 1].map((column) => columnSlice(rowCount, column as StoredColumn));
      slices.slice(1).forEach((slice, index) => expect(slice.offset).toBeGreaterThanOrEqual(slices[index].offset + slices[index].length));
    }), { seed: 14 });
  });
});

describe("chunk plan", () => {
  it("covers every row once, with borders at multiples of 256 and blocks of at most 8,192 rows and 4 MiB", () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 3_000_000 }), fc.integer({ min: 0, max: 400 }), (rowCount, columns) => {
      let next = 0;
      planChunks(rowCount, columns).forEach((chunk, index) => {
        expect(chunk.index).toBe(index);
        expect(chunk.firstRow).toBe(next);
        expect(chunk.firstRow % ROW_ALIGNMENT).toBe(0);
        expect(chunk.rowCount).toBeGreaterThan(0);
        expect(chunk.rowCount).toBeLessThanOrEqual(index < 4 ? 512 : 8192);
        expect(textTableOffset(chunk.rowCount, columns)).toBeLessThanOrEqual(4 * 1024 * 1024);
        next += chunk.rowCount;
      });
      expect(next).toBe(rowCount);
    }), { seed: 15 });
  });

  it("has no chunk for no row", () => {
    expect(planChunks(0, 10)).toEqual([]);
  });
});
