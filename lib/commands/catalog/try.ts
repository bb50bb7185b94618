import { applyChanges, completeChange, readChanges, type Answered, type CaseChange } from "../case-changes";
import { defineCommand } from "../command";
import type { Entry } from "../entry";
import { completeReference, isReference, takeEntry } from "../references";
import { firstAnswered, isWaterEntry, SOLVE_PATH, withStateReport } from "../solved-entries";

interface Arguments { entry: Entry; changes: CaseChange[] }

const specOfArguments = ({ entry, changes }: Arguments) => {
  const body = entry.body as { spec: Parameters<typeof applyChanges>[0] };
  return applyChanges(body.spec, changes, firstAnswered(entry) as Answered);
};

export const tryCase = defineCommand<Arguments>({
  name: "try",
  title: "Try a water under another assumption",
  keywords: ["calcite", "solid", "gas", "open", "closed", "co2", "temperature", "activity", "organic", "what if", "case"],
  help: "Solves an entry's water again with something changed: a solid it meets, the gas, a CO2 pressure, a temperature, a model, an amount.",
  signature: "[entry] change, change …",
  example: "try calcite, open, 18 °C",
  isAvailable: (view) => (view.entries.some(isWaterEntry) ? null : "There is no water yet."),
  read(call, view) {
    const found = takeEntry(call.words, view, isWaterEntry, "water");
    const read = readChanges(found.rest);
    const problems = [...found.problems, ...read.problems];
    const end = call.words[call.words.length - 1]?.end ?? call.start;
    if (problems.length === 0 && read.changes.length === 0) {
      problems.push({ start: call.words[0]?.start ?? call.start, end, message: "What should change? For example: calcite, open, pCO2 x10, 18 °C, activity davies, Ca 80 mg/L." });
    }
    const args = found.entry && problems.length === 0 ? { entry: found.entry, changes: read.changes } : null;
    return { args, problems, marks: [...found.marks, ...read.marks] };
  },
  complete: (before, partial, view) => [
    ...completeChange(before.filter((word, index) => !(index === 0 && isReference(word.text))), partial),
    ...(before.length === 0 ? completeReference(partial, view, isWaterEntry) : []),
  ],
  async perform(args, host) {
    const spec = withStateReport(specOfArguments(args));
    host.answer({ kind: "waiting", what: "Solving" });
    const response = await host.solve(spec);
    host.answer({ kind: "state", spec, response, from: args.entry.number, changes: args.changes.map((change) => change.label) });
  },
  apiCall: (args) => ({ method: "POST", path: SOLVE_PATH, body: withStateReport(specOfArguments(args)) }),
});
