import { defineCommand } from "../command";
import type { Entry } from "../entry";
import { nearestName } from "@/lib/schemas/nearest-name";
import { usualAncRange } from "../range";
import { completeReference, isReference, takeEntry } from "../references";
import { firstAnswered, isWaterEntry } from "../solved-entries";
import { answerRange } from "./range";

interface Arguments { entry: Entry; y: string | null }

const canChart = (entry: Entry): boolean => isWaterEntry(entry) || entry.body.kind === "grid" || entry.body.kind === "job";

const columnsOf = (entry: Entry | null): string[] =>
  entry?.body.kind === "grid" ? entry.body.response.columns.filter((each) => each.type === "number" && each.name !== "residual").map((each) => each.name) : [];

export const chart = defineCommand<Arguments>({
  name: "chart",
  title: "Chart an entry",
  keywords: ["plot", "graph", "figure", "curve", "ph-anc", "picture"],
  help: "A water: its pH–ANC curve at the CO2 it came out with. A range: another column over the same field. A job: its pH against ANC.",
  signature: "[entry] [column]",
  example: "chart last",
  key: { combo: "F4", scope: "console" },
  isAvailable: (view) => (view.entries.some(canChart) ? null : "There is nothing to chart yet."),
  read(call, view) {
    const found = takeEntry(call.words, view, canChart, "water, range or job");
    const [word] = found.rest;
    if (!found.entry || found.problems.length > 0) return { args: null, problems: found.problems, marks: found.marks };
    if (!word) return { args: { entry: found.entry, y: null }, problems: [], marks: found.marks };
    const names = columnsOf(found.entry);
    const y = names.find((name) => name.toLowerCase() === word.text.toLowerCase());
    if (y) return { args: { entry: found.entry, y }, problems: [], marks: [...found.marks, { start: word.start, end: word.end, kind: "name" }] };
    const message = names.length === 0 ? "A column can be chosen for a range only." : `“${word.text}” is not a column of entry ${found.entry.number}.`;
    return { args: null, marks: found.marks, problems: [{ start: word.start, end: word.end, message, suggestion: nearestName(word.text, names) ?? undefined }] };
  },
  complete(before, partial, view) {
    const entry = takeEntry(before, view, canChart, "water, range or job").entry;
    const columns = before.filter((word) => !isReference(word.text)).length > 0 ? [] : columnsOf(entry)
      .filter((name) => name.toLowerCase().startsWith(partial.toLowerCase())).map((insert) => ({ insert, detail: "column" }));
    return [...(before.length === 0 ? completeReference(partial, view, canChart) : []), ...columns];
  },
  async perform({ entry, y }, host) {
    const body = entry.body;
    if (body.kind === "grid") host.answer({ ...body, y: y ?? body.y });
    else if (body.kind === "job") host.answer({ ...body, showChart: true });
    else await answerRange({ entry, range: usualAncRange(firstAnswered(entry)) }, "pH", "pH–ANC", host);
  },
});
