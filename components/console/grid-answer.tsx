"use client";
import { memo, useMemo } from "react";
import type { EntryActions } from "./entry-view";
import { firstAnswered } from "@/lib/commands/solved-entries";
import { CurveChart } from "@/components/charts/curve-chart";
import { FormulaText } from "@/components/ui/formula-text";
import { axisColumn, curveColumns, curvesOf, fieldLabel, isLog, unitFactor, unitOf, type Grid } from "./grid-facts";
import { significant } from "@/lib/commands/numbers";
import { assumptionsOf } from "./state-facts";
import { Warnings } from "./state-answer";

const withUnit = (name: string, unit: string): string => (unit ? `${name}, ${unit}` : name);

/** Where the entry the range came from lies on the chart; null where it is off its scale or has no such number. */
function ownPoint(body: Grid, actions: EntryActions, curves: ReturnType<typeof curvesOf>): { x: number; y: number } | null {
  const from = body.from === null ? undefined : actions.view().entries.find((entry) => entry.number === body.from);
  if (from?.body.kind !== "state") return null;
  const row = firstAnswered(from);
  const reported = from.body.response.columns.find((column) => column.name === body.field)?.unit;
  const factor = reported === undefined ? null : unitFactor(reported, unitOf(body, axisColumn(body)));
  const value = row[body.field];
  const y = row[body.y];
  if (typeof value !== "number" || typeof y !== "number" || factor === null) return null;
  const x = value * factor;
  const all = curves.flatMap((curve) => curve.points.map((point) => point.x));
  return x >= Math.min(...all) && x <= Math.max(...all) ? { x, y } : null;
}

/** A range's curve and its numbers. */
export const GridAnswer = memo(function GridAnswer({ body, actions, number }: { body: Grid; actions: EntryActions; number: number }) {
  const curves = useMemo(() => curvesOf(body, body.y), [body]);
  const mark = useMemo(() => ownPoint(body, actions, curves), [body, actions, curves]);
  const columns = useMemo(() => curveColumns(body), [body]);
  const { summary } = body.response;
  const x = withUnit(fieldLabel(body.field), unitOf(body, axisColumn(body)));
  const y = withUnit(body.y, unitOf(body, body.y));
  return (
    <div className="space-y-2">
      <CurveChart curves={curves} xLabel={x} yLabel={y} isLogX={isLog(body)} mark={mark} title={`${y} over ${x}, ${summary.ok} points`} />
      <p className="flex flex-wrap items-baseline gap-x-3 text-xs text-dim">
        <span>chart also</span>
        {columns.filter((name) => name !== body.y && !name.startsWith("SI:")).concat(columns.includes("SI:calcite") && body.y !== "SI:calcite" ? ["SI:calcite"] : []).map((name) => (
          <button key={name} type="button" onClick={() => actions.onRun(`chart #${number} ${name}`)} className="min-h-7 underline-offset-4 hover:text-accent hover:underline"><FormulaText>{name}</FormulaText></button>
        ))}
      </p>
      {summary.ok < summary.rows && <p className="text-sm text-bad">{summary.rows - summary.ok} of {summary.rows} points have no answer: <FormulaText>{String(body.response.rows.find((row) => row.status !== "ok")?.message ?? "")}</FormulaText></p>}
      <GridTable body={body} columns={columns} />
      <p className="text-xs leading-5 text-dim"><span className="text-ink">Assumed:</span> <FormulaText>{assumptionsOf(body.spec).filter((said) => !said.startsWith(`${body.field} `)).join(" · ")}</FormulaText></p>
      <Warnings warnings={body.response.warnings} />
    </div>
  );
});

/** Columns of the table in this order; the rest is a download away. */
const SHOWN = ["pH", "ANC", "alkalinity", "pCO2", "DIC", "ionicStrength", "SI:calcite"];

function GridTable({ body, columns }: { body: Grid; columns: readonly string[] }) {
  const shown = SHOWN.filter((name) => columns.includes(name) && name !== body.field);
  const solids = columns.filter((name) => name.startsWith("solid:") && body.response.rows.some((row) => row[name] !== 0 && row[name] !== null));
  const names = [...shown, ...solids];
  const axis = axisColumn(body);
  return (
    <details className="text-sm">
      <summary className="min-h-7 cursor-pointer text-xs leading-6 text-dim">{body.response.rows.length} rows as a table</summary>
      <div className="max-h-80 overflow-auto" tabIndex={0} role="region" aria-label="Rows of the range">
        <table className="w-full text-xs">
          <thead className="sticky top-0 bg-page"><tr>
            {[axis, ...names].map((name) => (
              <th key={name} scope="col" className="whitespace-nowrap pb-1 pr-4 text-right font-normal text-dim"><FormulaText>{name === axis ? fieldLabel(body.field) : name}</FormulaText><span className="block text-faint">{unitOf(body, name)}</span></th>
            ))}
          </tr></thead>
          <tbody>
            {body.response.rows.map((row, index) => (
              <tr key={index}>
                <th scope="row" className="whitespace-nowrap pr-4 text-right font-normal tabular-nums">{significant(row[axis], 4)}</th>
                {row.status === "ok" ? names.map((name) => <td key={name} className="whitespace-nowrap pr-4 text-right tabular-nums">{significant(row[name], 5)}</td>)
                  : <td colSpan={names.length} className="text-bad">{String(row.message ?? row.status)}</td>}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}
