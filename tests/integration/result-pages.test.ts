import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { claimChunk } from "@/jobs/chunk-table";
import { pool } from "@/db/client";
import { AppError } from "@/lib/errors";
import type { ResultPage } from "@/lib/schemas/api";
import { readResultPage } from "@/lib/services/results/read-result-page";
import type { PageQuery } from "@/lib/services/results/types";
import { openQueueDatabase } from "../helpers/queue-database";
import { createUser, LEASE_MS, readJob, rowsOf, solveChunks, store, submit, submitPlanned } from "../helpers/queue-jobs";
import { standInRows, type StandInSpec } from "../helpers/stand-in/compile-stored-job";
import { requestCancel } from "@/jobs/queue";
import { db } from "@/db/client";

/** 27,000 rows over eight chunks; 1,500 waters, so that their ids take two rows of job_water. */
const SPEC: StandInSpec = { waters: 1500, cases: 3, axes: [2, 3], valueColumns: 4 };
type Row = ResultPage["rows"][number];

/** Every row as it must come out, from the stand-in's own arrays. */
function expectedRows(spec: StandInSpec): Row[] {
  const solved = standInRows(0, rowsOf(spec), spec.valueColumns);
  const points = spec.axes.reduce((product, length) => product * length, 1);
  return Array.from({ length: solved.count }, (_, row) => ({
    water: `W-${Math.floor(row / (points * spec.cases))}`, case: `case ${"abc"[Math.floor(row / points) % spec.cases]}`,
    axis0: Math.floor((row % points) / spec.axes[1]) / 10, axis1: (row % spec.axes[1]) / 10,
    status: ["ok", "not-converged", "invalid"][solved.status[row]], message: solved.texts[solved.message[row]], warnings: solved.texts[solved.warnings[row]],
    iterations: solved.iterations[row], residual: solved.residual[row],
    ...Object.fromEntries(["pH", "conc:Ca^2+", "v2", "v3"].map((name, column) => [name, Number.isNaN(solved.values[column][row]) ? null : solved.values[column][row]])),
  }));
}

let database: Awaited<ReturnType<typeof openQueueDatabase>>;
let user: string;
let jobId: string;
const expected = expectedRows(SPEC);

beforeAll(async () => {
  database = await openQueueDatabase();
  user = await createUser();
  jobId = await submitPlanned(user, SPEC);
  await solveChunks("batch", SPEC);
});
afterAll(() => database.drop());

const page = async (query: PageQuery, id = jobId) => readResultPage(await readJob(id), query);
const codeOf = async (promise: Promise<unknown>) => promise.then(() => "nothing thrown", (error: unknown) => (error instanceof AppError ? error.code : String(error)));

/** All rows by following cursors. */
async function follow(query: PageQuery, id = jobId, most = Infinity): Promise<{ rows: Row[]; indices: number[]; cursor: string | null }> {
  const rows: Row[] = [];
  const indices: number[] = [];
  let cursor: string | null = null;
  do {
    const next: ResultPage = await page({ ...query, cursor }, id);
    expect(next.firstRow).toBe(rows.length);
    rows.push(...next.rows);
    indices.push(...next.rowIndices);
    cursor = next.nextCursor;
  } while (cursor && rows.length < most);
  return { rows, indices, cursor };
}

/** Row indices by a plain comparator: missing last, ties in the job's order. */
function plainOrder(keys: { name: string; descending?: boolean }[], keep: (row: Row) => boolean = () => true): number[] {
  const missing = (cell: unknown) => cell === null || cell === "";
  return expected.flatMap((row, index) => (keep(row) ? [index] : [])).sort((a, b) => {
    for (const { name, descending } of keys) {
      const [x, y] = [expected[a][name], expected[b][name]];
      if (missing(x) || missing(y)) {
        if (missing(x) && missing(y)) continue;
        return missing(x) ? 1 : -1;
      }
      if (x! < y!) return descending ? 1 : -1;
      if (x! > y!) return descending ? -1 : 1;
    }
    return a - b;
  });
}

