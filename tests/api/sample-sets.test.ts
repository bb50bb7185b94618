import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { closeDb, db } from "@/db/client";
import { sampleSetVersion } from "@/db/schema";
import type { Problem, SampleRows, SampleSet } from "@/lib/schemas/api";
import { api, jsonOf, makePerson, type Person } from "./support";

let modeller: Person;
let token: string;
let analystToken: string;
beforeAll(async () => {
  modeller = await makePerson("modeller");
  token = await modeller.token();
  analystToken = await (await makePerson("analyst")).token();
});
afterAll(closeDb);

const ROW = { id: "QB-1", site: "Upper Weir", date: "2026-10-14", temperature: 8.4, pH: 7.9, Ca: 62.1, Mg: 6.3, Na: 5.1, K: 1.2, Cl: 12.4, SO4: 29, alkalinity: 3.1 };
const create = (body: object, as = token) => api("POST", "/sample-sets", { token: as, body });
const createCsv = (csv: string | Uint8Array, query = "?name=upload") =>
  api("POST", `/sample-sets${query}`, { token, body: csv, headers: { "content-type": "text/csv; charset=utf-8" } });
const rowsOf = async (set: SampleSet, query = "") => jsonOf<SampleRows>(await api("GET", `/sample-sets/${set.id}/rows${query}`, { token }), 200);

describe("POST /sample-sets, JSON", () => {
  test("answers 201 with Location, and the rows come back as they were given", async () => {
    const response = await create({ name: "Quern Beck", description: "Two weirs", units: { alkalinity: "meq/L" }, rows: [ROW, { ...ROW, id: "QB-2", Ca: "58 mg/L" }] });
    const set = await jsonOf<SampleSet>(response, 201);
    expect(response.headers.get("location")).toBe(`/api/v1/sample-sets/${set.id}`);
    expect(set).toMatchObject({ name: "Quern Beck", version: 1, waterCount: 2, visibility: "team", units: { alkalinity: "meq/L" } });
    expect(set.columns).toEqual(Object.keys(ROW));
    const page = await rowsOf(set);
    expect(page.rows).toEqual([ROW, { ...ROW, id: "QB-2", Ca: "58 mg/L" }]);
    expect((await jsonOf<SampleSet>(await api("GET", `/sample-sets/${set.id}`, { token }), 200)).name).toBe("Quern Beck");
  });

  test("waters without an id are named by their place", async () => {
    const { id: _id, ...bare } = ROW;
    void _id;
    const page = await rowsOf(await jsonOf(await create({ name: "bare", rows: [bare, { ...bare, Ca: 50 }] }), 201));
    expect(page.rows.map((row) => row.id)).toEqual(["W1", "W2"]);
  });

  test("every fault is named at its place and nothing is stored", async () => {
    const before = (await jsonOf<{ sampleSets: SampleSet[] }>(await api("GET", "/sample-sets?q=faulty", { token }), 200)).sampleSets;
    const shape = await jsonOf<Problem>(await create({ rows: [], colour: 1 }), 422);
    expect(shape.type).toBe("/docs/errors#invalid-samples");
    expect(shape.errors?.map((each) => each.pointer).sort()).toEqual(["/colour", "/name", "/rows"]);
    const content = await jsonOf<Problem>(await create({ name: "faulty", units: { Mg: "furlong" }, rows: [ROW, { ...ROW, id: "b", Ca: "lots", Xx: 3 }] }), 422);
    expect(content.errors?.map((each) => each.pointer).sort()).toEqual(["/rows/1/Ca", "/rows/1/Xx", "/units/Mg"]);
    expect((await jsonOf<{ sampleSets: SampleSet[] }>(await api("GET", "/sample-sets?q=faulty", { token }), 200)).sampleSets).toEqual(before);
  });

  test("texts that PostgreSQL cannot hold are a fault, not a crash", async () => {
    for (const site of ["a\u0000b", "half \ud800 pair"]) expect((await create({ name: "x", rows: [{ ...ROW, site }] })).status).toBe(422);
    expect((await create({ name: "x", rows: [{ ...ROW, site: "back\\u0000slash" }] })).status).toBe(201);
  });

  test("a body that is no JSON is 400, another content type 415", async () => {
    expect((await api("POST", "/sample-sets", { token, body: "{", headers: { "content-type": "application/json" } })).status).toBe(400);
    expect((await api("POST", "/sample-sets", { token, body: "x", headers: { "content-type": "text/plain" } })).status).toBe(415);
  });
});

