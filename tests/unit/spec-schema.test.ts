/** The job spec as JSON Schema, from which editor, completion and API document are made. */
import { describe, expect, it } from "vitest";
import { ANALYTES, SOLIDS } from "@/lib/chemistry/data";
import { jobSpecJsonSchema } from "@/lib/schemas/job-spec";

interface Node { description?: string; properties?: Record<string, Node>; items?: Node; anyOf?: Node[]; additionalProperties?: Node | boolean; required?: string[]; propertyNames?: { enum?: string[] } }

/** Every key of every object below a node, with its path. */
function keysOf(node: Node, path: string): { path: string; node: Node }[] {
  const own = Object.entries(node.properties ?? {}).flatMap(([key, each]) => [{ path: `${path}/${key}`, node: each }, ...keysOf(each, `${path}/${key}`)]);
  const below = [...(node.anyOf ?? []), ...(node.items ? [node.items] : []), ...(typeof node.additionalProperties === "object" ? [node.additionalProperties] : [])];
  return [...own, ...below.flatMap((each) => keysOf(each, path))];
}

describe("the JSON Schema of a job spec", () => {
  const schema = jobSpecJsonSchema() as Node;
  const all = keysOf(schema, "");

  it("describes every key", () => {
    expect(all.length).toBeGreaterThan(150);
    expect([...new Set(all.filter(({ node }) => !node.description).map(({ path }) => path))]).toEqual([]);
  });

  it("knows every key of the document's first part", () => {
    const paths = new Set(all.map(({ path }) => path));
    const keys = ["/spec", "/title", "/waters", "/cases", "/vary", "/report", "/solver", "/waters/set", "/waters/units", "/waters/belowLimit", "/waters/missing", "/waters/rows", "/solver/tolerance", "/solver/maxIterations"];
    const row = ["id", "site", "date", "temperature", "pH", "pHTemperature", "altitude", "pressure", "conductivity", "pCO2", ...ANALYTES.map(({ key }) => key)].map((key) => `/waters/rows/${key}`);
    const kase = ["name", "like", "close", "pCO2", "activity", "organic", "complexes", "temperature", "constants", "react", "pH", "altitude", "pressure", "react/gas", "react/solids", "organic/model", "organic/pKa", "organic/sites", "pCO2/log10", ...ANALYTES.map(({ key }) => key)].map((key) => `/cases/${key}`);
    const axis = ["field", "from", "to", "points", "scale", "values", "unit"].map((key) => `/vary/${key}`);
    const quantity = ["value", "unit", "as", "below", "sd", "method", "fraction"].map((key) => `/waters/rows/DOC/${key}`);
    expect([...keys, ...row, ...kase, ...axis, ...quantity].filter((path) => !paths.has(path))).toEqual([]);
  });

  it("lets unknown keys nowhere pass", () => {
    const open = (node: Node, path: string): string[] => [
      ...(node.properties && node.additionalProperties !== false ? [path] : []),
      ...Object.entries(node.properties ?? {}).flatMap(([key, each]) => open(each, `${path}/${key}`)), ...[...(node.anyOf ?? []), ...(node.items ? [node.items] : [])].flatMap((each) => open(each, path)),
    ];
    expect(open(schema, "")).toEqual([]);
  });

  it("asks for the version, waters and cases alone", () => expect(schema.required).toEqual(["spec", "waters", "cases"]));

  it("names every solid that may react", () => {
    const solids = all.find(({ path }) => path === "/cases/react/solids")!.node;
    expect(solids.propertyNames?.enum).toEqual(SOLIDS.map(({ name }) => name));
  });
});
