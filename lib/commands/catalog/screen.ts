/** Commands that act on the screen alone. */
import { defineCommand, readNothing } from "../command";
import type { Entry, LineProblem } from "../entry";
import { completeReference, findReference, isReference } from "../references";
import { nearestName } from "@/lib/schemas/nearest-name";

export interface Page { word: string; path: string; title: string; role?: "administrator" }

/** Pages by the word that goes there; the palette lists them too. */
export const PAGES: readonly Page[] = [
  { word: "console", path: "/", title: "Console" },
  { word: "editor", path: "/spec", title: "Spec editor" },
  { word: "jobs", path: "/jobs", title: "Jobs" },
  { word: "samples", path: "/samples", title: "Sample sets" },
  { word: "upload", path: "/samples/new", title: "Upload samples" },
  { word: "constants", path: "/constants", title: "Constants and their sources" },
  { word: "tokens", path: "/tokens", title: "API tokens" },
  { word: "account", path: "/account", title: "Your account" },
  { word: "people", path: "/admin", title: "People", role: "administrator" },
];

export const go = defineCommand<Page>({
  name: "go",
  title: "Go to a page",
  keywords: ["page", "open", "navigate", "visit"],
  help: "Leaves the console for a page; the stream is kept as it is.",
  signature: "page",
  example: "go samples",
  leavesEntry: false,
  worksAnywhere: true,
  read(call, view) {
    const words = call.words.filter((word) => !/^(to|the|page)$/i.test(word.text));
    const pages = PAGES.filter((page) => !page.role || page.role === view.role);
    const word = words[0];
    if (!word) return { args: null, marks: [], problems: [{ start: call.start, end: call.start, message: `Where to? ${pages.map((page) => page.word).join(", ")}.` }] };
    const page = pages.find((each) => each.word === word.text.toLowerCase());
    if (page) return { args: page, problems: [], marks: [{ start: word.start, end: word.end, kind: "name", shown: page.title }] };
    return { args: null, marks: [], problems: [{ start: word.start, end: word.end, message: `There is no page “${word.text}”.`, suggestion: nearestName(word.text, pages.map((each) => each.word)) ?? undefined }] };
  },
  complete: (before, partial, view) => (before.length > 0 ? [] : PAGES
    .filter((page) => (!page.role || page.role === view.role) && page.word.startsWith(partial.toLowerCase()))
    .map((page) => ({ insert: page.word, detail: page.title }))),
  perform: (page, host) => host.navigate(page.path),
});

export const clear = defineCommand<"all" | number[]>({
  name: "clear",
  title: "Clear the stream",
  keywords: ["remove", "delete", "empty", "entries", "clean"],
  help: "Takes all entries, or those named, out of the stream. undo brings them back.",
  signature: "[entry entry …]",
  example: "clear #3 #4",
  leavesEntry: false,
  isAvailable: (view) => (view.entries.length > 0 ? null : "The stream is empty."),
  read(call, view) {
    const words = call.words.filter((word) => !/^(,|and|all)$/i.test(word.text));
    if (words.length === 0) return { args: "all", problems: [], marks: [] };
    const any = (): boolean => true;
    const found = words.map((word) => (isReference(word.text) ? findReference(word, view, any, "entry")
      : { entry: null as Entry | null, problems: [{ start: word.start, end: word.end, message: `“${word.text}” is not an entry; write #3, 3 or last.` }] as LineProblem[] }));
    const problems = found.flatMap((each) => each.problems);
    return { args: problems.length === 0 ? found.map((each) => each.entry!.number) : null, problems, marks: words.map((word) => ({ start: word.start, end: word.end, kind: "reference" as const })) };
  },
  complete: (_before, partial, view) => completeReference(partial, view, () => true),
  perform: (numbers, host) => { host.clearEntries(numbers); },
});

export const undo = defineCommand<true>({
  name: "undo",
  title: "Bring cleared entries back",
  keywords: ["restore", "back", "revert"],
  help: "Puts back what clear took away last.",
  signature: "",
  example: "undo",
  leavesEntry: false,
  isAvailable: (view) => (view.undoable > 0 ? null : "Nothing was cleared."),
  read: readNothing,
  perform: (_args, host) => { host.undoClear(); },
});

export const THEMES = ["dark", "light", "system"] as const;

export const theme = defineCommand<(typeof THEMES)[number]>({
  name: "theme",
  title: "Choose dark or light",
  keywords: ["colour", "color", "appearance", "night", "dark", "light"],
  help: "Dark, light, or as the system has it.",
  signature: "dark|light|system",
  example: "theme light",
  leavesEntry: false,
  worksAnywhere: true,
  read(call) {
    const word = call.words[0];
    const chosen = THEMES.find((each) => each === word?.text.toLowerCase());
    if (chosen) return { args: chosen, problems: [], marks: [{ start: word.start, end: word.end, kind: "name" }] };
    const place = word ?? { start: call.start, end: call.start };
    return { args: null, marks: [], problems: [{ start: place.start, end: place.end, message: "dark, light or system.", suggestion: word ? nearestName(word.text, THEMES) ?? undefined : undefined }] };
  },
  complete: (before, partial) => (before.length > 0 ? [] : THEMES.filter((each) => each.startsWith(partial.toLowerCase())).map((insert) => ({ insert, detail: "" }))),
  perform: (chosen, host) => host.chooseTheme(chosen),
});
