/** Faults of a document: place, what is wrong, what to write instead. */
export interface ShownIssue { pointer: string; message: string; value?: string; remedy?: string }

export function IssueList({ issues }: { issues: readonly ShownIssue[] }) {
  return (
    <div role="region" aria-label="Faults" tabIndex={0} className="max-h-96 overflow-auto rounded border border-bad">
      <table className="w-full text-sm">
        <thead><tr className="text-left text-xs text-dim">{["place", "what is wrong", "found", "what to do"].map((title) => <th key={title} scope="col" className="px-3 py-1.5 font-normal">{title}</th>)}</tr></thead>
        <tbody>
          {issues.map((issue, index) => (
            <tr key={index} className="border-t border-line align-baseline">
              <td className="px-3 py-1.5 text-dim">{issue.pointer || "the whole"}</td><td className="px-3 py-1.5">{issue.message}</td>
              <td className="px-3 py-1.5 text-bad">{issue.value}</td><td className="px-3 py-1.5">{issue.remedy}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
