"use client";
import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import { listJobs, listSampleSets } from "@/lib/client/api";
import { specForLine } from "@/lib/chemistry/parse-water";
import type { ConsoleView } from "@/lib/commands/command";
import type { EntryBody } from "@/lib/commands/entry";
import { readLine, requestOf, type ReadLine } from "@/lib/commands/read-line";
import { COMMANDS } from "@/lib/commands/registry";
import { withStateReport } from "@/lib/commands/solved-entries";
import { loadHistory, rememberLine } from "@/lib/commands/stream-memory";
import type { Me } from "@/lib/schemas/api";
import { sayBody } from "./say-entry";
import { problemBody, useConsoleHost, type Learned } from "./use-console-host";
import { useStream, type Stream } from "./use-stream";

type Known = Pick<ConsoleView, "jobs" | "sets">;

/** Newest first, one of each id. */
const merged = <T extends { id: string }>(fresh: readonly T[], old: readonly T[]): T[] =>
  [...fresh, ...old.filter((each) => !fresh.some((other) => other.id === each.id))];

/** Jobs and sample sets for completion; the prompt works without them. */
function useKnown(): [Known, (what: Learned) => void] {
  const [known, setKnown] = useState<Known>({ jobs: [], sets: [] });
  const learn = useCallback((what: Learned) => setKnown((now) => ({
    jobs: what.jobs ? merged(what.jobs, now.jobs) : now.jobs, sets: what.sets ? merged(what.sets, now.sets) : now.sets,
  })), []);
  useEffect(() => {
    void listJobs({ limit: 25 }).then(({ jobs }) => learn({ jobs }), () => {});
    void listSampleSets({ limit: 100 }).then(({ sampleSets }) => learn({ sets: sampleSets }), () => {});
  }, [learn]);
  return [known, learn];
}

/** The view commands read: as a value for rendering, and as a function for what runs between renders. */
function useView(me: Pick<Me, "role">, stream: Stream, known: Known): [ConsoleView, () => ConsoleView] {
  const view = useMemo<ConsoleView>(() => {
    const own: ConsoleView = {
      entries: stream.entries, jobs: known.jobs, sets: known.sets, role: me.role, undoable: stream.undoable,
      origin: typeof location === "undefined" ? "" : location.origin, commandNames: COMMANDS.map((command) => command.name),
      requestOf: (line) => requestOf(line, own),
    };
    return own;
  }, [stream.entries, stream.undoable, known, me.role]);
  const latest = useRef({ view, stream });
  useEffect(() => { latest.current = { view, stream }; });
  const viewNow = useCallback((): ConsoleView => ({ ...latest.current.view, ...latest.current.stream.now() }), []);
  return [view, viewNow];
}

/** Everything of the console but its picture: stream, history, view, and the running of lines. */
export function useConsole(me: Pick<Me, "id" | "role">) {
  const stream = useStream(me.id);
  const [known, learn] = useKnown();
  const [view, viewNow] = useView(me, stream, known);
  const [history, setHistory] = useState<string[]>([]);
  const [said, setSaid] = useState({ text: "", isShown: false });
  useEffect(() => { setHistory(loadHistory(localStorage, me.id)); }, [me.id]);

  /** Says what was done; shown as well unless an entry shows it. */
  const announce = useCallback((text: string, isShown = true) => setSaid({ text, isShown }), []);
  const remember = useCallback((line: string) => setHistory((lines) => rememberLine(localStorage, me.id, lines, line)), [me.id]);
  const host = useConsoleHost({ userId: me.id, stream, view: viewNow, announce, learn });

  const runRead = useCallback(async (line: string, read: ReadLine): Promise<void> => {
    if (read.kind === "empty") return;
    remember(line);
    const leavesEntry = read.kind === "water" || read.command.leavesEntry;
    const number = leavesEntry ? stream.add(line, { kind: "waiting", what: "Working" }) : null;
    const answer = (body: EntryBody): void => { if (number !== null) stream.answer(number, body); };
    try {
      if (read.problems.length > 0) {
        answer({ kind: "problem", detail: "", problems: read.problems, issues: [] });
        if (number === null) announce(read.problems.map((each) => each.message).join(" "));
      } else if (read.kind === "command") {
        await read.command.run(read.call, host(number));
      } else {
        const spec = withStateReport(specForLine(read.water));
        answer({ kind: "state", spec, response: await host(number).solve(spec), from: null, changes: [] });
      }
    } catch (error) {
      const body = problemBody(error);
      if (number === null) announce(body.kind === "problem" ? body.detail : "That did not work.");
      else answer(body);
    }
    const entry = number === null ? null : stream.now().entries.find((each) => each.number === number);
    if (entry) announce(sayBody(entry), false);
  }, [announce, host, remember, stream]);

  const run = useCallback((line: string) => { void runRead(line, readLine(line, viewNow())); }, [runRead, viewNow]);
  return { stream, view, viewNow, history, remember, said, announce, run, runRead };
}
