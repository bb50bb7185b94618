import type { JobSpec } from "@/lib/schemas/job-spec";
import { defineCommand, type ConsoleView } from "../command";
import { specOf, type Entry, type LineProblem } from "../entry";
import { completeReference, isReference, takeEntry } from "../references";
import { joined } from "../words";
import { nearestName } from "@/lib/schemas/nearest-name";

interface Arguments { entry: Entry; set: ConsoleView["sets"][number] | null }

const hasSpec = (entry: Entry): boolean => specOf(entry) !== null;

/** The entry's spec, with the sample set's waters in place of its own. Values typed into the case stay. */
function specOfArguments({ entry, set }: Arguments): JobSpec {
  const spec = structuredClone(specOf(entry)!);
  if (!set) return { ...spec, title: spec.title ?? entry.line.slice(0, 120) };
  const { missing, belowLimit } = spec.waters as { missing?: unknown; belowLimit?: unknown };
  const kept = { ...(missing === undefined ? {} : { missing }), ...(belowLimit === undefined ? {} : { belowLimit }) };
  return { ...spec, title: `${set.name}: ${spec.cases[0].name}`.slice(0, 120), waters: { set: set.id, ...kept } as JobSpec["waters"] };
}

export const submit = defineCommand<Arguments>({
  name: "submit",
  title: "Submit an entry as a job",
  keywords: ["job", "batch", "queue", "sample set", "run", "over"],
  help: "Sends an entry's case to the queue, over its own water or over a sample set, and follows the job here.",
  signature: "[entry] [over sample set]",
  example: "submit #2 over \"Springs and becks\"",
  key: { combo: "F8", scope: "console" },
  isAvailable: (view) => (view.entries.some(hasSpec) ? null : "There is no water or range yet."),
  read(call, view) {
    const found = takeEntry(call.words, view, hasSpec, "water or range");
    const words = found.rest.filter((word, index) => !(index === 0 && /^(over|on|with)$/i.test(word.text)));
    const marks = [...found.marks];
    const problems: LineProblem[] = [...found.problems];
    let set: Arguments["set"] = null;
    if (words.length > 0) {
      const name = joined(words);
      set = view.sets.find((each) => each.id === name.text || each.name.toLowerCase() === name.text.toLowerCase()) ?? null;
      if (set) marks.push({ start: name.start, end: name.end, kind: "name", shown: `${set.waterCount} waters` });
      else {
        const near = nearestName(name.text, view.sets.map((each) => each.name)) ?? view.sets.find((each) => each.name.toLowerCase().includes(name.text.toLowerCase()))?.name;
        problems.push({ start: name.start, end: name.end, message: `There is no sample set “${name.text}”; sets lists them.`, suggestion: near && `"${near}"` });
      }
    } else if (found.rest.length > 0) problems.push({ ...joined(found.rest), message: "Over which sample set? Its name or id follows." });
    return { args: found.entry && problems.length === 0 ? { entry: found.entry, set } : null, problems, marks };
  },
  complete(before, partial, view) {
    const rest = before.filter((word, index) => !(index === 0 && isReference(word.text)));
    if (rest.length === 0) {
      const over = "over".startsWith(partial.toLowerCase()) ? [{ insert: "over", detail: "a sample set" }] : [];
      return [...over, ...(before.length === 0 ? completeReference(partial, view, hasSpec) : [])];
    }
    const wanted = partial.replace(/^"/, "").toLowerCase();
    return view.sets.filter((each) => each.name.toLowerCase().startsWith(wanted)).map((each) => ({ insert: `"${each.name}"`, detail: `${each.waterCount} waters` }));
  },
  async perform(args, host) {
    host.answer({ kind: "waiting", what: "Submitting" });
    const job = await host.submit(specOfArguments(args));
    host.answer({ kind: "job", jobId: job.id, title: job.title, showChart: false });
  },
  apiCall: (args) => ({ method: "POST", path: "/api/v1/jobs", body: specOfArguments(args) }),
});
