import { json } from "@codemirror/lang-json";
import { EditorState } from "@codemirror/state";
import { describe, expect, it } from "vitest";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { countRows } from "@/lib/chemistry/resolve-job";
import { jobSpecJsonSchema } from "@/lib/schemas/job-spec";
import { cutSpec, DRY_ROWS, estimateText } from "@/components/spec-editor/dry-run";
import { rangeOfPointer, spotAt } from "@/components/spec-editor/json-places";
import { keysAt, schemasAt, valuesAt, type Schema } from "@/components/spec-editor/schema-walk";
import { layOut, TEMPLATES } from "@/components/spec-editor/templates";

const stateOf = (text: string): EditorState => EditorState.create({ doc: text, extensions: [json()] });

/** A document with the caret at `|`. */
function spotIn(marked: string) {
  const at = marked.indexOf("|");
  return spotAt(stateOf(marked.replace("|", "")), at);
}

describe("places in the text", () => {
  const text = `{\n  "spec": 1,\n  "cases": [\n    { "name": "a/b", "close": ["pH", "DIC"] }\n  ],\n  "waters": { "ro~ws": [1, 2] }\n}`;
  const state = stateOf(text);
  const at = (pointer: string, markKey = false): string => { const { from, to } = rangeOfPointer(state, pointer, markKey); return text.slice(from, to); };

  it("follow JSON Pointers through objects, arrays and escapes", () => {
    expect(at("/cases/0/close/1")).toBe("\"DIC\"");
    expect(at("/waters/ro~0ws/1")).toBe("2");
    expect(at("/spec", true)).toBe("\"spec\"");
  });

  it("mark the nearest object where the pointed one is missing", () => {
    expect(at("/cases/0/pCO2")).toBe("{");
    expect(at("/cases/7")).toBe("[");
  });

  it("hold while the text is half typed", () => {
    expect(spotIn(`{ "cases": [ { "na|" } ] }`)).toMatchObject({ at: "key", path: ["cases", "0"] });
    expect(spotIn(`{ "cases": [ { "activity": "da|" } ] }`)).toMatchObject({ at: "value", path: ["cases", "0", "activity"] });
    expect(spotIn(`{ "cases": [ { "activity": | `)).toMatchObject({ at: "value", path: ["cases", "0", "activity"] });
    expect(spotIn(`{ "spec": 1, | }`)).toMatchObject({ at: "key", path: [], siblings: ["spec"] });
    expect(spotIn(`{ "cases": [ { "close": ["pH", |] } ] }`)).toMatchObject({ at: "value", path: ["cases", "0", "close", "1"] });
  });
});

describe("completion over the job spec's schema", () => {
  const schema = jobSpecJsonSchema() as Schema;
  const keys = (path: string[]): string[] => keysAt(schema, path).map((each) => each.name);

  it("offers the keys of each level", () => {
    expect(keys([])).toEqual(expect.arrayContaining(["spec", "waters", "cases", "vary", "report"]));
    expect(keys(["cases", "0"])).toEqual(expect.arrayContaining(["name", "close", "pCO2", "activity", "react"]));
    expect(keys(["cases", "0", "react"])).toEqual(expect.arrayContaining(["gas", "solids"]));
    expect(keys(["vary", "0"])).toEqual(expect.arrayContaining(["field", "from", "to", "points"]));
  });

  it("offers the values a place may have", () => {
    const values = valuesAt(schema, ["cases", "0", "activity"]).map((each) => each.value);
    expect(values).toEqual(expect.arrayContaining(["davies", "truesdell-jones"]));
  });

  it("explains every key of a case", () => {
    const bare = keysAt(schema, ["cases", "0"]).filter((each) => !schemasAt(schema, ["cases", "0", each.name]).some((one) => one.description) && !each.schema.description);
    expect(bare.map((each) => each.name)).toEqual([]);
  });
});

describe("templates", () => {
  const set = { id: "set_abcdefghijklmnopqrst", name: "Springs and becks" };

  it("pass the checker, each of them", () => {
    for (const template of TEMPLATES) expect(checkSpec(template.make(set)).issues, template.id).toEqual([]);
  });

  it("are laid out as the same document, with short parts on one line", () => {
    for (const template of TEMPLATES) {
      const text = layOut(template.make(set));
      expect(JSON.parse(text)).toEqual(template.make(set));
      expect(Math.max(...text.split("\n").map((line) => line.length))).toBeLessThanOrEqual(140);
    }
  });
});

describe("the dry run", () => {
  it("cuts a large spec to a few rows and keeps all its cases and the ends of its axes", () => {
    const rows = Array.from({ length: 500 }, (_, index) => ({ id: `w${index}`, Ca: "40 mg/L", alkalinity: "2 meq/L", pH: 7.5, temperature: 10 }));
    const { spec } = checkSpec({
      spec: 1, waters: { rows }, cases: [{ name: "a", close: ["alkalinity", "pCO2"] }, { name: "b", like: "a", activity: "ideal" }],
      vary: [{ field: "pCO2", from: "200 ppm", to: "20000 ppm", points: 41, scale: "log" }],
    });
    const cut = cutSpec(spec!)!;
    const waters = (cut.waters as { rows: unknown[] }).rows.length;
    expect(countRows(cut, waters)).toBeLessThanOrEqual(DRY_ROWS);
    expect(cut.cases).toHaveLength(2);
    expect(cut.vary![0]).toMatchObject({ from: "200 ppm", to: "20000 ppm" });
    expect(checkSpec(cut).issues).toEqual([]);
  });

  it("leaves stored sets to the server", () => {
    expect(cutSpec(checkSpec(TEMPLATES[3].make({ id: "set_abcdefghijklmnopqrst", name: "x" })).spec!)).toBeNull();
  });

  it("says times roughly", () => {
    expect([estimateText(10, 20_000), estimateText(1_000_000, 20_000), estimateText(10_000_000, 20_000)]).toEqual(["under a second", "about 50 s", "about 9 min"]);
  });
});
