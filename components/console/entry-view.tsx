"use client";
import { memo, type KeyboardEvent } from "react";
import type { ConsoleView } from "@/lib/commands/command";
import { tableOf } from "@/lib/commands/export-entry";
import type { Entry } from "@/lib/commands/entry";
import { isKey } from "@/lib/commands/keys";
import { apiCallOf } from "@/lib/commands/solved-entries";
import { CodeAnswer } from "./code-answer";
import { ComparisonAnswer } from "./comparison-answer";
import { FormulaText } from "@/components/ui/formula-text";
import { GridAnswer } from "./grid-answer";
import { HelpAnswer } from "./help-answer";
import { JobAnswer } from "./job-answer";
import { ConstantsAnswer, JobsAnswer, SetsAnswer } from "./list-answers";
import { ProblemAnswer } from "./problem-answer";
import { StateAnswer } from "./state-answer";

export interface EntryActions {
  /** Puts text into the prompt and the focus there. */
  onTry(line: string): void;
  onRun(line: string): void;
  onCopy(text: string): void;
  /** Read when needed, so that entries do not render again with every keystroke. */
  view(): ConsoleView;
}

interface Offered { label: string; line: string; isWhole: boolean }

/** What may be done next with an entry, as lines of the prompt: the buttons teach the words. */
function offersFor(entry: Entry): Offered[] {
  const n = `#${entry.number}`;
  const offers: Offered[] = [];
  if (entry.body.kind === "state") {
    offers.push({ label: "try", line: `try ${n} `, isWhole: false }, { label: "with calcite", line: `try ${n} calcite`, isWhole: true },
      { label: "range", line: `range ${n} `, isWhole: false }, { label: "chart", line: `chart ${n}`, isWhole: true });
  }
  if (entry.body.kind === "state" || entry.body.kind === "grid") offers.push({ label: "edit spec", line: `edit ${n}`, isWhole: true }, { label: "submit", line: `submit ${n} `, isWhole: false });
  if (tableOf(entry)) offers.push({ label: "copy table", line: `copy ${n} table`, isWhole: true }, { label: "save CSV", line: `save ${n} csv`, isWhole: true });
  if (apiCallOf(entry)) offers.push({ label: "API", line: `api ${n}`, isWhole: true });
  if (entry.body.kind === "not-kept" || entry.body.kind === "problem") offers.push({ label: "to the prompt", line: entry.line, isWhole: false });
  return offers;
}

/** One entry of the stream. Off screen it costs no layout; the newest is laid out always, so that it can be scrolled to. */
export const EntryView = memo(function EntryView({ entry, isNewest, actions }: { entry: Entry; isNewest: boolean; actions: EntryActions }) {
  const onKeyDown = (event: KeyboardEvent<HTMLElement>): void => {
    if (event.target === event.currentTarget && isKey(event, "entry-refer")) {
      event.preventDefault();
      actions.onTry(`#${entry.number} `);
    }
  };
  const from = entry.body.kind === "state" || entry.body.kind === "grid" ? entry.body.from : null;
  return (
    <article id={`entry-${entry.number}`} data-entry={entry.number} tabIndex={-1} onKeyDown={onKeyDown} aria-label={`Entry ${entry.number}: ${entry.line}`}
      className={`border-b border-line px-4 py-3 outline-none [contain-intrinsic-size:auto_16rem] focus-visible:bg-focus ${isNewest ? "" : "[content-visibility:auto]"}`}>
      <header className="mb-2 flex flex-wrap items-baseline gap-x-3">
        <span className="text-accent">#{entry.number}</span>
        <span className="min-w-0 break-words text-sm text-ink"><FormulaText>{entry.line}</FormulaText></span>
        {from !== null && <a href={`#entry-${from}`} className="min-h-7 text-xs text-dim underline-offset-4 hover:underline">from #{from}</a>}
      </header>
      <EntryAnswer entry={entry} actions={actions} />
      <footer className="mt-2 flex flex-wrap gap-x-4 text-xs">
        {offersFor(entry).map((offer) => (
          <button key={offer.label} type="button" onClick={() => (offer.isWhole ? actions.onRun(offer.line) : actions.onTry(offer.line))}
            className="min-h-7 text-dim underline-offset-4 hover:text-accent hover:underline focus-visible:text-accent">{offer.label}</button>
        ))}
      </footer>
    </article>
  );
});

function EntryAnswer({ entry, actions }: { entry: Entry; actions: EntryActions }) {
  const { body } = entry;
  switch (body.kind) {
    case "waiting": return <p className="text-sm text-dim">{body.what} …</p>;
    case "state": return <StateAnswer body={body} />;
    case "grid": return <GridAnswer body={body} actions={actions} number={entry.number} />;
    case "comparison": return <ComparisonAnswer states={body.states} />;
    case "job": return <JobAnswer jobId={body.jobId} title={body.title} showChart={body.showChart} />;
    case "jobs": return <JobsAnswer jobs={body.jobs} onTry={actions.onRun} />;
    case "sets": return <SetsAnswer sets={body.sets} onTry={actions.onTry} />;
    case "constants": return <ConstantsAnswer entries={body.entries} temperature={body.temperature} />;
    case "code": return <CodeAnswer body={body} onCopy={actions.onCopy} />;
    case "help": return <HelpAnswer topic={body.topic} view={actions.view()} onTry={actions.onTry} />;
    case "note": return <p className="text-sm text-dim">{body.text}</p>;
    case "problem": return <ProblemAnswer line={entry.line} body={body} />;
    case "not-kept": return <p className="text-sm text-dim">The answer was not kept; the line can be run again.</p>;
  }
}
