import { createHash } from "node:crypto";
import { tableFromIPC } from "apache-arrow";
import { parse } from "csv-parse/sync";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { db } from "@/db/client";
import { requestCancel } from "@/jobs/queue";
import { AppError } from "@/lib/errors";
import { csvText } from "@/lib/results/formats/csv";
import type { ResultPage } from "@/lib/schemas/api";
import { readResultPage } from "@/lib/services/results/read-result-page";
import { streamResults } from "@/lib/services/results/stream-results";
import type { ExportQuery } from "@/lib/services/results/types";
import { openQueueDatabase } from "../helpers/queue-database";
import { createUser, readJob, solveChunks, submit, submitPlanned } from "../helpers/queue-jobs";
import type { StandInSpec } from "../helpers/stand-in/compile-stored-job";

const SPEC: StandInSpec = { waters: 700, cases: 2, axes: [3], valueColumns: 3 };
const ROWS = 4200;
let database: Awaited<ReturnType<typeof openQueueDatabase>>;
let user: string;
let jobId: string;

beforeAll(async () => {
  database = await openQueueDatabase();
  user = await createUser();
  jobId = await submitPlanned(user, SPEC);
  await solveChunks("batch", SPEC);
});
afterAll(() => database.drop());

const never = new AbortController().signal;
async function download(query: ExportQuery, id = jobId) {
  const { body, headers, rowCount } = await streamResults(await readJob(id), query, never);
  const bytes = new Uint8Array(await new Response(body).arrayBuffer());
  return { bytes, text: new TextDecoder().decode(bytes), headers, rowCount };
}
const lines = (text: string) => text.split("\n").filter((line) => line !== "").map((line) => JSON.parse(line) as ResultPage["rows"][number]);

