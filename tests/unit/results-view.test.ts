import { describe, expect, it } from "vitest";
import { cellText } from "@/components/results/cell-text";
import { readCondition } from "@/components/results/condition";
import { inTableOrder, usualColumns } from "@/components/results/column-chooser";
import { nextSort, readAddress, viewQuery, whereStatus, whereWarned } from "@/components/results/use-view";
import { parseQuery } from "@/lib/results/query";
import { type ColumnDescriptor, LEADING_COLUMNS } from "@/lib/schemas/columns";

const column = (name: string, group: ColumnDescriptor["group"], unit = ""): ColumnDescriptor => ({ name, type: "number", unit, basis: null, description: "", group });
const COLUMNS = [...LEADING_COLUMNS, column("pH", "main"), column("ANC", "main", "µeq/L"), column("SI:calcite", "SI"), column("conc:Ca^2+", "species", "mol/L")];

describe("a typed condition", () => {
  it.each([
    ["SI:calcite > 0.5", "SI:calcite > 0.5"], ["SI:calcite>0.5", "SI:calcite > 0.5"], ["  pH<=  7 ", "pH <= 7"], ["si:CALCITE != 0", "SI:calcite != 0"],
    ["status = invalid", "status = invalid"], ["water = Marl Spring", "water = Marl Spring"], ["ANC < −20", "ANC < -20"], ["conc:Ca^2+ > 1e-4", "conc:Ca^2+ > 1e-4"],
    ["pH null", "pH = null"], ["pH = null", "pH = null"], ["warnings != null", "warnings != null"], ["pH   !=NULL", "pH != null"], ["water = A−1", "water = A−1"],
  ])("%s is understood, and the API understands what it becomes", (text, condition) => {
    expect(readCondition(text, COLUMNS)).toEqual({ condition });
    expect(parseQuery(COLUMNS, { where: [condition] }).where).toHaveLength(1);
  });

  it.each([
    ["SI:calcit > 0.5", /Did you mean “SI:calcite”/], ["pH", /a column, a sign and a value/], ["pH >", /value is missing/], ["pH > seven", /not a number/], ["> 7", /column/], ["", /column/],
  ])("%s is refused with a reason", (text, reason) => expect(readCondition(text, COLUMNS)).toEqual({ problem: expect.stringMatching(reason) as string }));
});

describe("the view in the address", () => {
  it("reads back what it writes", () => {
    const view = { where: ["conc:Ca^2+ > 1e-4", "water = Marl & Kiln"], sort: "-SI:calcite", columns: ["water", "conc:Ca^2+", "SI:calcite"] };
    expect(readAddress(viewQuery(view).toString())).toEqual(view);
  });
  it("is empty for the view one comes to first", () => {
    expect(viewQuery(readAddress("")).toString()).toBe("");
    expect(readAddress("")).toEqual({ where: [], sort: "", columns: null });
  });
  it("tells no column chosen from no choice made", () => expect(readAddress(viewQuery({ where: [], sort: "", columns: [] }).toString()).columns).toEqual([]));

  it("sorts up, down and as solved, and begins anew with another column", () => {
    expect(["", "pH", "-pH"].map((sort) => nextSort(sort, "pH"))).toEqual(["pH", "-pH", ""]);
    expect(nextSort("-pH", "ANC")).toBe("ANC");
  });
  it("shows one status at a time beside the other conditions", () => {
    expect(whereStatus(["pH > 7", "status = ok"], "invalid")).toEqual(["pH > 7", "status = invalid"]);
    expect(whereWarned(whereWarned(["pH > 7"]))).toEqual(["pH > 7", "warnings != null"]);
  });
});

describe("cells", () => {
  const row = { pH: 7.12349, ANC: -1234.567, "SI:calcite": -0.001, "conc:Ca^2+": 0.0000012345, status: "ok", residual: 0, iterations: 12 };
  const text = (name: string) => cellText(row, COLUMNS.find((each) => each.name === name)!);

  it("have the figures their quantity bears, and a real minus", () => {
    expect(text("pH")).toBe("7.123");
    expect(text("ANC")).toBe("−1234.6");
    expect(text("SI:calcite")).toBe("0.00");
    expect(text("conc:Ca^2+")).toBe("1.2345 × 10⁻⁶");
    expect(text("iterations")).toBe("12");
  });
  it("are empty where nothing exists, and never say NaN", () => {
    for (const each of COLUMNS) expect(cellText({}, each)).toBe("");
    expect(cellText({ pH: null }, COLUMNS[7])).toBe("");
  });
});

describe("columns shown first", () => {
  const many = [...COLUMNS, ...Array.from({ length: 90 }, (_, k) => column(`conc:X${k}`, "species"))];
  it("are all of a narrow job, and the main groups of a wide one", () => {
    expect(usualColumns(COLUMNS)).toHaveLength(COLUMNS.length);
    expect(usualColumns(many).some((each) => each.group === "species")).toBe(false);
    expect(usualColumns(many).map((each) => each.name)).toContain("SI:calcite");
  });
  it("begin with the water and end with the row's own notes", () => {
    const names = inTableOrder(COLUMNS).map((each) => each.name);
    expect(names[0]).toBe("water");
    expect(names.slice(-4)).toEqual(["message", "warnings", "iterations", "residual"]);
  });
});
