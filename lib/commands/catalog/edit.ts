import { defineCommand } from "../command";
import { specOf, type Entry } from "../entry";
import { completeReference, takeEntry } from "../references";

const hasSpec = (entry: Entry): boolean => specOf(entry) !== null;

export const edit = defineCommand<Entry | null>({
  name: "edit",
  title: "Open as a spec in the editor",
  keywords: ["spec", "json", "document", "editor", "open"],
  help: "Opens the spec behind an entry in the spec editor; without any entry, the draft as you left it.",
  signature: "[entry]",
  example: "edit #2",
  key: { combo: "F2", scope: "console" },
  leavesEntry: false,
  acceptsNull: true,
  read(call, view) {
    if (call.words.length === 0) return { args: view.entries.findLast(hasSpec) ?? null, problems: [], marks: [] };
    const found = takeEntry(call.words, view, hasSpec, "water or range");
    const extra = found.rest[0];
    const problems = extra ? [{ start: extra.start, end: extra.end, message: "One entry is enough: edit #2." }] : found.problems;
    return { args: found.entry, problems, marks: found.marks };
  },
  complete: (before, partial, view) => (before.length === 0 ? completeReference(partial, view, hasSpec) : []),
  perform: (entry, host) => host.openEditor(entry && specOf(entry)),
});
