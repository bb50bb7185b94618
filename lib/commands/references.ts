import type { Completion, ConsoleView, Mark } from "./command";
import { describeEntry, type Entry, type LineProblem } from "./entry";
import type { Word } from "./words";

export interface FoundEntry {
  entry: Entry | null;
  /** Words that are left after the reference. */
  rest: Word[];
  problems: LineProblem[];
  marks: Mark[];
}

const REFERENCE = /^(?:#?(\d{1,6})|last)$/i;

/** True where the word points at an entry: "#3", "3" or "last". */
export const isReference = (text: string): boolean => REFERENCE.test(text);

/** True where the first word is a reference; "18" before "°C" is a temperature. */
const startsWithReference = ([first, second]: readonly Word[]): boolean =>
  first !== undefined && isReference(first.text) && !(second !== undefined && /^(°|deg|c$)/i.test(second.text) && !first.text.startsWith("#"));

/**
 * The entry a command works on: the first word where it is a reference, else the newest entry that fits. `fits` says
 * which entries the command can use, `wanted` names them in the message.
 */
export function takeEntry(words: readonly Word[], view: ConsoleView, fits: (entry: Entry) => boolean, wanted: string): FoundEntry {
  const first = words[0];
  const newest = view.entries.findLast(fits) ?? null;
  if (!startsWithReference(words)) {
    const place = first ?? { start: 0, end: 0 };
    const problems = newest ? [] : [{ start: place.start, end: place.end, message: `There is no ${wanted} yet; type a water first.` }];
    return { entry: newest, rest: [...words], problems, marks: [] };
  }
  const rest = words.slice(1);
  const found = findReference(first, view, fits, wanted);
  return { ...found, rest, marks: [{ start: first.start, end: first.end, kind: found.entry ? "reference" : "unknown" }] };
}

/** The entry one word points at, or the problem with it. */
export function findReference(
  word: Word, view: ConsoleView, fits: (entry: Entry) => boolean, wanted: string,
): { entry: Entry | null; problems: LineProblem[] } {
  const at = { start: word.start, end: word.end };
  if (/^last$/i.test(word.text)) {
    const newest = view.entries.findLast(fits) ?? null;
    return { entry: newest, problems: newest ? [] : [{ ...at, message: `There is no ${wanted} yet.` }] };
  }
  const number = Number(word.text.replace("#", ""));
  const entry = view.entries.find((each) => each.number === number);
  if (!entry) return { entry: null, problems: [{ ...at, message: `There is no entry ${number}.`, ...nearestEntry(view, fits) }] };
  if (!fits(entry)) return { entry: null, problems: [{ ...at, message: `Entry ${number} is not a ${wanted}.`, ...nearestEntry(view, fits) }] };
  return { entry, problems: [] };
}

function nearestEntry(view: ConsoleView, fits: (entry: Entry) => boolean): { suggestion?: string } {
  const newest = view.entries.findLast(fits);
  return newest ? { suggestion: `#${newest.number}` } : {};
}

/** Entries to offer where a reference may stand, newest first. */
export function completeReference(partial: string, view: ConsoleView, fits: (entry: Entry) => boolean): Completion[] {
  const wanted = partial.replace(/^#/, "");
  if (partial !== "" && !/^#?\d*$/.test(partial)) return "last".startsWith(partial.toLowerCase()) ? [{ insert: "last", detail: "the newest that fits" }] : [];
  return view.entries.filter((entry) => fits(entry) && String(entry.number).startsWith(wanted)).slice(-8).reverse()
    .map((entry) => ({ insert: `#${entry.number}`, detail: describeEntry(entry) }));
}
