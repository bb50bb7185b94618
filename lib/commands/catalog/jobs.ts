import { defineCommand, readNothing, type ConsoleView } from "../command";
import type { LineProblem } from "../entry";
import { joined } from "../words";
import { nearestName } from "@/lib/schemas/nearest-name";

export const jobs = defineCommand<string | null>({
  name: "jobs",
  title: "List jobs",
  keywords: ["queue", "running", "finished", "list", "batch"],
  help: "The newest jobs of your team, with their counts; words after it search the titles.",
  signature: "[words of the title]",
  example: "jobs",
  key: { combo: "F9", scope: "console" },
  read: (call) => ({ args: call.text.trim() || null, problems: [], marks: [] }),
  async perform(text, host) {
    host.answer({ kind: "waiting", what: "Asking for jobs" });
    host.answer({ kind: "jobs", jobs: await host.listJobs(text) });
  },
  acceptsNull: true,
  apiCall: (text) => ({ method: "GET", path: `/api/v1/jobs${text ? `?q=${encodeURIComponent(text)}` : ""}` }),
});

type KnownJob = ConsoleView["jobs"][number];

function findJob(text: string, view: ConsoleView): KnownJob | null {
  if (text === "" || /^last$/i.test(text)) return view.jobs[0] ?? null;
  const lower = text.toLowerCase();
  return view.jobs.find((job) => job.id === text || job.title.toLowerCase() === lower)
    ?? view.jobs.find((job) => job.title.toLowerCase().startsWith(lower)) ?? null;
}

export const openJob = defineCommand<{ id: string; title: string }>({
  name: "job",
  title: "Follow a job here",
  keywords: ["progress", "open", "results", "live"],
  help: "Shows one job as an entry that moves on while it runs: progress, counts, its first rows. By title, by id, or the newest.",
  signature: "[title or id]",
  example: "job last",
  isAvailable: (view) => (view.jobs.length > 0 ? null : "There is no job yet."),
  read(call, view) {
    const name = joined(call.words);
    const place = { start: name.start || call.start, end: name.end || call.start };
    const found = findJob(name.text, view);
    // An id that this page has not seen yet is for the server to know.
    if (!found && /^job_\w{20}$/.test(name.text)) return { args: { id: name.text, title: name.text }, problems: [], marks: [] };
    if (found) return { args: found, problems: [], marks: [{ ...place, kind: "name", shown: found.status }] };
    const near = nearestName(name.text, view.jobs.map((job) => job.title));
    const problem: LineProblem = { ...place, message: name.text ? `There is no job “${name.text}”; jobs lists them.` : "There is no job yet.", suggestion: near ?? undefined };
    return { args: null, problems: [problem], marks: [] };
  },
  complete: (before, partial, view) => (before.length > 0 ? [] : view.jobs
    .filter((job) => job.title.toLowerCase().startsWith(partial.replace(/^"/, "").toLowerCase()) || job.id.startsWith(partial))
    .map((job) => ({ insert: `"${job.title}"`, detail: job.status }))),
  perform: (job, host) => host.answer({ kind: "job", jobId: job.id, title: job.title, showChart: false }),
  apiCall: (job) => ({ method: "GET", path: `/api/v1/jobs/${job.id}` }),
});

export const sets = defineCommand<string | null>({
  name: "sets",
  title: "List sample sets",
  keywords: ["samples", "waters", "analyses", "list"],
  help: "The stored sample sets, with the number of waters in each; words after it search the names.",
  signature: "[words of the name]",
  example: "sets",
  read: (call) => ({ args: call.text.trim() || null, problems: [], marks: [] }),
  async perform(text, host) {
    host.answer({ kind: "waiting", what: "Asking for sample sets" });
    host.answer({ kind: "sets", sets: await host.listSets(text) });
  },
  acceptsNull: true,
  apiCall: (text) => ({ method: "GET", path: `/api/v1/sample-sets${text ? `?q=${encodeURIComponent(text)}` : ""}` }),
});

export const cancel = defineCommand<{ id: string; title: string }>({
  name: "cancel",
  title: "Cancel a job",
  keywords: ["stop", "halt", "abort", "end"],
  help: "Stops a queued or running job; rows that are finished stay. The title or id must be given.",
  signature: "title or id",
  example: "cancel \"Springs and becks\"",
  isAvailable: (view) => (view.jobs.some(isUnderWay) ? null : "No job is queued or running."),
  read(call, view) {
    const name = joined(call.words);
    const place = { start: name.start || call.start, end: name.end || call.start };
    const running = view.jobs.filter(isUnderWay);
    const found = name.text === "" ? null : findJob(name.text, { ...view, jobs: running });
    if (found) return { args: found, problems: [], marks: [{ ...place, kind: "name", shown: found.status }] };
    const message = name.text === "" ? "Which job? Its title or id follows." : `No queued or running job is called “${name.text}”.`;
    return { args: null, problems: [{ ...place, message, suggestion: running[0] && `"${running[0].title}"` }], marks: [] };
  },
  complete: (before, partial, view) => (before.length > 0 ? [] : view.jobs.filter(isUnderWay)
    .filter((job) => job.title.toLowerCase().startsWith(partial.replace(/^"/, "").toLowerCase())).map((job) => ({ insert: `"${job.title}"`, detail: job.status }))),
  async perform(job, host) {
    host.answer({ kind: "waiting", what: "Cancelling" });
    const after = await host.cancelJob(job.id);
    host.answer({ kind: "job", jobId: after.id, title: after.title, showChart: false });
  },
  apiCall: (job) => ({ method: "POST", path: `/api/v1/jobs/${job.id}/cancel` }),
});

const isUnderWay = (job: KnownJob): boolean => job.status === "queued" || job.status === "running";

export const leave = defineCommand<true>({
  name: "leave",
  title: "Sign out",
  keywords: ["sign out", "log out", "logout", "exit", "quit"],
  help: "Ends this session on this computer. History and stream stay in this browser under your name.",
  signature: "",
  example: "leave",
  leavesEntry: false,
  worksAnywhere: true,
  read: readNothing,
  perform: (_args, host) => host.signOut(),
});
