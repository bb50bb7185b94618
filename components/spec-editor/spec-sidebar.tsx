"use client";
import { useState } from "react";
import { KeycapRow } from "@/components/ui/keycaps";
import { comboOf } from "@/lib/commands/keys";
import { useKeycaps } from "@/lib/commands/use-keycaps";
import { FormulaText } from "@/components/ui/formula-text";
import { significant } from "@/lib/commands/numbers";
import type { Issue } from "@/lib/errors";
import type { SampleSet } from "@/lib/schemas/api";
import { estimateText } from "./dry-run";
import type { faultsOf } from "./language-support";
import { TEMPLATES, type Template } from "./templates";
import type { DryRun } from "./use-dry-run";

/** Full waters a second that two cores are known to pass at least; the estimate says "about". */
const ROWS_PER_SECOND = 20_000;

interface SidebarProps {
  faults: ReturnType<typeof faultsOf>;
  serverIssues: readonly Issue[];
  rows: number | null;
  dryRun: DryRun;
  sets: readonly SampleSet[];
  isSending: boolean;
  said: string;
  onShow(pointer: string): void;
  onShowOffset(offset: number): void;
  onFormat(): void;
  onSubmit(): void;
  onTemplate(template: Template, set: SampleSet | null): void;
}

/** Beside the editor: rows and time, faults, the first rows solved, templates. */
export function SpecSidebar(props: SidebarProps) {
  const { faults, rows, dryRun } = props;
  const submitKeys = useKeycaps(comboOf("submit-spec"));
  const formatKeys = useKeycaps(comboOf("format"));
  return (
    <aside aria-label="What the spec does" className="min-w-0 space-y-5 border-line p-4 lg:w-[30rem] lg:shrink-0 lg:overflow-y-auto lg:border-l">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <button type="button" onClick={props.onSubmit} disabled={props.isSending} className="rounded bg-accent px-3 py-1.5 text-sm font-medium text-on-accent disabled:opacity-60">Submit as a job</button>
        <button type="button" onClick={props.onFormat} className="rounded border border-line px-3 py-1.5 text-sm text-ink">Lay out</button>
        <p className="text-xs text-dim"><KeycapRow caps={submitKeys} /> submits<span className="ml-2"><KeycapRow caps={formatKeys} /> lays out</span></p>
      </div>
      <p role="status" className="min-h-5 text-sm text-ink">{props.said}</p>
      <dl className="flex gap-8">
        <div><dt className="text-xs text-dim">result rows</dt><dd className="text-2xl tabular-nums text-ink">{rows === null ? "–" : rows.toLocaleString("en").replaceAll(",", " ")}</dd></div>
        <div><dt className="text-xs text-dim">time</dt><dd className="text-2xl text-ink">{rows === null ? "–" : estimateText(rows, ROWS_PER_SECOND)}</dd></div>
      </dl>
      <Faults {...props} />
      {faults.spec && <FirstRows dryRun={dryRun} />}
      <Templates sets={props.sets} onTemplate={props.onTemplate} />
    </aside>
  );
}

function Faults({ faults, serverIssues, onShow, onShowOffset }: SidebarProps) {
  const seen = new Set(faults.issues.map((issue) => issue.pointer + issue.message));
  const all = [...faults.issues, ...serverIssues.filter((issue) => !seen.has(issue.pointer + issue.message))];
  if (faults.syntax) {
    const { at, message } = faults.syntax;
    return <section><h2 className="text-xs text-dim">faults</h2><button type="button" onClick={() => onShowOffset(at)} className="min-h-7 text-left text-sm text-bad underline-offset-4 hover:underline">{message}</button></section>;
  }
  if (all.length === 0) return <p className="text-sm text-good">No faults.</p>;
  return (
    <section>
      <h2 className="mb-1 text-xs text-dim">{all.length} {all.length === 1 ? "fault" : "faults"}</h2>
      <ul className="space-y-1.5 text-sm">
        {all.map((issue, index) => (
          <li key={index}>
            <button type="button" onClick={() => onShow(issue.pointer)} className="min-h-7 text-left underline-offset-4 hover:underline">
              <code className="mr-2 text-xs text-bad">{issue.pointer || "/"}</code><FormulaText>{issue.message}</FormulaText>
            </button>
            {issue.remedy && <span className="block text-xs text-dim"><FormulaText>{issue.remedy}</FormulaText></span>}
          </li>
        ))}
      </ul>
    </section>
  );
}