describe("POST /sample-sets, CSV", () => {
  test("headings carry units and bases, blanks are missing, values below the limit are kept as such", async () => {
    const csv = [
      "\ufeffSample,Station,Date,Temp (°C),pH,Ca (mg/L),Mg mg/L,NO3-N (mg/L),Alk as CaCO3 (mg/L),F [mg/l],SO4 (µeq/L)",
      "QB-1,Upper Weir,2026-10-14,8.4,7.9,62.1,6.3,1.4,155,<0.05,600",
      '"QB ""2""",Lower Ford,14.10.2026,8.9,8.0,60.2,,n/a,150,0.07,',
    ].join("\r\n");
    const set = await jsonOf<SampleSet>(await createCsv(csv), 201);
    expect(set.units).toEqual({ Ca: "mg/L", Mg: "mg/L", NO3: "mg/L as N", alkalinity: "mg/L as CaCO3", F: "mg/L", SO4: "ueq/L" });
    const { rows } = await rowsOf(set);
    expect(rows).toEqual([
      { id: "QB-1", site: "Upper Weir", date: "2026-10-14", temperature: 8.4, pH: 7.9, Ca: 62.1, Mg: 6.3, NO3: 1.4, alkalinity: 155, F: { value: 0.05, below: true, unit: "mg/L" }, SO4: 600 },
      { id: 'QB "2"', site: "Lower Ford", date: "2026-10-14", temperature: 8.9, pH: 8, Ca: 60.2, alkalinity: 150, F: 0.07 },
    ]);
  });

  test("semicolons with decimal commas, tabs, and a Windows-1252 file are read alike", async () => {
    const semicolons = "id;pH;Ca (mg/L);Alkalinity (meq/L)\na;7,9;1.062,5;3,1\nb;8,0;60;<0,1\n";
    const first = await rowsOf(await jsonOf(await createCsv(semicolons), 201));
    expect(first.rows).toEqual([{ id: "a", pH: 7.9, Ca: 1062.5, alkalinity: 3.1 }, { id: "b", pH: 8, Ca: 60, alkalinity: { value: 0.1, below: true, unit: "meq/L" } }]);
    const tabs = "id\tpH\tCa (mg/L)\tAlkalinity (meq/L)\na\t7.9\t62.5\t3.1\n";
    expect((await rowsOf(await jsonOf(await createCsv(tabs), 201))).rows).toEqual([{ id: "a", pH: 7.9, Ca: 62.5, alkalinity: 3.1 }]);
    const latin = Uint8Array.from("id,pH,Alkalinity (\u00b5eq/L)\na,7.9,3100\n", (char) => char.charCodeAt(0));
    const set = await jsonOf<SampleSet>(await createCsv(latin), 201);
    expect(set.units).toEqual({ alkalinity: "ueq/L" });
    expect(set.flagCount).toBeGreaterThan(0);
  });

  test("a column nobody knows is flagged and the upload kept byte for byte", async () => {
    const csv = "id,pH,Alkalinity (meq/L),Mood\na,7.9,3.1,cheerful\n";
    const set = await jsonOf<SampleSet>(await createCsv(csv), 201);
    const [stored] = await db().select().from(sampleSetVersion).where(eq(sampleSetVersion.setId, set.id));
    expect(stored.raw?.toString()).toBe(csv);
    expect(stored.flags).toContainEqual(expect.objectContaining({ code: "unknown-column", column: "Mood" }));
  });

  test("faults name line and column; nothing is dropped silently", async () => {
    const csv = "id,date,pH,Ca (mg/L),Calcium (mg/L)\n\na,yesterday,acid,62,61\n";
    const problem = await jsonOf<Problem>(await createCsv(csv), 422);
    expect(problem.errors?.map((each) => each.pointer).sort()).toEqual(["/rows/0/date", "/rows/0/pH", "/units/Ca"]);
    expect(problem.errors?.find((each) => each.pointer === "/rows/0/pH")?.message).toContain("Line 3");
  });

  test.each([["", "empty"], ["id,pH\n", "empty"], ["colour,mood\nred,fine\n", "no-known-column"], ['id,pH\n"a,7\n', "csv-syntax"]])("%j is refused as %s", async (csv, code) => {
    const problem = await jsonOf<Problem>(await createCsv(csv), 422);
    expect(problem.errors?.map((each) => each.code)).toContain(code);
  });

  test("a set without a name is refused; a form names it by its file", async () => {
    const csv = "id,pH,Alkalinity (meq/L)\na,7.9,3.1\n";
    expect((await jsonOf<Problem>(await createCsv(csv, ""), 422)).errors?.[0].pointer).toBe("/name");
    const form = new FormData();
    form.set("file", new File([csv], "spring round.csv", { type: "text/csv" }));
    form.set("visibility", "private");
    const set = await jsonOf<SampleSet>(await api("POST", "/sample-sets", { token, body: form }), 201);
    expect(set).toMatchObject({ name: "spring round", visibility: "private", waterCount: 1 });
    const empty = new FormData();
    empty.set("name", "no file");
    expect((await api("POST", "/sample-sets", { token, body: empty })).status).toBe(400);
  });
});

