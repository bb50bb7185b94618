import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { buildJobs } from "@/jobs/build.mjs";
import { pool } from "@/db/client";
import { parseQuery } from "@/lib/results/query";
import { downloadBytes } from "@/lib/services/results/download-bytes";
import { closeExportThreads } from "@/lib/services/results/export-threads";
import { planDownload } from "@/lib/services/results/plan-download";
import { readResultPage } from "@/lib/services/results/read-result-page";
import { streamResults } from "@/lib/services/results/stream-results";
import { EXPORT_FORMATS, type ExportQuery, type JobRow } from "@/lib/services/results/types";
import { openQueueDatabase } from "../helpers/queue-database";
import { createUser, readJob, solveChunks, submitPlanned } from "../helpers/queue-jobs";

const SPEC = { waters: 1000, cases: 2, axes: [3], valueColumns: 3 };
let database: Awaited<ReturnType<typeof openQueueDatabase>>;
let row: JobRow;

beforeAll(async () => {
  // As in the running product, where the bundle is made before the server starts.
  vi.stubEnv("NODE_ENV", "production");
  await buildJobs({ only: ["export-thread"] });
  database = await openQueueDatabase();
  const id = await submitPlanned(await createUser(), SPEC);
  await solveChunks("batch", SPEC);
  row = await readJob(id);
});
afterAll(async () => {
  await closeExportThreads();
  await database.drop();
});

const collect = async (parts: AsyncIterable<Uint8Array>) => {
  const all: Uint8Array[] = [];
  for await (const part of parts) all.push(part);
  return Buffer.concat(all);
};
async function inPlace(words: ExportQuery): Promise<Buffer> {
  const query = parseQuery(row.columns ?? [], words);
  return collect(downloadBytes(row, words, query, await planDownload(row, words, query)));
}

describe("downloads from a thread", () => {
  it.each(EXPORT_FORMATS.flatMap((format) => [{ format, footer: true }, { format, sort: "-pH,water", where: ["v2 < 4"], from: 50 }]))("are the same bytes as those made in place: %o", async (words) => {
    const { body } = await streamResults(row, words, new AbortController().signal);
    const bytes = Buffer.from(await new Response(body).arrayBuffer());
    expect(bytes.length).toBeGreaterThan(10_000);
    expect(bytes.equals(await inPlace(words))).toBe(true);
  });

  it("end with an error, not an end, when the rows cannot be read any more", async () => {
    const { body } = await streamResults(row, { format: "ndjson", sort: "v2" }, new AbortController().signal);
    const reader = body.getReader();
    await pool().query("alter table result_block rename to result_block_away");
    try {
      await expect((async () => { while (!(await reader.read()).done); })()).rejects.toThrow(/broke off/);
    } finally {
      await pool().query("alter table result_block_away rename to result_block");
    }
  });

  it("run beside each other, and one that nobody reads holds up none", async () => {
    const idle = await Promise.all(Array.from({ length: 5 }, () => streamResults(row, { format: "ndjson" }, new AbortController().signal)));
    const bodies = await Promise.all(Array.from({ length: 8 }, async () => (await streamResults(row, { format: "csv" }, new AbortController().signal)).body));
    const sizes = await Promise.all(bodies.map(async (body) => (await new Response(body).arrayBuffer()).byteLength));
    expect(new Set(sizes).size).toBe(1);
    await Promise.all(idle.map(({ body }) => body.cancel()));
  });
});

describe("orders from a thread", () => {
  it("give the same pages as a plain look at the rows", async () => {
    const { rows } = await readResultPage(row, { sort: "-pH", limit: 1000 });
    const values = rows.map((each) => each.pH as number);
    expect(values).toEqual([...values].sort((a, b) => b - a));
    expect(values[0]).toBeGreaterThan(4.9);
  });
});
