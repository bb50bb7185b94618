"use client";
import { memo } from "react";
import type { ComparedState } from "@/lib/commands/entry";
import { FormulaText } from "@/components/ui/formula-text";
import { signed, significant } from "@/lib/commands/numbers";
import { assumptionsOf, figuresOf, saturationsOf } from "./state-facts";

interface Line { label: string; unit: string; cells: { value: string; differs: boolean; difference: string | null }[] }

/** Figures and indices of all states; each cell marked where it differs from the first state's. */
function linesOf(states: readonly ComparedState[]): Line[] {
  const rows = states.map((state) => state.response.rows[0] ?? {});
  const figures = rows.map(figuresOf);
  const lines: Line[] = figures[0].map((first, at) => ({
    label: first.label, unit: first.unit,
    cells: figures.map((each, index) => {
      const own = each.find((figure) => figure.key === first.key) ?? each[at];
      const differs = index > 0 && (own.raw === null) !== (first.raw === null) || (own.raw !== null && first.raw !== null && Math.abs(own.raw - first.raw) > Math.max(first.tolerance, 1e-12));
      const scale = first.key === "pCO2" ? 1e6 : 1;
      const difference = index > 0 && differs && own.raw !== null && first.raw !== null ? `${own.raw > first.raw ? "+" : "−"}${significant(Math.abs(own.raw - first.raw) * scale, 3)}` : null;
      return { value: own.value + (own.unit !== first.unit ? ` ${own.unit}` : ""), differs: index > 0 && differs, difference };
    }),
  }));
  const solids = [...new Set(rows.flatMap((row) => saturationsOf(row).slice(0, 6).map((each) => each.solid)))];
  for (const solid of solids) {
    const values = rows.map((row) => row[`SI:${solid}`]);
    const [first] = values;
    lines.push({
      label: `SI ${solid}`, unit: "",
      cells: values.map((value, index) => {
        const both = typeof value === "number" && typeof first === "number";
        const differs = index > 0 && (both ? Math.abs(value - first) >= 0.005 : value !== first);
        return { value: signed(value, 2), differs, difference: differs && both ? signed(value - first, 2) : null };
      }),
    });
  }
  return lines;
}

/** Entries side by side. A difference has a mark as well as a colour. */
export const ComparisonAnswer = memo(function ComparisonAnswer({ states }: { states: readonly ComparedState[] }) {
  const assumptions = states.map((state) => assumptionsOf(state.spec));
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Comparison, scrolls sideways">
      <table className="text-sm">
        <thead>
          <tr className="align-bottom">
            <th scope="col" className="pr-4 text-left text-xs font-normal text-dim">Δ: from #{states[0].number}</th>
            {states.map((state) => (
              <th key={state.number} scope="col" className="max-w-56 min-w-36 border-b border-line px-3 pb-1 text-right font-normal">
                <span className="text-accent">#{state.number}</span>
                <span className="block truncate text-xs text-dim" title={state.label}>{state.label}</span>
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {linesOf(states).map((line) => (
            <tr key={line.label}>
              <th scope="row" className="whitespace-nowrap py-px pr-4 text-left font-normal"><FormulaText>{line.label}</FormulaText>{line.unit && <span className="ml-1 text-xs text-dim">{line.unit}</span>}</th>
              {line.cells.map((cell, index) => (
                <td key={index} className={`whitespace-nowrap px-3 py-px text-right tabular-nums ${cell.differs ? "bg-mark font-medium" : ""}`}>
                  {cell.difference && <span className="mr-2 text-xs font-normal text-dim">{cell.difference}</span>}{cell.value}
                </td>
              ))}
            </tr>
          ))}
          <tr className="align-top">
            <th scope="row" className="pr-4 pt-2 text-left text-xs font-normal text-dim">assumed</th>
            {assumptions.map((said, index) => (
              <td key={index} className="max-w-56 px-3 pt-2 text-right text-xs leading-5">
                {said.map((each) => <span key={each} className={`block ${index > 0 && !assumptions[0].includes(each) ? "bg-mark" : "text-dim"}`}><FormulaText>{each}</FormulaText></span>)}
              </td>
            ))}
          </tr>
        </tbody>
      </table>
    </div>
  );
});
