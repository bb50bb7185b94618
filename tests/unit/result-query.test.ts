import { describe, expect, it } from "vitest";
import { AppError } from "@/lib/errors";
import { parseQuery, placeColumns } from "@/lib/results/query";
import { resultColumns } from "@/lib/results/result-columns";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

const value = (name: string, group: ColumnDescriptor["group"] = "main"): ColumnDescriptor =>
  ({ name, type: "number", unit: "mol/kg", basis: null, description: "", group });
const columns = resultColumns([{ field: "pCO2", unit: "atm" }, { field: "Na", unit: "mmol/L" }],
  [value("pH"), value("pCO2"), value("conc:Ca^2+", "species"), value("conc:CaHCO3^+", "species"), value("SI:calcite", "SI")]);

const issuesOf = (action: () => unknown) => {
  try {
    action();
  } catch (error) {
    expect(error).toBeInstanceOf(AppError);
    expect((error as AppError).code).toBe("bad-request");
    return (error as AppError).errors ?? [];
  }
  throw new Error("nothing was thrown");
};
const condition = (where: string) => {
  const [{ column, operator, value: given }] = parseQuery(columns, { where: [where] }).where;
  return [column.descriptor.name, operator, given];
};

describe("columns of a job", () => {
  it("stand in the order water, case, axes, status … values, an axis giving way to a reported quantity of its name", () => {
    expect(columns.map((column) => column.name)).toEqual([
      "water", "case", "vary:pCO2", "Na", "status", "message", "warnings", "iterations", "residual", "pH", "pCO2", "conc:Ca^2+", "conc:CaHCO3^+", "SI:calcite",
    ]);
  });

  it("know where their cells come from", () => {
    expect(placeColumns(columns).map(({ place }) => place)).toEqual([
      { kind: "water" }, { kind: "case" }, { kind: "axis", axis: 0 }, { kind: "axis", axis: 1 },
      ...["status", "message", "warnings", "iterations", "residual", 0, 1, 2, 3, 4].map((column) => ({ kind: "stored", column })),
    ]);
  });
});

describe("where", () => {
  it.each([
    ["pH > 7", ["pH", ">", 7]], ["pH>=7.5", ["pH", ">=", 7.5]], ["pH<-1e-3", ["pH", "<", -1e-3]], ["SI:calcite <= .5", ["SI:calcite", "<=", 0.5]],
    ["status != ok", ["status", "!=", "ok"]], ["case = \"with calcite\"", ["case", "=", "with calcite"]], ["message = a = b", ["message", "=", "a = b"]],
    ["pH null", ["pH", "null", null]], ["pH = null", ["pH", "null", null]], ["message != NULL", ["message", "not-null", null]],
    ["vary:pCO2 = 0.1", ["vary:pCO2", "=", 0.1]],
  ])("reads %s", (text, expected) => {
    expect(condition(text)).toEqual(expected);
  });

  it("takes a + that arrived as a space", () => {
    expect(condition("conc:Ca^2  > 1e-3")[0]).toBe("conc:Ca^2+");
    expect(condition("conc:Ca^2 >1e-3")[0]).toBe("conc:Ca^2+");
    expect(condition("conc:CaHCO3^ null")[0]).toBe("conc:CaHCO3^+");
  });

  it("reports every fault at once, with its place and the nearest column", () => {
    const issues = issuesOf(() => parseQuery(columns, { where: ["ph > 7", "pH > x", "junk", "pH < null"], sort: "-SI:calcit", select: ["speces"] }));
    expect(issues.map(({ pointer, code }) => [pointer, code])).toEqual([
      ["/select", "unknown-column"], ["/where/0", "unknown-column"], ["/where/1", "not-a-number"],
      ["/where/2", "unreadable-condition"], ["/where/3", "unreadable-condition"], ["/sort", "unknown-column"],
    ]);
    expect(issues[0].remedy).toContain("species");
    expect(issues[1].remedy).toContain("pH");
    expect(issues[5].remedy).toContain("SI:calcite");
  });
});

describe("select and sort", () => {
  it("select takes names and groups, commas or repeats, each column once", () => {
    const names = (select: string[]) => parseQuery(columns, { select }).select.map((column) => column.descriptor.name);
    expect(names(["pH,SI", "water"])).toEqual(["pH", "SI:calcite", "water"]);
    expect(names(["species", "conc:Ca^2 "])).toEqual(["conc:Ca^2+", "conc:CaHCO3^+"]);
    expect(names([])).toHaveLength(columns.length);
  });

  it("sort takes several keys, - for descending", () => {
    expect(parseQuery(columns, { sort: "-pH,conc:Ca^2 ,water" }).sort.map((key) => [key.column.descriptor.name, key.descending]))
      .toEqual([["pH", true], ["conc:Ca^2+", false], ["water", false]]);
  });

  it("the order's key ignores the order of conditions and tells sorts apart", () => {
    const key = (where: string[], sort: string | null) => parseQuery(columns, { where, sort }).orderKey;
    expect(key([], null)).toBe("");
    expect(key(["pH > 7", "Na = 1"], "pH")).toBe(key(["Na=1", "pH>7"], "pH"));
    expect(key([], "pH")).not.toBe(key([], "-pH"));
  });
});