describe("pages of a finished job", () => {
  it("give every row once, in the job's order, with every column right", async () => {
    const { rows, indices } = await follow({ limit: 1000 });
    expect(indices).toEqual(expected.map((_, index) => index));
    expect(rows).toEqual(expected);
  });

  it("start where an offset says and hold the columns selected alone", async () => {
    const found = await page({ offset: 26_990, limit: 100, select: ["pH", "water", "species"] });
    expect(found).toMatchObject({ firstRow: 26_990, rowCount: 27_000, nextCursor: null });
    expect(found.rows).toEqual(expected.slice(26_990).map((row) => ({ pH: row.pH, water: row.water, "conc:Ca^2+": row["conc:Ca^2+"] })));
    expect(found.columns.map((column) => column.name)).toEqual(["pH", "water", "conc:Ca^2+"]);
    expect((await page({ offset: 30_000 })).rows).toEqual([]);
  });

  it("refuse limits and offsets out of range", async () => {
    for (const query of [{ limit: 0 }, { limit: 1001 }, { limit: 1.5 }, { offset: -1 }]) expect(await codeOf(page(query))).toBe("bad-request");
  });
});

describe("sorting the whole job", () => {
  it.each([
    ["pH", [{ name: "pH" }]], ["-pH", [{ name: "pH", descending: true }]], ["water", [{ name: "water" }]], ["-case,v3", [{ name: "case", descending: true }, { name: "v3" }]],
    ["status,-axis1,iterations", [{ name: "status" }, { name: "axis1", descending: true }, { name: "iterations" }]],
    ["message,-warnings", [{ name: "message" }, { name: "warnings", descending: true }]], ["residual,-conc:Ca^2 ", [{ name: "residual" }, { name: "conc:Ca^2+", descending: true }]],
  ])("by %s agrees with a plain sort", async (sort, keys) => {
    const order = plainOrder(keys);
    const first = await page({ sort, limit: 500 });
    expect(first.rowIndices).toEqual(order.slice(0, 500));
    expect(first.rows).toEqual(order.slice(0, 500).map((index) => expected[index]));
    const last = await page({ sort, offset: 26_600, limit: 500 });
    expect(last.rowIndices).toEqual(order.slice(26_600));
    expect(last.nextCursor).toBeNull();
  });
});

describe("filtering the whole job", () => {
  it.each<[string[], (row: Row) => boolean]>([
    [["pH > 4"], (row) => row.pH !== null && Number(row.pH) > 4],
    [["pH null"], (row) => row.pH === null],
    [["status != ok", "case = case b"], (row) => row.status !== "ok" && row.case === "case b"],
    [["message != null", "axis1 >= 0.2"], (row) => row.message !== "" && Number(row.axis1) >= 0.2],
    [["water = W-1499"], (row) => row.water === "W-1499"],
    [["warnings = ill-conditioned", "conc:Ca^2  <= -1", "iterations = 7"], (row) => row.warnings === "ill-conditioned" && row["conc:Ca^2+"] !== null && Number(row["conc:Ca^2+"]) <= -1 && row.iterations === 7],
    [["pH > 100"], () => false],
  ])("by %s gives just the rows that meet it", async (where, keep) => {
    const order = plainOrder([], keep);
    const found = await page({ where, limit: 1000 });
    expect(found.rowCount).toBe(order.length);
    expect(found.rowIndices).toEqual(order.slice(0, 1000));
    expect(found.rows).toEqual(order.slice(0, 1000).map((index) => expected[index]));
    const sorted = await page({ where, sort: "-v2", limit: 1000 });
    expect(sorted.rowIndices).toEqual(plainOrder([{ name: "v2", descending: true }], keep).slice(0, 1000));
  });
});

