import { defineCommand, type ApiCall, type ConsoleHost, type Reading, type Call, type ConsoleView, type Completion } from "../command";
import { specOf, type Entry } from "../entry";
import { csvOf, curlFor, pasteTableOf, pythonFor, tableOf } from "../export-entry";
import { completeReference, isReference, takeEntry } from "../references";
import { apiCallOf } from "../solved-entries";
import { type Word } from "../words";
import { nearestName } from "@/lib/schemas/nearest-name";

type Form = "table" | "csv" | "curl" | "python" | "spec";
interface Arguments { entry: Entry; form: Form }

const FORMS: Record<Form, string> = {
  table: "for a document or spreadsheet", csv: "comma-separated values", curl: "the request for a shell",
  python: "the request in Python", spec: "the JSON document",
};

const needsTable = (form: Form): boolean => form === "table" || form === "csv";
const fits = (form: Form) => (entry: Entry): boolean => (needsTable(form) ? tableOf(entry) !== null : form === "spec" ? specOf(entry) !== null : apiCallOf(entry) !== null);
const anyFits = (entry: Entry): boolean => tableOf(entry) !== null || apiCallOf(entry) !== null;

function read(call: Call, view: ConsoleView, forms: readonly Form[], usual: Form): Reading<Arguments> {
  const word = call.words.find((each) => !isReference(each.text) && !/^(as|,|entry)$/i.test(each.text));
  const form = word ? forms.find((each) => each === word.text.toLowerCase()) : usual;
  if (!form) {
    return { args: null, marks: [], problems: [{ start: word!.start, end: word!.end, message: `“${word!.text}” is not a form; there are ${forms.join(", ")}.`, suggestion: nearestName(word!.text, forms) ?? undefined }] };
  }
  const found = takeEntry(call.words.filter((each) => isReference(each.text)), view, fits(form), needsTable(form) ? "entry with a table" : "entry with a request");
  const marks = [...found.marks, ...(word ? [{ start: word.start, end: word.end, kind: "name" as const }] : [])];
  const problems = found.problems.map((each) => (each.end === 0 ? { ...each, start: call.start, end: call.start } : each));
  return { args: found.entry && problems.length === 0 ? { entry: found.entry, form } : null, problems, marks };
}

function complete(before: readonly Word[], partial: string, view: ConsoleView, forms: readonly Form[]): Completion[] {
  const hasForm = before.some((word) => (forms as readonly string[]).includes(word.text.toLowerCase()));
  return [
    ...(hasForm ? [] : forms.filter((form) => form.startsWith(partial.toLowerCase())).map((insert) => ({ insert, detail: FORMS[insert] }))),
    ...(before.some((word) => isReference(word.text)) ? [] : completeReference(partial, view, anyFits)),
  ];
}

function textOf({ entry, form }: Arguments, view: ConsoleView): string {
  if (form === "spec") return JSON.stringify(specOf(entry), null, 2) + "\n";
  if (form === "csv") return csvOf(tableOf(entry)!);
  if (form === "table") return pasteTableOf(tableOf(entry)!);
  const call = apiCallOf(entry) as ApiCall;
  return form === "curl" ? curlFor(call, view.origin) : pythonFor(call, view.origin);
}

const COPY_FORMS = ["table", "csv", "curl", "python", "spec"] as const;
const SAVE_FORMS = ["csv", "spec"] as const;

export const copy = defineCommand<Arguments>({
  name: "copy",
  title: "Copy an entry as table, CSV, curl, Python or spec",
  keywords: ["clipboard", "export", "code", "script", "paste"],
  help: "Puts an entry on the clipboard: its numbers as a table or CSV, or the request that made it.",
  signature: "[entry] [table|csv|curl|python|spec]",
  example: "copy #1 curl",
  isAvailable: (view) => (view.entries.some(anyFits) ? null : "There is nothing to copy yet."),
  read: (call, view) => read(call, view, COPY_FORMS, "table"),
  complete: (before, partial, view) => complete(before, partial, view, COPY_FORMS),
  async perform(args, host: ConsoleHost) {
    const text = textOf(args, host.view());
    await host.copyText(text);
    host.answer({ kind: "note", text: `Entry ${args.entry.number} is on the clipboard as ${args.form} (${text.length.toLocaleString("en")} characters).` });
  },
  apiCall: ({ entry }) => apiCallOf(entry),
});

export const save = defineCommand<Arguments>({
  name: "save",
  title: "Save an entry as a file",
  keywords: ["download", "export", "csv", "file"],
  help: "Downloads an entry: its numbers as CSV, or its spec as JSON. Whole jobs are downloaded from their page.",
  signature: "[entry] [csv|spec]",
  example: "save #1 csv",
  isAvailable: (view) => (view.entries.some(anyFits) ? null : "There is nothing to save yet."),
  read: (call, view) => read(call, view, SAVE_FORMS, "csv"),
  complete: (before, partial, view) => complete(before, partial, view, SAVE_FORMS),
  perform(args, host) {
    const isCsv = args.form === "csv";
    const name = `tufa-${args.entry.number}.${isCsv ? "csv" : "json"}`;
    host.saveFile(name, isCsv ? "text/csv" : "application/json", textOf(args, host.view()));
    host.answer({ kind: "note", text: `Entry ${args.entry.number} was saved as ${name}.` });
  },
  apiCall: ({ entry }) => apiCallOf(entry),
});
