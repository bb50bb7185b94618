"use client";
import { useRouter } from "next/navigation";
import { useCallback } from "react";
import { cancelJob, getConstants, listJobs, listSampleSets, solve, submitJob } from "@/lib/client/api";
import { ApiError } from "@/lib/client/errors";
import type { ConsoleHost, ConsoleView } from "@/lib/commands/command";
import type { EntryBody } from "@/lib/commands/entry";
import { keepDraft } from "@/lib/commands/stream-memory";
import { chooseTheme } from "@/lib/client/theme";
import { leaveSession } from "@/lib/client/session";
import type { JobSpec } from "@/lib/schemas/job-spec";
import type { Job, SampleSet } from "@/lib/schemas/api";
import type { Stream } from "./use-stream";

/** Hands a text to the person as a file, without a request. */
function saveFile(name: string, mediaType: string, text: string): void {
  const address = URL.createObjectURL(new Blob([text], { type: mediaType }));
  const link = Object.assign(document.createElement("a"), { href: address, download: name });
  link.click();
  URL.revokeObjectURL(address);
}

export interface Learned { jobs?: Job[]; sets?: SampleSet[] }

/** A fault as an entry: the server's own words and places, or what can be said about a lost connection. */
export function problemBody(error: unknown): EntryBody {
  if (error instanceof ApiError) {
    return { kind: "problem", detail: error.message, problems: [], issues: error.errors ?? [] };
  }
  const said = error instanceof Error ? error.message : String(error);
  return { kind: "problem", detail: `${said} The line is still here: bring it back with ↑.`, problems: [], issues: [] };
}

/** The console's side of what commands may do; one host per line run, bound to that line's entry. */
export function useConsoleHost(options: {
  userId: string; stream: Stream; view: () => ConsoleView; announce: (text: string) => void; learn: (what: Learned) => void;
}): (entryNumber: number | null) => ConsoleHost {
  const router = useRouter();
  const { userId, stream, view, announce, learn } = options;
  return useCallback((entryNumber): ConsoleHost => ({
    view,
    answer: (body) => { if (entryNumber !== null) stream.answer(entryNumber, body); },
    solve: (spec) => solve(spec),
    submit: async (spec) => { const job = await submitJob(spec); learn({ jobs: [job] }); return job; },
    cancelJob: (id) => cancelJob(id),
    listJobs: async (text) => { const { jobs } = await listJobs(text ? { q: text, limit: 25 } : { limit: 25 }); learn({ jobs }); return jobs; },
    listSets: async (text) => { const { sampleSets } = await listSampleSets(text ? { q: text, limit: 50 } : { limit: 50 }); learn({ sets: sampleSets }); return sampleSets; },
    constants: (temperature) => getConstants(temperature),
    navigate: (path) => router.push(path),
    openEditor: (spec: JobSpec | null) => {
      if (spec) keepDraft(localStorage, userId, JSON.stringify(spec, null, 2));
      router.push("/spec");
    },
    copyText: (text) => navigator.clipboard.writeText(text),
    saveFile,
    chooseTheme: (theme) => { chooseTheme(theme); announce(`Theme: ${theme}.`); },
    clearEntries: (numbers) => {
      const count = stream.clear(numbers);
      announce(`${count} ${count === 1 ? "entry" : "entries"} cleared; undo brings ${count === 1 ? "it" : "them"} back.`);
      return count;
    },
    undoClear: () => {
      const count = stream.undo();
      announce(count === 0 ? "Nothing was cleared." : `${count} ${count === 1 ? "entry is" : "entries are"} back.`);
      return count;
    },
    signOut: () => leaveSession(),
  }), [announce, learn, router, stream, userId, view]);
}
