"use client";
import type { EntryBody } from "@/lib/commands/entry";
import { FormulaText } from "@/components/ui/formula-text";

/** A refused line: the line again with the offending words marked, and what to write instead. */
export function ProblemAnswer({ line, body }: { line: string; body: Extract<EntryBody, { kind: "problem" }> }) {
  const [first] = body.problems;
  return (
    <div className="space-y-1 text-sm">
      {first && first.end > first.start && (
        <pre className="overflow-x-auto text-xs leading-4 text-dim">{line + "\n" + " ".repeat(first.start)}<span className="text-bad">{"^".repeat(Math.min(first.end - first.start, line.length - first.start) || 1)}</span></pre>
      )}
      <p><span className="text-bad">Not done.</span> {body.detail}</p>
      <ul className="space-y-0.5">
        {body.problems.map((problem, index) => <li key={index}><FormulaText>{problem.message}</FormulaText>{problem.suggestion && <> Write <FormulaText>{problem.suggestion}</FormulaText>.</>}</li>)}
        {body.issues.map((issue, index) => (
          <li key={`issue-${index}`}>{issue.pointer && <code className="mr-2 text-xs text-dim">{issue.pointer}</code>}<FormulaText>{issue.message}</FormulaText> {issue.remedy && <span className="text-dim"><FormulaText>{issue.remedy}</FormulaText></span>}</li>
        ))}
      </ul>
    </div>
  );
}
