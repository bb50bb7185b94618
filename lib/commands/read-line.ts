/** A typed line: nothing, a command, a water, or neither. Pure; the prompt calls it at each keystroke. */
import { parseWaterLine, specForLine, type ParsedLine } from "@/lib/chemistry/parse-water";
import type { ApiCall, Call, Command, Completion, ConsoleView, Mark } from "./command";
import { callAt } from "./command";
import type { LineProblem } from "./entry";
import { COMMANDS, findCommand } from "./registry";
import { SOLVE_PATH, withStateReport } from "./solved-entries";
import { completeWater } from "./complete-water";
import { splitWords } from "./words";
import { nearestName } from "@/lib/schemas/nearest-name";

export type ReadLine =
  | { kind: "empty"; problems: LineProblem[]; marks: Mark[] }
  | { kind: "command"; command: Command; call: Call; problems: LineProblem[]; marks: Mark[] }
  | { kind: "water"; water: ParsedLine; problems: LineProblem[]; marks: Mark[] };

/** Reads a line. A line whose first word is a command's name is that command; everything else is taken for a water. */
export function readLine(line: string, view: ConsoleView): ReadLine {
  const first = /\S+/.exec(line);
  if (!first) return { kind: "empty", problems: [], marks: [] };
  const command = findCommand(first[0].replace(/,$/, ""));
  const at = { start: first.index, end: first.index + first[0].length };
  if (command) {
    const call = callAt(line, at.end);
    const { problems, marks } = command.check(call, view);
    const reason = command.isAvailable(view);
    const all = reason ? [{ ...at, message: reason }] : problems;
    return { kind: "command", command, call, problems: all, marks: [{ ...at, kind: "command" }, ...marks] };
  }
  const water = parseWaterLine(line);
  const problems = waterProblems(water, line, at);
  return { kind: "water", water, problems, marks: waterMarks(water) };
}

function waterProblems(water: ParsedLine, line: string, first: { start: number; end: number }): LineProblem[] {
  const problems: LineProblem[] = water.tokens.filter((token) => token.kind === "unknown" || token.problem !== undefined)
    .map((token) => ({ start: token.start, end: token.end, message: token.problem ?? `“${line.slice(token.start, token.end)}” is not known here.`, suggestion: token.suggestion }));
  const own = problems.find((each) => each.start === first.start);
  const name = nearestName(line.slice(first.start, first.end), COMMANDS.map((each) => each.name));
  // A line that begins with an unknown word is more likely a command mistyped than a water.
  if (own && name && !own.suggestion) own.suggestion = name;
  return problems;
}

const waterMarks = (water: ParsedLine): Mark[] => water.tokens
  .filter((token) => token.kind !== "separator")
  .map((token) => ({ start: token.start, end: token.end, kind: token.kind === "unknown" ? "unknown" : token.kind === "analyte" ? "name" : "value", shown: token.shown }));

/** The request a line would send: of a command its own, of a water the solving of it. */
export function requestOf(line: string, view: ConsoleView): { request: ApiCall | null; problems: LineProblem[] } {
  const read = readLine(line, view);
  if (read.kind === "command") return { request: read.problems.length === 0 ? read.command.apiCall(read.call, view) : null, problems: read.problems };
  if (read.kind === "empty" || read.problems.length > 0) return { request: null, problems: read.problems };
  return { request: { method: "POST", path: SOLVE_PATH, body: withStateReport(specForLine(read.water)) }, problems: [] };
}

export interface LineCompletion {
  /** Characters [from, to) are replaced by the option taken. */
  from: number;
  to: number;
  options: Completion[];
  /** What may still follow, shown dim behind the caret. */
  hint: string;
}

/** At most this many options are offered; typing on narrows them. */
const MOST_OPTIONS = 40;

/** What may stand at the caret. */
export function completeLine(line: string, caret: number, view: ConsoleView): LineCompletion {
  const head = line.slice(0, caret);
  const partial = /("[^"]*|[^\s,"]*)$/.exec(head)![0];
  const from = caret - partial.length;
  const before = splitWords(head.slice(0, from));
  const none = { from, to: caret, options: [] as Completion[], hint: "" };
  if (before.length === 0) {
    if (partial === "") return none;
    const commands = COMMANDS.filter((each) => each.name.startsWith(partial.toLowerCase()) && each.isAvailable(view) === null)
      .map((each) => ({ insert: each.name, detail: each.title }));
    return { ...none, options: [...commands, ...completeWater([], partial)].slice(0, MOST_OPTIONS) };
  }
  const command = findCommand(before[0].text);
  if (!command) return { ...none, options: completeWater(before, partial).slice(0, MOST_OPTIONS) };
  const options = command.complete(before.slice(1).filter((word) => word.text !== ","), partial, view).slice(0, MOST_OPTIONS);
  const hint = before.length === 1 && partial === "" && caret === line.length ? command.signature : "";
  return { ...none, options: options.filter((each) => each.insert !== partial), hint };
}
