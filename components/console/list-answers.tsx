"use client";
import Link from "next/link";
import type { ConstantEntry, Job, SampleSet } from "@/lib/schemas/api";
import { FormulaText } from "@/components/ui/formula-text";
import { fixed, grouped } from "@/lib/commands/numbers";

const dated = (instant: string): string => instant.slice(0, 16).replace("T", " ");

export function JobsAnswer({ jobs, onTry }: { jobs: readonly Job[]; onTry: (line: string) => void }) {
  if (jobs.length === 0) return <p className="text-sm text-dim">No job fits. Submit one with: submit, or open the editor with: edit.</p>;
  return (
    <div className="overflow-x-auto" role="region" aria-label="Jobs" tabIndex={0}>
      <table className="w-full text-sm">
        <thead><tr className="text-left text-xs text-dim">{["title", "status", "rows", "ok", "submitted (UTC)", ""].map((head, index) => <th key={index} scope="col" className={`pb-1 pr-4 font-normal ${index === 2 || index === 3 ? "text-right" : ""}`}>{head}</th>)}</tr></thead>
        <tbody>
          {jobs.map((job) => (
            <tr key={job.id} className="align-baseline">
              <td className="max-w-80 truncate pr-4"><Link href={`/jobs/${job.id}`} className="inline-block min-h-7 text-accent underline-offset-4 hover:underline">{job.title}</Link></td>
              <td className={`pr-4 ${job.status === "failed" ? "text-bad" : job.status === "running" ? "text-accent" : ""}`}>{job.status}</td>
              <td className="pr-4 text-right tabular-nums">{grouped(job.counts.rows)}</td>
              <td className="pr-4 text-right tabular-nums">{grouped(job.counts.ok)}</td>
              <td className="whitespace-nowrap pr-4 tabular-nums text-dim">{dated(job.createdAt)}</td>
              <td><button type="button" className="min-h-7 text-dim underline-offset-4 hover:text-accent hover:underline" onClick={() => onTry(`job ${job.id}`)}>follow here</button></td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

export function SetsAnswer({ sets, onTry }: { sets: readonly SampleSet[]; onTry: (line: string) => void }) {
  if (sets.length === 0) return <p className="text-sm text-dim">No sample set fits. Upload one: go upload.</p>;
  return (
    <div className="overflow-x-auto" role="region" aria-label="Sample sets" tabIndex={0}>
      <table className="w-full text-sm">
        <thead><tr className="text-left text-xs text-dim">{["name", "waters", "version", "flags", "updated (UTC)", ""].map((head, index) => <th key={index} scope="col" className={`pb-1 pr-4 font-normal ${index > 0 && index < 4 ? "text-right" : ""}`}>{head}</th>)}</tr></thead>
        <tbody>
          {sets.map((set) => (
            <tr key={set.id} className="align-baseline">
              <td className="max-w-80 truncate pr-4"><Link href={`/samples/${set.id}`} className="inline-block min-h-7 text-accent underline-offset-4 hover:underline">{set.name}</Link></td>
              <td className="pr-4 text-right tabular-nums">{grouped(set.waterCount)}</td>
              <td className="pr-4 text-right tabular-nums">{set.version}</td>
              <td className={`pr-4 text-right tabular-nums ${set.flagCount > 0 ? "text-warn" : "text-dim"}`}>{set.flagCount}</td>
              <td className="whitespace-nowrap pr-4 tabular-nums text-dim">{dated(set.updatedAt)}</td>
              <td><button type="button" className="min-h-7 text-dim underline-offset-4 hover:text-accent hover:underline" onClick={() => onTry(`submit over "${set.name}"`)}>submit over it</button></td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

export function ConstantsAnswer({ entries, temperature }: { entries: readonly ConstantEntry[]; temperature: number }) {
  if (entries.length === 0) return <p className="text-sm text-dim">The constants set holds nothing under that name.</p>;
  return (
    <>
      {entries.map((entry) => (
        <dl key={entry.name} className="grid gap-x-4 gap-y-0.5 text-sm sm:grid-cols-[auto_1fr]">
          <dt className="text-dim">{entry.kind}</dt><dd><FormulaText>{entry.name === entry.formula ? entry.name : `${entry.name}, ${entry.formula}`}</FormulaText></dd>
          {entry.reaction && <><dt className="text-dim">reaction</dt><dd><FormulaText>{entry.reaction}</FormulaText></dd></>}
          {entry.logK !== null && <><dt className="text-dim">log K at {temperature} °C</dt><dd className="tabular-nums">{fixed(entry.logK, 3)}{temperature !== 25 && entry.logK25 !== null && <span className="ml-3 text-dim">{fixed(entry.logK25, 3)} at 25 °C</span>}</dd></>}
          {entry.logK === null && <><dt className="text-dim">log K</dt><dd>none: a component, from which the others are formed</dd></>}
          {entry.reference && <><dt className="text-dim">source</dt><dd>{entry.reference}{entry.fromMemory && <span className="ml-2 text-warn">figure written from memory of the source</span>}</dd></>}
          {entry.note && <><dt className="text-dim">note</dt><dd><FormulaText>{entry.note}</FormulaText></dd></>}
        </dl>
      ))}
    </>
  );
}