describe("orders", () => {
  it("are made once for the same question and at most eight are kept", async () => {
    const orders = async () => (await pool().query("select id from result_order where job_id = $1 order by id", [jobId])).rows.map((row) => row.id);
    await pool().query("delete from result_order");
    await Promise.all([page({ where: ["pH>1", "v2<0"] }), page({ where: ["v2<0", "pH>1"] }), page({ where: ["pH > 1", "v2 < 0"] })]);
    expect(await orders()).toHaveLength(1);
    for (let value = 0; value < 12; value++) await page({ where: [`pH > ${value / 10}`] });
    expect(await orders()).toHaveLength(8);
  });

  it("a cursor whose order was dropped is a conflict, and a damaged or foreign one a bad request", async () => {
    const { nextCursor } = await page({ sort: "v3" });
    expect(await codeOf(page({ sort: "-v3", cursor: nextCursor }))).toBe("bad-request");
    expect(await codeOf(page({ cursor: nextCursor }))).toBe("bad-request");
    expect(await codeOf(page({ sort: "v3", cursor: "bm9uc2Vuc2U" }))).toBe("bad-request");
    expect(await codeOf(page({ sort: "v3", cursor: nextCursor }))).toBe("nothing thrown");
    await pool().query("delete from result_order");
    expect(await codeOf(page({ sort: "v3", cursor: nextCursor }))).toBe("conflict");
  });
});

/** The first three chunks, one after the other, so in order. */
async function claimThree() {
  const chunks = [];
  for (let count = 0; count < 3; count++) chunks.push(await claimChunk("batch", "wrk_a", LEASE_MS));
  return chunks;
}

describe("pages of a job under way", () => {
  it("has no rows and no columns before planning, and a cursor that works later", async () => {
    const id = await submit(user, SPEC);
    const empty = await page({ sort: "pH" }, id);
    expect(empty).toMatchObject({ columns: [], rows: [], rowCount: 0 });
    expect(empty.nextCursor).not.toBeNull();
  });

  it("gives rows up to the first chunk still to come; following cursors to the end gives every row once", async () => {
    const id = await submitPlanned(user, SPEC);
    const chunks = await claimThree();
    await store(chunks[0]!, SPEC);
    await store(chunks[2]!, SPEC);
    const before = await follow({ limit: 300 }, id, 512);
    expect(before.indices).toEqual(Array.from({ length: 512 }, (_, index) => index));
    const again = await page({ cursor: before.cursor, limit: 300 }, id);
    expect(again).toMatchObject({ rows: [], firstRow: 512 });
    await store(chunks[1]!, SPEC);
    await solveChunks("batch", SPEC);
    const seen = [...before.indices];
    for (let cursor = again.nextCursor; cursor;) {
      const next: ResultPage = await page({ cursor, limit: 1000 }, id);
      seen.push(...next.rowIndices);
      cursor = next.nextCursor;
    }
    expect(seen).toEqual(expected.map((_, index) => index));
  });

  it("keeps a sorted cursor in its order while chunks arrive, and a new question sees them", async () => {
    const id = await submitPlanned(user, SPEC);
    await solveChunks("batch", SPEC, 3);
    const keys = [{ name: "pH" }];
    const firstOrder = plainOrder(keys).filter((index) => index < 1536);
    const first = await page({ sort: "pH", limit: 600 }, id);
    expect(first.rowIndices).toEqual(firstOrder.slice(0, 600));
    await solveChunks("batch", SPEC);
    const second = await page({ sort: "pH", limit: 1000, cursor: first.nextCursor }, id);
    expect(second.rowIndices).toEqual(firstOrder.slice(600));
    expect(second.rowCount).toBe(1536);
    expect((await page({ sort: "pH", limit: 600 }, id)).rowIndices).toEqual(plainOrder(keys).slice(0, 600));
  });

  it("gives a cancelled job's finished rows, holes left out", async () => {
    const id = await submitPlanned(user, SPEC);
    const chunks = await claimThree();
    await store(chunks[0]!, SPEC);
    await store(chunks[2]!, SPEC);
    await db().transaction((tx) => requestCancel(tx, id));
    const { indices, cursor } = await follow({ limit: 1000 }, id);
    expect(cursor).toBeNull();
    expect(indices).toEqual(Array.from({ length: 1536 }, (_, index) => index).filter((index) => index < 512 || index >= 1024));
  });
});
