import { describe, expect, it } from "vitest";
import { checkSpec } from "@/lib/chemistry/check-spec";
import { completeLine, readLine, requestOf } from "@/lib/commands/read-line";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { answeredWater, consoleView, gridEntry, recordingHost, WATER_SPEC } from "./commands-fixtures";

const view = consoleView({ entries: [answeredWater(1), answeredWater(2)] });

/** The spec a command line would send; fails the test where the line has faults or the spec does. */
function sent(line: string, from = view): JobSpec {
  const { request, problems } = requestOf(line, from);
  expect(problems, line).toEqual([]);
  const { issues } = checkSpec(request!.body);
  expect(issues, line).toEqual([]);
  return request!.body as JobSpec;
}

const faults = (line: string) => readLine(line, view).problems;

describe("a typed water", () => {
  it("is sent as a sound spec that reports the whole state", () => {
    const spec = sent("Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C");
    expect(spec.report).toContain("species");
    expect(spec.cases[0].close).toEqual(expect.arrayContaining(["pH", "alkalinity"]));
  });

  it("marks an unknown word at its own place", () => {
    const line = "Ca 62 mg/L, alkalinty 2.71 meq/L, pH 7.9, 8.4 °C";
    const [problem] = faults(line);
    expect(line.slice(problem.start, problem.end)).toContain("alkalinty");
    expect(problem.suggestion).toBe("alkalinity");
  });
});

describe("try", () => {
  it("adds calcite in excess to a copy, and leaves the entry's own spec alone", () => {
    const before = JSON.stringify(WATER_SPEC);
    const spec = sent("try #1 calcite");
    expect(spec.cases[0].react?.solids).toEqual({ calcite: { supply: "excess" } });
    expect(JSON.stringify(WATER_SPEC)).toBe(before);
  });

  it("opens the gas at the present air where the case names no pressure, or at the one said", () => {
    expect(sent("try open").cases[0].react?.gas).toBe("420 ppm");
    expect(sent("try open at 900 ppm").cases[0].react?.gas).toBe("900 ppm");
  });

  it("reads several changes with and without commas, units glued or not", () => {
    for (const line of ["try calcite, open, 18 °C", "try with calcite and open at 18°C", "try #2 open calcite temperature 18"]) {
      const [each] = sent(line).cases;
      expect(each.temperature, line).toBe(18);
      expect(each.react?.gas, line).toBe("420 ppm");
      expect(each.react?.solids, line).toHaveProperty("calcite");
    }
  });

  it("multiplies the CO2 the entry came out with", () => {
    expect(sent("try pCO2 x10").cases[0].react?.gas).toBeCloseTo(0.02, 12);
  });

  it("takes models, amounts, supplies and saturations", () => {
    expect(sent("try activity truesdell-jones").cases[0].activity).toBe("truesdell-jones");
    expect(sent("try DOC 8 mg/L, organic oliver-1983").cases[0].organic).toEqual({ model: "oliver-1983" });
    expect((sent("try Ca 80 mg/L").waters as { rows: Record<string, unknown>[] }).rows[0].Ca).toBe("80 mg/L");
    expect(sent("try calcite 0.2 mmol/L").cases[0].react?.solids).toEqual({ calcite: { supply: "0.2 mmol/L" } });
    expect(sent("try calcite SI 0.3").cases[0].react?.solids).toEqual({ calcite: { supply: "excess", saturation: 0.3 } });
    expect(sent("try gypsum may form").cases[0].react?.solids).toEqual({ gypsum: { supply: "may-form" } });
  });

  it("names the case after the changes", () => {
    expect(sent("try calcite, 18 °C").cases[0].name).toBe("with calcite, 18 °C");
  });

  it("marks the offending word and says what to write", () => {
    const line = "try calcit, open";
    const [problem] = faults(line);
    expect([line.slice(problem.start, problem.end), problem.suggestion]).toEqual(["calcit", "calcite"]);
    expect(faults("try activity davis")[0].suggestion).toBe("activity davies");
    expect(faults("try pCO2 420")[0].suggestion).toBe("420 ppm");
    expect(faults("try 120 °C")[0].message).toContain("0 to 90");
    expect(faults("try")[0].message).toContain("What should change");
  });

  it("refuses entries that are not there or hold no water", () => {
    const line = "try #9 calcite";
    const [problem] = faults(line);
    expect([line.slice(problem.start, problem.end), problem.message]).toEqual(["#9", "There is no entry 9."]);
    expect(readLine("try #3 calcite", consoleView({ entries: [answeredWater(1), gridEntry(3)] })).problems[0].message).toContain("not a water");
  });
});

