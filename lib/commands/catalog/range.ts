import { defineCommand, type ConsoleHost } from "../command";
import type { Entry } from "../entry";
import { completeRange, readRange, specForRange, type RangeRequest } from "../range";
import { completeReference, isReference, takeEntry } from "../references";
import { firstAnswered, isWaterEntry, SOLVE_PATH, specOfWater } from "../solved-entries";

interface Arguments { entry: Entry; range: RangeRequest }

/** Solves a water over a range and answers with the grid; shared with the command that charts. */
export async function answerRange({ entry, range }: Arguments, y: string, caption: string, host: ConsoleHost): Promise<void> {
  const spec = specForRange(specOfWater(entry), range, firstAnswered(entry));
  host.answer({ kind: "waiting", what: `Solving ${range.points} points` });
  const response = await host.solve(spec);
  host.answer({ kind: "grid", spec, response, from: entry.number, field: range.field, y, caption });
}

export const rangeOver = defineCommand<Arguments>({
  name: "range",
  title: "Run a water over a range of one field",
  keywords: ["vary", "axis", "grid", "curve", "sweep", "pco2", "anc", "temperature"],
  help: "Solves an entry's water at many values of one field and shows the curve and its numbers. CO2 runs on a log scale unless you say linear.",
  signature: "[entry] field low to high [unit] [points] [log|linear]",
  example: "range pCO2 200 to 20000 ppm",
  isAvailable: (view) => (view.entries.some(isWaterEntry) ? null : "There is no water yet."),
  read(call, view) {
    const found = takeEntry(call.words, view, isWaterEntry, "water");
    const read = readRange(found.rest.length > 0 ? found.rest : []);
    const end = call.words[call.words.length - 1]?.end ?? call.start;
    const problems = [...found.problems, ...read.problems.map((each) => (each.end === 0 ? { ...each, start: call.start, end } : each))];
    const args = found.entry && read.range && problems.length === 0 ? { entry: found.entry, range: read.range } : null;
    return { args, problems, marks: [...found.marks, ...read.marks] };
  },
  complete: (before, partial, view) => [
    ...completeRange(before.filter((word, index) => !(index === 0 && isReference(word.text))), partial),
    ...(before.length === 0 ? completeReference(partial, view, isWaterEntry) : []),
  ],
  perform: (args, host) => answerRange(args, args.range.field === "pH" ? "pCO2" : "pH", "", host),
  apiCall: ({ entry, range }) => ({ method: "POST", path: SOLVE_PATH, body: specForRange(specOfWater(entry), range, firstAnswered(entry)) }),
});
