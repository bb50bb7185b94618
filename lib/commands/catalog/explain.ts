/** Commands about commands: what there is, and what it looks like over HTTP. */
import { defineCommand, type ApiCall } from "../command";
import type { Entry, LineProblem } from "../entry";
import { curlFor, pythonFor } from "../export-entry";
import { completeReference, findReference, isReference } from "../references";
import { apiCallOf } from "../solved-entries";
import { nearestName } from "@/lib/schemas/nearest-name";

export const help = defineCommand<string | null>({
  name: "help",
  title: "Commands and keys",
  keywords: ["keys", "shortcuts", "manual", "how", "commands", "?"],
  help: "What can be typed and pressed here; with a command's name, that command, its example and its API equivalent.",
  signature: "[command]",
  example: "help try",
  key: { combo: "F1", scope: "everywhere" },
  read(call, view) {
    const word = call.words[0];
    if (!word) return { args: null as string | null, problems: [], marks: [] };
    const name = view.commandNames.find((each) => each === word.text.toLowerCase());
    if (name) return { args: name, problems: [], marks: [{ start: word.start, end: word.end, kind: "command" }] };
    const problem: LineProblem = { start: word.start, end: word.end, message: `There is no command “${word.text}”.`, suggestion: nearestName(word.text, view.commandNames) ?? undefined };
    return { args: null, problems: [problem], marks: [] };
  },
  complete: (before, partial, view) => (before.length > 0 ? [] : view.commandNames.filter((name) => name.startsWith(partial.toLowerCase())).map((insert) => ({ insert, detail: "command" }))),
  perform: (topic, host) => host.answer({ kind: "help", topic }),
  acceptsNull: true,
});

interface Arguments { request: ApiCall; language: "curl" | "python"; of: string }

const hasRequest = (entry: Entry): boolean => apiCallOf(entry) !== null;

export const api = defineCommand<Arguments>({
  name: "api",
  title: "Show the API request of an entry or a line",
  keywords: ["http", "curl", "python", "request", "script", "equivalent"],
  help: "The HTTP request that gives the same answer, as curl or Python: of an entry by number, or of any line written after it.",
  signature: "[curl|python] entry or line",
  example: "api try calcite, open",
  read(call, view) {
    const first = call.words[0];
    const language = first && /^(curl|python)$/i.test(first.text) ? (first.text.toLowerCase() as Arguments["language"]) : null;
    const words = language ? call.words.slice(1) : call.words;
    const marks = language ? [{ start: first.start, end: first.end, kind: "name" as const }] : [];
    const chosen = language ?? "curl";
    if (words.length <= 1 && (words.length === 0 || isReference(words[0].text))) {
      const found = words[0] ? findReference(words[0], view, hasRequest, "entry with a request") : { entry: view.entries.findLast(hasRequest) ?? null, problems: [] };
      if (found.entry) return { args: { request: apiCallOf(found.entry)!, language: chosen, of: `entry ${found.entry.number}` }, problems: [], marks };
      const none: LineProblem = { start: call.start, end: call.start, message: "Write an entry's number or a whole line, for example: api Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C." };
      return { args: null, problems: found.problems.length > 0 ? found.problems : [none], marks };
    }
    const start = words[0].start;
    const line = call.text.slice(start - call.start).trimEnd();
    const { request, problems } = view.requestOf(line);
    const shifted = problems.map((each) => ({ ...each, start: each.start + start, end: each.end + start }));
    if (request) return { args: { request, language: chosen, of: line }, problems: shifted, marks };
    const local: LineProblem = { start, end: start + line.length, message: "That happens in the browser alone; there is no request for it." };
    return { args: null, problems: shifted.length > 0 ? shifted : [local], marks };
  },
  complete: (before, partial, view) => (before.length > 1 ? [] : [
    ...(before.length === 0 ? ["curl", "python"].filter((each) => each.startsWith(partial.toLowerCase())).map((insert) => ({ insert, detail: "language" })) : []),
    ...completeReference(partial, view, hasRequest),
  ]),
  perform({ request, language, of }, host) {
    const { origin } = host.view();
    host.answer({ kind: "code", language, caption: `The API request of ${of}`, text: language === "curl" ? curlFor(request, origin) : pythonFor(request, origin) });
  },
  apiCall: ({ request }) => request,
});
