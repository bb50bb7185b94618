import { defineCommand } from "../command";
import type { ComparedState, Entry } from "../entry";
import { completeReference, findReference } from "../references";
import { isWaterEntry } from "../solved-entries";

/** More columns than this are no longer seen side by side. */
const MOST_STATES = 6;

export const compare = defineCommand<Entry[]>({
  name: "compare",
  title: "Compare entries side by side",
  keywords: ["difference", "beside", "versus", "against"],
  help: "Sets two to six answers side by side and marks where they differ from the first. Without numbers: the last two.",
  signature: "[entry entry …]",
  example: "compare #1 #2",
  isAvailable: (view) => (view.entries.filter(isWaterEntry).length > 1 ? null : "Two answered waters are needed."),
  read(call, view) {
    const words = call.words.filter((word) => !/^(,|and|with|to)$/i.test(word.text));
    if (words.length === 0) {
      const lastTwo = view.entries.filter(isWaterEntry).slice(-2);
      if (lastTwo.length === 2) return { args: lastTwo, problems: [], marks: [] };
      return { args: null, marks: [], problems: [{ start: call.start, end: call.start, message: "Two answered waters are needed." }] };
    }
    const found = words.map((word) => (/^(#?\d{1,6}|last)$/i.test(word.text)
      ? { word, ...findReference(word, view, isWaterEntry, "water") }
      : { word, entry: null, problems: [{ start: word.start, end: word.end, message: `“${word.text}” is not an entry; write #3, 3 or last.` }] }));
    const problems = found.flatMap((each) => each.problems);
    const entries = [...new Set(found.flatMap((each) => (each.entry ? [each.entry] : [])))];
    const place = { start: words[0].start, end: words[words.length - 1].end };
    if (problems.length === 0 && entries.length < 2) problems.push({ ...place, message: "Two different entries at least." });
    if (entries.length > MOST_STATES) problems.push({ ...place, message: `At most ${MOST_STATES} side by side.` });
    return {
      args: problems.length === 0 ? entries : null, problems,
      marks: found.map(({ word, entry }) => ({ start: word.start, end: word.end, kind: entry ? "reference" as const : "unknown" as const })),
    };
  },
  complete: (_before, partial, view) => completeReference(partial, view, isWaterEntry),
  perform(entries, host) {
    const states = entries.flatMap((entry): ComparedState[] => (entry.body.kind === "state"
      ? [{ number: entry.number, label: entry.body.changes.join(", ") || entry.line, spec: entry.body.spec, response: entry.body.response }] : []));
    host.answer({ kind: "comparison", states });
  },
});