/** Columns worth showing in a narrow table, in this order where they are there. */
const FIRST_COLUMNS = ["pH", "ANC", "alkalinity", "pCO2", "SI:calcite", "solid:calcite", "balanceError"];

function FirstRows({ dryRun }: { dryRun: DryRun }) {
  if (dryRun.state === "failed") {
    return <section><h2 className="text-xs text-dim">first rows</h2><p className="text-sm text-bad">{dryRun.message}</p></section>;
  }
  if (dryRun.rows.length === 0) return <section><h2 className="text-xs text-dim">first rows</h2><p className="text-sm text-dim">{dryRun.state === "running" ? "Solving …" : "Nothing yet."}</p></section>;
  const axes = dryRun.columns.filter((column) => column.group === "axis");
  const values = FIRST_COLUMNS.flatMap((name) => dryRun.columns.find((column) => column.name === name) ?? []).slice(0, 5);
  return (
    <section aria-busy={dryRun.state === "running"}>
      <h2 className="mb-1 text-xs text-dim">first rows, solved{dryRun.state === "running" ? " (again …)" : ""}</h2>
      <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="First rows, scrolls sideways">
        <table className={`w-full text-xs ${dryRun.state === "done" ? "" : "opacity-60"}`}>
          <thead><tr className="text-left text-dim">
            <th scope="col" className="pr-3 font-normal">water</th><th scope="col" className="pr-3 font-normal">case</th>
            {[...axes, ...values].map((column) => <th key={column.name} scope="col" className="whitespace-nowrap pr-3 text-right font-normal"><FormulaText>{column.name}</FormulaText>{column.unit && <span className="block text-faint">{column.unit}</span>}</th>)}
          </tr></thead>
          <tbody>
            {dryRun.rows.map((row, index) => (
              <tr key={index}>
                <td className="pr-3">{String(row.water ?? "")}</td><td className="max-w-32 truncate pr-3 text-dim" title={String(row.case ?? "")}>{String(row.case ?? "")}</td>
                {row.status === "ok"
                  ? [...axes, ...values].map((column) => <td key={column.name} className="whitespace-nowrap pr-3 text-right tabular-nums">{significant(row[column.name], 4)}</td>)
                  : <td colSpan={axes.length + values.length} className="text-bad"><FormulaText>{`${String(row.status)}: ${String(row.message ?? "")}`}</FormulaText></td>}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </section>
  );
}

function Templates({ sets, onTemplate }: Pick<SidebarProps, "sets" | "onTemplate">) {
  const [setId, setSetId] = useState("");
  const chosen = sets.find((set) => set.id === setId) ?? sets[0] ?? null;
  return (
    <section>
      <h2 className="mb-1 text-xs text-dim">begin with (Ctrl Z brings your text back)</h2>
      <ul className="space-y-1 text-sm">
        {TEMPLATES.map((template) => (
          <li key={template.id} className="flex flex-wrap items-baseline gap-x-3">
            <button type="button" onClick={() => onTemplate(template, chosen)} className="min-h-7 text-accent underline-offset-4 hover:underline">{template.title}</button>
            {template.id === "set" && sets.length > 0 ? (
              <select aria-label="Sample set" value={chosen?.id ?? ""} onChange={(event) => setSetId(event.target.value)} className="min-h-7 max-w-56 rounded border border-line bg-raised px-1 text-xs text-ink">
                {sets.map((set) => <option key={set.id} value={set.id}>{set.name}</option>)}
              </select>
            ) : <span className="text-xs text-dim">{template.says}</span>}
          </li>
        ))}
      </ul>
    </section>
  );
}