describe("findings", () => {
  test("duplicates and a poor ion balance are flagged on their waters, and the data stay as they are", async () => {
    const transposed = { ...ROW, id: "QB-3", Ca: 621 };
    const set = await jsonOf<SampleSet>(await create({ name: "flagged", units: { alkalinity: "meq/L" }, rows: [ROW, { ...ROW }, { ...ROW, id: "QB-2" }, transposed] }), 201);
    const page = await rowsOf(set);
    expect(page.rows[3]).toEqual(transposed);
    const codes = (water: string) => page.flags.filter((each) => each.water === water).map((each) => each.code);
    expect(codes("QB-1")).toContain("duplicate-id");
    expect(codes("QB-2")).toContain("duplicate-values");
    expect(page.flags.filter((each) => each.water === "QB-3").map((each) => each.message).join(" ")).toMatch(/balance/i);
    expect(set.flagCount).toBe(page.flags.length);
  });
});

describe("versions, pages, visibility", () => {
  test("a new version leaves the old one as it was", async () => {
    const set = await jsonOf<SampleSet>(await create({ name: "versioned", rows: [ROW] }), 201);
    const next = await jsonOf<SampleSet>(await api("POST", `/sample-sets/${set.id}/versions`, { token, body: { note: "lab correction", rows: [{ ...ROW, Ca: 60 }] } }), 201);
    expect(next.version).toBe(2);
    expect((await rowsOf(set)).rows[0].Ca).toBe(60);
    expect((await rowsOf(set, "?version=1")).rows[0].Ca).toBe(62.1);
    expect((await api("GET", `/sample-sets/${set.id}/rows?version=3`, { token })).status).toBe(404);
    expect((await api("POST", `/sample-sets/${set.id}/versions`, { token: analystToken, body: { rows: [ROW] } })).status).toBe(403);
  });

  test("versions sent at once get numbers of their own", async () => {
    const set = await jsonOf<SampleSet>(await create({ name: "crowded", rows: [ROW] }), 201);
    const answers = await Promise.all([1, 2, 3, 4].map((n) => api("POST", `/sample-sets/${set.id}/versions`, { token, body: { rows: [{ ...ROW, Ca: n }] } })));
    const versions = await Promise.all(answers.map(async (each) => (await jsonOf<SampleSet>(each, 201)).version));
    expect(versions.sort()).toEqual([2, 3, 4, 5]);
  });

  test("rows page across stored chunks without gap or double, by cursor and by position", async () => {
    const rows = Array.from({ length: 2345 }, (_, index) => ({ ...ROW, id: `n${index}`, Ca: 50 + index / 100 }));
    const set = await jsonOf<SampleSet>(await create({ name: "long", rows }), 201);
    const seen: unknown[] = [];
    let query = "?limit=700";
    for (;;) {
      const page = await rowsOf(set, query);
      expect(page.firstRow).toBe(seen.length);
      seen.push(...page.rows.map((row) => row.id));
      if (!page.nextCursor) break;
      query = `?limit=700&cursor=${page.nextCursor}`;
    }
    expect(seen).toEqual(rows.map((row) => row.id));
    expect((await rowsOf(set, "?firstRow=1999&limit=2")).rows.map((row) => row.id)).toEqual(["n1999", "n2000"]);
    expect((await rowsOf(set, "?firstRow=9999")).rows).toEqual([]);
    expect((await api("GET", `/sample-sets/${set.id}/rows?cursor=x`, { token })).status).toBe(400);
  });

  test("a private set is 404 for others, a deleted one for everybody; an analyst may not delete the team's", async () => {
    const hidden = await jsonOf<SampleSet>(await create({ name: "hidden", visibility: "private", rows: [ROW] }), 201);
    for (const path of ["", "/rows"]) expect((await api("GET", `/sample-sets/${hidden.id}${path}`, { token: analystToken })).status).toBe(404);
    expect((await api("DELETE", `/sample-sets/${hidden.id}`, { token: analystToken })).status).toBe(404);
    const shared = await jsonOf<SampleSet>(await create({ name: "shared", rows: [ROW] }), 201);
    expect((await api("DELETE", `/sample-sets/${shared.id}`, { token: analystToken })).status).toBe(403);
    expect((await api("DELETE", `/sample-sets/${shared.id}`, { token })).status).toBe(204);
    expect((await api("GET", `/sample-sets/${shared.id}`, { token })).status).toBe(404);
    const { sampleSets } = await jsonOf<{ sampleSets: SampleSet[] }>(await api("GET", "/sample-sets?limit=200", { token }), 200);
    expect(sampleSets.map((each) => each.id)).not.toContain(shared.id);
  });
});