/** Downloads in each format as rows of the same form: null for missing numbers. */
const readers = {
  ndjson: async (query: Omit<ExportQuery, "format">) => lines((await download({ ...query, format: "ndjson" })).text),
  json: async (query: Omit<ExportQuery, "format">) => (JSON.parse((await download({ ...query, format: "json" })).text) as ResultPage).rows,
  csv: async (query: Omit<ExportQuery, "format">) => {
    const numbers = new Set((await readJob(jobId)).columns?.filter((column) => column.type !== "text").map((column) => column.name));
    const records = parse((await download({ ...query, format: "csv" })).text, { columns: query.from ? [...query.select ?? []] : true, record_delimiter: "\r\n" }) as Record<string, string>[];
    return records.map((record) => Object.fromEntries(Object.entries(record).map(([name, cell]) =>
      [name, numbers.has(name) ? (cell === "" ? null : Number(cell)) : cell.replace(/^'(?=[=+\-@\t])/, "")])));
  },
  arrow: async (query: Omit<ExportQuery, "format">) => tableFromIPC((await download({ ...query, format: "arrow" })).bytes).toArray().map((row) => row?.toJSON() as ResultPage["rows"][number]),
};

describe("downloads", () => {
  const queries: [string, Omit<ExportQuery, "format">][] = [
    ["all rows", {}], ["sorted rows", { sort: "-pH,water" }], ["filtered rows", { where: ["v2 > 1", "status = ok"] }],
    ["some columns from a position", { select: ["water", "pH", "iterations"], sort: "v2", from: 4000 }],
  ];
  it.each(queries)("of %s agree in all formats and with the pages", async (_, query) => {
    const rows = await readers.ndjson(query);
    const pages: ResultPage["rows"] = [];
    for (let offset = query.from ?? 0; ;) {
      const page = await readResultPage(await readJob(jobId), { ...query, offset, limit: 1000 });
      pages.push(...page.rows);
      offset += page.rows.length;
      if (offset >= page.rowCount) break;
    }
    expect(rows.length).toBeGreaterThan(100);
    expect(rows).toEqual(pages);
    expect(await readers.json(query)).toEqual(rows);
    expect(await readers.csv(query)).toEqual(rows);
    expect(await readers.arrow(query)).toEqual(rows);
  });

  it("say in their headers how many rows come and what they were made with", async () => {
    for (const format of ["ndjson", "csv", "arrow", "json"] as const) {
      const { headers, rowCount } = await download({ format, from: 200 });
      expect(rowCount).toBe(ROWS - 200);
      expect(headers).toMatchObject({ "tufa-row-count": String(ROWS - 200), "tufa-rows-total": String(ROWS), "tufa-complete": "true", "tufa-spec-hash": "5f", "tufa-engine-version": "1", "tufa-constants-version": "2" });
    }
  });

  it("CSV has one header row of column names and CRLF", async () => {
    const { text } = await download({ format: "csv", select: ["water", "conc:Ca^2+"] });
    expect(text.split("\r\n")[0]).toBe("water,conc:Ca^2+");
    expect(text.split("\r\n")).toHaveLength(ROWS + 2);
    expect(text.replaceAll("\r\n", "")).not.toContain("\n");
  });

  it("CSV escapes texts that a spreadsheet would run, and never numbers", async () => {
    expect(["=1+1", "+a", "-b", "@c", "\td", "a,b", "say \"x\"", "plain"].map(csvText)).toEqual(["'=1+1", "'+a", "'-b", "'@c", "'\td", "\"a,b\"", "\"say \"\"x\"\"\"", "plain"]);
    const { text } = await download({ format: "csv", select: ["message", "pH"], where: ["pH < -4"] });
    expect(text.split("\r\n")[1]).toMatch(/^,-4\.\d+$/);
    expect((await download({ format: "csv", select: ["message"], where: ["message != null"] })).text.split("\r\n")[1]).toBe("\"'=no value: Ca is missing, \"\"given\"\" nowhere\"");
  });

  it("Arrow carries units and provenance, integers as integers and missing numbers as null", async () => {
    const { schema, numRows } = tableFromIPC((await download({ format: "arrow" })).bytes);
    expect(numRows).toBe(ROWS);
    expect(Object.fromEntries(schema.metadata)).toMatchObject({ jobId, specHash: "5f", engineVersion: "1", constantsVersion: "2", rowCount: String(ROWS) });
    const field = (name: string) => schema.fields.find((each) => each.name === name)!;
    expect(field("conc:Ca^2+").metadata.get("unit")).toBe("mol/kg");
    expect(String(field("iterations").type)).toBe("Int32");
    expect((await readers.arrow({ select: ["pH"] }))[0]).toEqual({ pH: null });
  });

  it("with a footer end in the row count and the hash of what came before", async () => {
    const ndjson = (await download({ format: "ndjson", footer: true, where: ["pH > 0"] })).text;
    const body = ndjson.slice(0, ndjson.lastIndexOf("\n", ndjson.length - 2) + 1);
    expect(JSON.parse(ndjson.slice(body.length))).toEqual({ end: true, rows: lines(body).length, sha256: createHash("sha256").update(body).digest("hex") });
    const csv = (await download({ format: "csv", footer: true })).text;
    const rows = csv.slice(0, csv.indexOf("#end"));
    expect(csv.slice(rows.length)).toBe(`#end,${ROWS},${createHash("sha256").update(rows).digest("hex")}\r\n`);
  });

  it("resumed where a cut one ended join to the same bytes", async () => {
    for (const format of ["ndjson", "csv"] as const) {
      const whole = (await download({ format })).text;
      const ending = format === "csv" ? "\r\n" : "\n";
      const header = format === "csv" ? 1 : 0;
      const cut = whole.split(ending).slice(0, 1700 + header).join(ending) + ending;
      expect(cut + (await download({ format, from: 1700 })).text).toBe(whole);
    }
  });

  it("refuse a faulty query before the first byte, and a job without columns", async () => {
    const thrown = async (promise: Promise<unknown>) => promise.then(() => null, (error: unknown) => error as AppError);
    expect(await thrown(streamResults(await readJob(jobId), { format: "csv", where: ["ph > 7"], sort: "x" }, never))).toMatchObject({ code: "bad-request", errors: [{ pointer: "/where/0" }, { pointer: "/sort" }] });
    const queued = await submit(user, SPEC);
    expect(await thrown(streamResults(await readJob(queued), { format: "csv" }, never))).toMatchObject({ code: "conflict" });
  });

  it("stop reading when the caller goes away", async () => {
    const abort = new AbortController();
    const { body } = await streamResults(await readJob(jobId), { format: "ndjson" }, abort.signal);
    const reader = body.getReader();
    expect((await reader.read()).done).toBe(false);
    abort.abort();
    let read = 0;
    for (let part = await reader.read(); !part.done; part = await reader.read()) read += part.value.length;
    expect(read).toBeLessThan(900_000);
  });

  it("of a cancelled job carry its finished rows", async () => {
    const id = await submitPlanned(user, SPEC);
    await solveChunks("batch", SPEC, 2);
    const running = await download({ format: "ndjson" }, id);
    expect(running.headers["tufa-complete"]).toBe("false");
    await db().transaction((tx) => requestCancel(tx, id));
    const { text, headers } = await download({ format: "ndjson" }, id);
    expect(lines(text)).toHaveLength(1024);
    expect(headers).toMatchObject({ "tufa-row-count": "1024", "tufa-complete": "true" });
  });
});