describe("range", () => {
  it("varies CO2 on a log scale over a water that keeps its alkalinity", () => {
    const spec = sent("range pCO2 200 to 20000 ppm");
    expect(spec.vary).toEqual([{ field: "pCO2", from: "200 ppm", to: "20000 ppm", points: 41, scale: "log" }]);
    expect(spec.cases[0].close).toEqual(["alkalinity", "pCO2"]);
  });

  it("holds the CO2 of the answer when ANC is varied, so that the curve meets the point", () => {
    const spec = sent("range #1 ANC -200 to 3000 µeq/L 81 points");
    expect(spec.cases[0].close).toEqual(["ANC", "pCO2"]);
    expect(spec.cases[0].pCO2).toBeCloseTo(0.002, 12);
    expect(spec.vary?.[0]).toMatchObject({ from: "-200 µeq/L", to: "3000 µeq/L", points: 81, scale: "linear" });
  });

  it("runs over a temperature, an analyte, and the saturation of a solid", () => {
    expect(sent("range temperature 0 to 30").vary?.[0]).toMatchObject({ field: "temperature", from: 0, to: 30 });
    expect(sent("range Ca 10 to 100 mg/L 10").vary?.[0]).toMatchObject({ field: "Ca", points: 10 });
    expect(sent("range calcite 0 to 0.8 9").vary?.[0]).toMatchObject({ field: "react/solids/calcite/saturation", from: 0, to: 0.8 });
  });

  it("says where it is wrong", () => {
    expect(faults("range pCO2 200 to 20000 pmm")[0].suggestion).toBe("ppm");
    expect(faults("range pC02 200 to 20000 ppm")[0].suggestion).toBe("pCO2");
    expect(faults("range temperature 0 to 30 log")[0].message).toContain("above zero");
    expect(faults("range pCO2 200 to 20000 ppm 4000")[0].message).toContain("500");
    expect(faults("range pCO2 200")[0].message).toContain("to");
  });
});

describe("other commands", () => {
  it("submit puts a sample set in the place of the entry's own water", () => {
    const withSets = consoleView({ entries: [answeredWater(1)], sets: [{ id: "set_abcdefghijklmnopqrst", name: "Springs and becks", waterCount: 12 }] });
    const spec = sent("submit #1 over springs and becks", withSets);
    expect(spec.waters).toEqual({ set: "set_abcdefghijklmnopqrst" });
    expect(readLine("submit over springs", withSets).problems[0].suggestion).toBe("\"Springs and becks\"");
  });

  it("run through the host and leave their answer", async () => {
    const { host, calls, answers } = recordingHost(view);
    const read = readLine("try #2 calcite", view);
    if (read.kind !== "command") throw new Error("not read as a command");
    await read.command.run(read.call, host);
    expect(calls.map(([name]) => name)).toEqual(["solve"]);
    expect(answers[answers.length - 1]).toMatchObject({ kind: "state", from: 2, changes: ["with calcite"] });
  });

  it("compare takes the last two where none are named and refuses one alone", () => {
    expect(faults("compare")).toEqual([]);
    expect(faults("compare #1")[0].message).toContain("Two different");
  });

  it("api shows the request of a line, as curl with the token from the environment", async () => {
    const { host, answers } = recordingHost(view);
    const read = readLine("api try calcite", view);
    if (read.kind !== "command") throw new Error("not read as a command");
    await read.command.run(read.call, host);
    const [code] = answers;
    expect(code.kind === "code" && code.text).toContain("/api/v1/solve");
    expect(code.kind === "code" && code.text).toContain("Bearer $TUFA_TOKEN");
    expect(faults("api theme dark")[0].message).toContain("browser alone");
  });

  it("help and jobs run without an argument", async () => {
    for (const [line, kind] of [["help", "help"], ["jobs", "jobs"], ["sets", "sets"]] as const) {
      const { host, answers } = recordingHost(view);
      const read = readLine(line, view);
      if (read.kind !== "command") throw new Error("not read as a command");
      await read.command.run(read.call, host);
      expect(answers[answers.length - 1]?.kind).toBe(kind);
    }
  });

  it("say why they cannot run yet", () => {
    expect(readLine("try calcite", consoleView()).problems[0].message).toBe("There is no water yet.");
    expect(readLine("undo", consoleView()).problems[0].message).toBe("Nothing was cleared.");
  });
});

describe("completion", () => {
  const at = (line: string) => completeLine(line, line.length, view);
  const words = (line: string): string[] => at(line).options.map((option) => option.insert);

  it("offers commands and analytes at the start, units behind a number", () => {
    expect(words("ra")).toContain("range");
    expect(words("alk")).toContain("alkalinity");
    expect(words("Ca 62 ")).toContain("mg/L");
    expect(words("Ca 62 mg/L, S")).toContain("SO4");
  });

  it("offers changes, models and entries behind try", () => {
    expect(words("try cal")).toContain("calcite");
    expect(words("try activity d")).toEqual(["davies", "debye-huckel"]);
    expect(words("try #")).toEqual(["#2", "#1"]);
  });

  it("replaces just the word at the caret and shows the signature as a hint", () => {
    expect(at("try cal")).toMatchObject({ from: 4, to: 7 });
    expect(at("range ").hint).toContain("field low to high");
  });

  it("offers nothing in an empty prompt, so that Tab moves the focus", () => {
    expect(at("").options).toEqual([]);
  });
});
