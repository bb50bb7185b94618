"use client";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { FormulaText } from "@/components/ui/formula-text";
import published from "@/lib/chemistry/data/checks.json";
import { significant } from "@/lib/commands/numbers";

type Check = (typeof published.checks)[number];

const sentence = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1).replace(/\.?$/, ".");

const COLUMNS: readonly TableColumn<Check>[] = [
  { title: "checked", cell: (check) => <><FormulaText>{check.what}</FormulaText>{check.unit && <span className="text-dim">, {check.unit}</span>}</> },
  { title: "published", isRight: true, cell: (check) => significant(check.value, 4) },
  { title: "found", isRight: true, cell: (check) => significant(check.found, 4) },
  { title: "deviation", isRight: true, cell: (check) => significant(check.deviation, 2) },
  { title: "tolerance", isRight: true, cell: (check) => <span title={check.because}>±{significant(check.tolerance, 2)}</span> },
  { title: "source", className: "text-xs", cell: (check) => <>{sentence(check.source)}{check.fromMemory && <span className="text-warn"> From memory.</span>} <span className="text-dim">{sentence(check.because)}</span></> },
];

/** What the engine gives beside what was published; the tests write the figures found. */
export function CheckTable() {
  const topics = [...new Set(published.checks.map((check) => check.topic))];
  return (
    <>
      {topics.map((topic) => (
        <details key={topic}>
          <summary className="min-h-8 py-1 text-sm"><FormulaText>{topic}</FormulaText> <span className="text-dim">{published.checks.filter((check) => check.topic === topic).length}</span></summary>
          <DataTable label={`Checks: ${topic}`} columns={COLUMNS} items={published.checks.filter((check) => check.topic === topic)} keyOf={(check) => check.what} empty="None." />
        </details>
      ))}
    </>
  );
}
