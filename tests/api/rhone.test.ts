/** The main job on real data over HTTP: 39 samples of the Rhône settled by pH and alkalinity. Source: tests/fixtures/rhone-spec.ts. */
import { beforeAll, describe, expect, it } from "vitest";
import type { Job, ResultPage } from "@/lib/schemas/api";
import { rhoneSamples, rhoneSpec } from "@/tests/fixtures/rhone-spec";
import { callServer, freshToken } from "@/tests/helpers/running-server";
import { solveSpec } from "@/tests/outside/solve-spec";

const spec = rhoneSpec(["pH", "pCO2", "alkalinity", "conductivity", "SI:calcite"]);
let token: string;

beforeAll(async () => { token = await freshToken("modeller"); }, 60_000);

describe("the Rhône, sent through the API", () => {
  it("comes back with every row ok, in the order sent, and with the very numbers of a solve in this process", async () => {
    const job = await callServer<Job>(token, "POST", "/jobs", { body: spec, headers: { prefer: "wait=60" }, status: 201 });
    expect(job).toMatchObject({ status: "done", counts: { rows: 39, done: 39, ok: 39, invalid: 0, notConverged: 0 } });
    const page = await callServer<ResultPage>(token, "GET", `/jobs/${job.id}/results?limit=1000`);
    expect(page.rows.map((row) => row.water)).toEqual(rhoneSamples().map((sample) => `day ${sample.day}`));
    expect(page.rows.map((row) => row.status)).toEqual(page.rows.map(() => "ok"));
    solveSpec(spec).forEach((here, k) => {
      for (const [name, value] of Object.entries(here.values)) expect(page.rows[k][name], `${here.water} ${name}`).toBe(value);
    });
  });

  it("is answered in the request as well", async () => {
    const answer = await callServer<{ summary: { rows: number; ok: number } }>(token, "POST", "/solve", { body: spec });
    expect(answer.summary).toMatchObject({ rows: 39, ok: 39 });
  });
});
