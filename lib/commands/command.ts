/**
 * What a command of the console is. One object per command feeds the prompt, the palette, the shortcuts and the help;
 * adding one means adding its file to the catalogue and nothing else.
 */
import type { ConstantsTable, Job, SampleSet, SolveResponse } from "@/lib/schemas/api";
import type { JobSpec } from "@/lib/schemas/job-spec";
import type { Entry, EntryBody, LineProblem } from "./entry";
import { splitWords, type Word } from "./words";

/** Where a key works: on every page, only in the console, only in the spec editor. */
export type KeyScope = "everywhere" | "console" | "editor";

/** What commands may know about the screen. Read afresh at each keystroke; never changed by a command. */
export interface ConsoleView {
  entries: readonly Entry[];
  sets: readonly Pick<SampleSet, "id" | "name" | "waterCount">[];
  jobs: readonly Pick<Job, "id" | "title" | "status">[];
  role: "administrator" | "modeller" | "analyst";
  /** Address of this installation, for API examples. */
  origin: string;
  /** Entries that `undo` would bring back. */
  undoable: number;
  /** Names of all commands, for the commands about commands. */
  commandNames: readonly string[];
  /** The request another line would send; its problems are at that line's own places. */
  requestOf(line: string): { request: ApiCall | null; problems: LineProblem[] };
}

/** What commands may do. The console implements it; tests hand in a record of calls. */
export interface ConsoleHost {
  view(): ConsoleView;
  /** Sets what stands in the entry of the line being run. */
  answer(body: EntryBody): void;
  solve(spec: JobSpec): Promise<SolveResponse>;
  submit(spec: JobSpec): Promise<Job>;
  cancelJob(id: string): Promise<Job>;
  listJobs(text: string | null): Promise<Job[]>;
  listSets(text: string | null): Promise<SampleSet[]>;
  constants(temperature: number): Promise<ConstantsTable>;
  navigate(path: string): void;
  openEditor(spec: JobSpec | null): void;
  copyText(text: string): Promise<void>;
  saveFile(name: string, mediaType: string, text: string): void;
  chooseTheme(theme: "dark" | "light" | "system"): void;
  clearEntries(numbers: readonly number[] | "all"): number;
  undoClear(): number;
  signOut(): Promise<void>;
}

/** An HTTP request that does what a command does. */
export interface ApiCall {
  method: "GET" | "POST";
  path: string;
  body?: unknown;
}

/** The part of a line after the command's name. */
export interface Call {
  text: string;
  start: number;
  words: Word[];
}

export type MarkKind = "command" | "reference" | "name" | "value" | "unknown";

/** How a recognised stretch of the line is shown in place. */
export interface Mark {
  start: number;
  end: number;
  kind: MarkKind;
  /** What it was read as, e.g. "1.547 mmol/L"; shown under the word. */
  shown?: string;
}

export interface Reading<A> {
  args: A | null;
  problems: LineProblem[];
  marks: Mark[];
}

/** One thing that Tab may put in place of the word at the caret. */
export interface Completion {
  insert: string;
  detail: string;
}

export interface CommandDefinition<A> {
  /** What is typed; one word, unique. */
  name: string;
  /** What the palette shows. */
  title: string;
  keywords: readonly string[];
  help: string;
  /** Arguments after the name; [square] ones may be left out. */
  signature: string;
  example: string;
  key?: { combo: string; scope: KeyScope };
  /** null when it can be run now, else the reason why not. */
  isAvailable?(view: ConsoleView): string | null;
  /** Reads the arguments; pure, called at each keystroke. */
  read(call: Call, view: ConsoleView): Reading<A>;
  /** What may stand at the caret; `before` are the finished words, `partial` the one being typed. */
  complete?(before: readonly Word[], partial: string, view: ConsoleView): Completion[];
  perform(args: A, host: ConsoleHost): Promise<void> | void;
  /** The same thing over HTTP; null where it happens in the browser alone. */
  apiCall?(args: A, view: ConsoleView): ApiCall | null;
  /** False for commands that leave no entry behind (theme, undo …). */
  leavesEntry?: boolean;
  /** True for commands that need no stream: the palette runs them on whatever page it is opened. */
  worksAnywhere?: boolean;
  /** True where null is a value of A (nothing said) and not a reading that failed. */
  acceptsNull?: boolean;
}

/** A command with its argument type closed over, so that all sit in one list. */
export interface Command extends Omit<CommandDefinition<never>, "read" | "perform" | "apiCall" | "isAvailable" | "complete" | "leavesEntry" | "acceptsNull" | "worksAnywhere"> {
  leavesEntry: boolean;
  worksAnywhere: boolean;
  isAvailable(view: ConsoleView): string | null;
  complete(before: readonly Word[], partial: string, view: ConsoleView): Completion[];
  check(call: Call, view: ConsoleView): { problems: LineProblem[]; marks: Mark[] };
  run(call: Call, host: ConsoleHost): Promise<void>;
  apiCall(call: Call, view: ConsoleView): ApiCall | null;
}

/** Makes a command from its definition. `run` does nothing when the arguments have faults: the prompt shows those. */
export function defineCommand<A>(definition: CommandDefinition<A>): Command {
  return {
    ...definition,
    leavesEntry: definition.leavesEntry ?? true,
    worksAnywhere: definition.worksAnywhere ?? false,
    isAvailable: (view) => definition.isAvailable?.(view) ?? null,
    complete: (before, partial, view) => definition.complete?.(before, partial, view) ?? [],
    check: (call, view) => definition.read(call, view),
    run: async (call, host) => {
      const { args, problems } = definition.read(call, host.view());
      if (problems.length === 0 && (args !== null || definition.acceptsNull)) await definition.perform(args as A, host);
    },
    apiCall: (call, view) => {
      const { args, problems } = definition.read(call, view);
      if (problems.length > 0 || (args === null && !definition.acceptsNull)) return null;
      return definition.apiCall?.(args as A, view) ?? null;
    },
  };
}

/** The call of a command whose name ends at `start` of the line. */
export function callAt(line: string, start: number): Call {
  const text = line.slice(start);
  return { text, start, words: splitWords(text, start) };
}

/** For commands without arguments: anything behind the name is a fault. */
export function readNothing(call: Call): Reading<true> {
  const extra = call.words[0];
  if (!extra) return { args: true, problems: [], marks: [] };
  return {
    args: null, marks: [],
    problems: [{ start: extra.start, end: call.words[call.words.length - 1].end, message: "Nothing is expected here." }],
  };
}
