import { describe, expect, it } from "vitest";
import { csvOf, curlFor, pasteTableOf, pythonFor, tableOf } from "@/lib/commands/export-entry";
import { chargeOf, judgeIonBalance } from "@/lib/commands/ion-balance";
import { matchScore, paletteItems, rankItems } from "@/lib/commands/palette-items";
import { keepStream, loadHistory, loadStream, rememberLine, rememberUse, searchHistory, type Store } from "@/lib/commands/stream-memory";
import { answeredWater, entryWith } from "./commands-fixtures";

function memoryStore(limit = Infinity): Store & { map: Map<string, string> } {
  const map = new Map<string, string>();
  return {
    map, getItem: (key) => map.get(key) ?? null, removeItem: (key) => { map.delete(key); },
    setItem: (key, value) => { if (value.length > limit) throw new Error("quota"); map.set(key, value); },
  };
}

describe("the stream kept in the browser", () => {
  it("comes back as it was, under its owner's name alone", () => {
    const store = memoryStore();
    keepStream(store, "usr_a", { entries: [answeredWater(3)], nextNumber: 4 });
    expect(loadStream(store, "usr_a")).toEqual({ entries: [answeredWater(3)], nextNumber: 4 });
    expect(loadStream(store, "usr_b").entries).toEqual([]);
  });

  it("never gives a number twice, though entries were cleared", () => {
    const store = memoryStore();
    keepStream(store, "usr_a", { entries: [], nextNumber: 9 });
    expect(loadStream(store, "usr_a").nextNumber).toBe(9);
  });

  it("marks an entry whose answer never came", () => {
    const store = memoryStore();
    keepStream(store, "usr_a", { entries: [entryWith(1, { kind: "waiting", what: "Solving" })], nextNumber: 2 });
    expect(loadStream(store, "usr_a").entries[0].body).toEqual({ kind: "not-kept" });
  });

  it("drops the oldest answers but no line when the browser's store is small", () => {
    const store = memoryStore();
    const big = "x".repeat(400_000);
    const entries = [1, 2, 3, 4, 5].map((number) => entryWith(number, { kind: "note", text: big }, `line ${number}`));
    keepStream(store, "usr_a", { entries, nextNumber: 6 });
    const back = loadStream(store, "usr_a").entries;
    expect(back.map((entry) => entry.line)).toEqual(["line 1", "line 2", "line 3", "line 4", "line 5"]);
    expect(back.map((entry) => entry.body.kind)).toEqual(["not-kept", "not-kept", "note", "note", "note"]);
  });

  it("survives a broken value and a full store", () => {
    const store = memoryStore(20_000);
    store.map.set("tufa:usr_a:stream", "{broken");
    expect(loadStream(store, "usr_a").entries).toEqual([]);
    keepStream(store, "usr_a", { entries: [entryWith(1, { kind: "note", text: "y".repeat(50_000) })], nextNumber: 2 });
    expect(loadStream(store, "usr_a").entries[0].body.kind).toBe("not-kept");
  });
});

describe("the history of lines", () => {
  it("moves a line typed again to the end and leaves out what looks like a token", () => {
    const store = memoryStore();
    let lines = rememberLine(store, "usr_a", [], "jobs");
    lines = rememberLine(store, "usr_a", lines, "sets");
    lines = rememberLine(store, "usr_a", lines, "jobs ");
    lines = rememberLine(store, "usr_a", lines, "go tufa_0123456789abcdef0123456789");
    expect(lines).toEqual(["sets", "jobs"]);
    expect(loadHistory(store, "usr_a")).toEqual(["sets", "jobs"]);
  });

  it("is searched from the newest backwards", () => {
    const lines = ["Ca 62 mg/L", "try calcite", "Ca 80 mg/L"];
    expect(searchHistory(lines, "ca ")).toBe(2);
    expect(searchHistory(lines, "ca ", 2)).toBe(0);
    expect(searchHistory(lines, "gypsum")).toBe(-1);
  });
});

describe("the palette's order", () => {
  const items = paletteItems({ role: "modeller" }, [], []);
  const titles = (typed: string, recent = {}): string[] => rankItems(items, typed, recent, 0).map((item) => item.id);

  it("puts the command of that name first", () => {
    expect(titles("range")[0]).toBe("command:range");
    expect(titles("compare")[0]).toBe("command:compare");
  });

  it("lifts what was used lately", () => {
    const before = titles("co").indexOf("page:/constants");
    const recent = rememberUse(memoryStore(), "usr_a", {}, "page:/constants", 0);
    expect(titles("co", recent).indexOf("page:/constants")).toBeLessThan(before);
  });

  it("finds constants by formula and hides administrators' pages from others", () => {
    expect(titles("HCO3")).toContain("constant:HCO3^-");
    expect(titles("people")).not.toContain("page:/admin");
  });

  it("scores beginnings above insides", () => {
    expect(matchScore("calcite", "cal")).toBeGreaterThan(matchScore("total calcium", "alc"));
    expect(matchScore("calcite", "xyz")).toBe(0);
  });
});

describe("an entry as text", () => {
  it("is CSV by RFC 4180 with formulas of spreadsheets defused and negative numbers left alone", () => {
    const text = csvOf({ columns: [{ name: "water", unit: "", type: "text" }, { name: "ANC", unit: "µeq/L", type: "number" }], rows: [{ water: "=1+1", ANC: -12.5 }, { water: "a,\"b\"", ANC: null }] });
    expect(text).toBe("water,ANC\r\n'=1+1,-12.5\r\n\"a,\"\"b\"\"\",\r\n");
  });

  it("is a table that reads downwards for one row", () => {
    expect(pasteTableOf(tableOf(answeredWater(1))!)).toContain("ANC\t2710\tµeq/L\n");
  });

  it("is a request that quotes what a shell or Python would take apart", () => {
    const call = { method: "POST", path: "/api/v1/solve", body: { title: "Ida's '''water'''" } } as const;
    expect(curlFor(call, "http://h")).toContain("Ida'\\''s");
    expect(pythonFor(call, "http://h")).not.toContain("'''water");
  });
});

describe("the ion balance", () => {
  it("reads charges from names", () => {
    expect(["Ca^2+", "HCO3^-", "CO2(aq)", "SO4^2-", "Na^+"].map(chargeOf)).toEqual([2, -1, 0, -2, 1]);
  });

  // Acceptance limits: Standard Methods 1030 E (from memory).
  it("is accepted within the limits of its anion sum and refused beyond them", () => {
    const water = { Ca: 1, Mg: 1, Na: 1, Cl: 1, SO4: 1 };
    const at = (cations: number, anions: number) => judgeIonBalance({ "conc:Na^+": cations / 1000, "conc:Cl^-": anions / 1000 }, water, false)!.verdict;
    expect(at(1.19, 1)).toBe("within");
    expect(at(1.25, 1)).toBe("outside");
    expect(at(5.15, 5)).toBe("within");
    expect(at(5.3, 5)).toBe("outside");
    expect(at(22, 20.5)).toBe("within");
    expect(at(25, 20)).toBe("outside");
  });

  it("gives no verdict where major ions are missing or the charge closed the water", () => {
    expect(judgeIonBalance({ "conc:Na^+": 1e-3, "conc:Cl^-": 1e-3 }, { Na: 1 }, false)!.verdict).toBe("incomplete");
    expect(judgeIonBalance({ "conc:Na^+": 1e-3, "conc:Cl^-": 1e-3 }, { Na: 1 }, true)!.verdict).toBe("closed");
  });
});
