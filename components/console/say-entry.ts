import type { Entry } from "@/lib/commands/entry";
import { fixed, grouped } from "@/lib/commands/numbers";

/** An answer in one sentence, for screen readers: what changed, not the whole table. */
export function sayBody(entry: Entry): string {
  const { body, number } = entry;
  switch (body.kind) {
    case "state": {
      const row = body.response.rows[0] ?? {};
      if (row.status !== "ok") return `Entry ${number}: not solved. ${String(row.message ?? "")}`;
      return `Entry ${number}: pH ${fixed(row.pH, 2)}, ANC ${fixed(row.ANC, 0)} microequivalents per litre${typeof row["SI:calcite"] === "number" ? `, calcite saturation index ${fixed(row["SI:calcite"], 2)}` : ""}.`;
    }
    case "grid": return `Entry ${number}: ${grouped(body.response.summary.ok)} of ${grouped(body.response.summary.rows)} points solved over ${body.field}.`;
    case "comparison": return `Entry ${number}: ${body.states.length} entries side by side.`;
    case "job": return `Entry ${number}: job ${body.title}.`;
    case "jobs": return `Entry ${number}: ${body.jobs.length} jobs.`;
    case "sets": return `Entry ${number}: ${body.sets.length} sample sets.`;
    case "constants": return `Entry ${number}: ${body.entries.map((each) => `${each.name}, log K ${fixed(each.logK, 3)}`).join("; ")}.`;
    case "code": return `Entry ${number}: ${body.caption}.`;
    case "help": return `Entry ${number}: help.`;
    case "note": return body.text;
    case "problem": return `Entry ${number}: not done. ${body.detail} ${[...body.problems, ...body.issues].map((each) => each.message).join(" ")}`;
    case "waiting": case "not-kept": return "";
  }
}
