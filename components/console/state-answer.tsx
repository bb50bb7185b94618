"use client";
import { memo, type ReactNode } from "react";
import type { EntryBody } from "@/lib/commands/entry";
import { judgeIonBalance } from "@/lib/commands/ion-balance";
import { Caution } from "@/components/ui/caution";
import { FormulaText } from "@/components/ui/formula-text";
import { fixed, signed, significant } from "@/lib/commands/numbers";
import { assumptionsOf, balanceText, figuresOf, saturationsOf, saturationWord, speciesOf, transfersOf } from "./state-facts";

type State = Extract<EntryBody, { kind: "state" }>;

/** The answer to a typed water. */
export const StateAnswer = memo(function StateAnswer({ body }: { body: State }) {
  const row = body.response.rows[0];
  if (!row) return <p>No row came back.</p>;
  const warnings = [...String(row.warnings ?? "").split("; "), ...body.response.warnings].filter((each, index, all) => each !== "" && all.indexOf(each) === index);
  if (row.status !== "ok") return <Failed status={String(row.status)} message={String(row.message ?? "")} warnings={warnings} />;
  return (
    <div className="space-y-3">
      <Figures row={row} body={body} />
      <div className="grid gap-x-8 gap-y-3 md:grid-cols-2">
        <Saturations row={row} />
        <Species row={row} />
      </div>
      <Transfers row={row} />
      <p className="text-xs leading-5 text-dim"><span className="text-ink">Assumed:</span> <FormulaText>{assumptionsOf(body.spec).join(" · ")}</FormulaText></p>
      <Warnings warnings={warnings} />
      {body.spec.cases[0].react && <Caution />}
    </div>
  );
});

function Figures({ row, body }: { row: Record<string, unknown>; body: State }) {
  const close = (body.spec.cases[0].close as readonly unknown[] | undefined) ?? [];
  const waters = "rows" in body.spec.waters ? body.spec.waters.rows : undefined;
  const balance = judgeIonBalance(row, (waters?.[0] ?? {}) as Record<string, unknown>, close.includes("charge"));
  return (
    <dl className="flex flex-wrap gap-x-7 gap-y-2">
      {figuresOf(row).map((figure) => (
        <div key={figure.key} title={figure.explained}>
          <dt className="text-xs text-dim"><FormulaText>{figure.label}</FormulaText></dt>
          <dd className={`tabular-nums ${figure.key === "pH" ? "text-2xl font-semibold leading-8 text-accent" : "text-lg leading-8 text-ink"}`}>
            {figure.value}{figure.unit && <span className="ml-1 text-xs text-dim">{figure.unit}</span>}
          </dd>
        </div>
      ))}
      {balance && (
        <div className="max-w-sm">
          <dt className="text-xs text-dim">ion balance</dt>
          <dd className="text-lg leading-8 tabular-nums text-ink">
            {balanceText(balance.percent)}
          </dd>
          <dd className={`text-xs leading-5 ${balance.verdict === "within" ? "text-good" : balance.verdict === "outside" ? "text-bad" : "text-dim"}`}><FormulaText>{balance.words}</FormulaText></dd>
          {balance.verdict !== "closed" && balance.cations + balance.anions > 0 && (
            <dd className="text-xs leading-5 tabular-nums text-dim">cations {fixed(balance.cations, 3)}, anions {fixed(balance.anions, 3)} meq/L; % of their sum</dd>
          )}
        </div>
      )}
    </dl>
  );
}

/** Heading and table of one block of an answer. */
function Block({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="min-w-0">
      <h3 className="mb-1 border-b border-line pb-0.5 text-xs text-dim">{title}</h3>
      {children}
    </section>
  );
}

/** Saturation indices as numbers and as bars about zero. */
function Saturations({ row }: { row: Record<string, unknown> }) {
  const all = saturationsOf(row);
  if (all.length === 0) return null;
  const shown = all.slice(0, 8);
  const rest = all.slice(8);
  return (
    <Block title="saturation index">
      <table className="w-full text-sm">
        <thead className="sr-only"><tr><th>solid</th><th>SI</th><th>reading</th></tr></thead>
        <tbody>
          {shown.map(({ solid, index }) => (
            <tr key={solid}>
              <th scope="row" className="w-px whitespace-nowrap py-px pr-3 text-left font-normal"><FormulaText>{solid}</FormulaText></th>
              <td className="w-px whitespace-nowrap pr-3 text-right tabular-nums">{signed(index, 2)}</td>
              <td><IndexBar index={index} /><span className="sr-only">{saturationWord(index)}</span></td>
            </tr>
          ))}
        </tbody>
      </table>
      {rest.length > 0 && (
        <details className="text-xs text-dim">
          <summary className="min-h-7 cursor-pointer leading-6">{rest.length} further below</summary>
          <FormulaText>{rest.map(({ solid, index }) => `${solid} ${signed(index, 2)}`).join(" · ")}</FormulaText>
        </details>
      )}
      {shown.some(({ solid, index }) => solid === "calcite" && index > 0.05 && index <= 0.8) && (
        <p className="mt-1 text-xs leading-5 text-dim">Calcite often stays dissolved in streams up to an index of about 0.8 (common practice).</p>
      )}
    </Block>
  );
}

/** A bar from the middle, three units of SI to either side at most. */
function IndexBar({ index }: { index: number }) {
  const share = (Math.min(Math.abs(index), 3) / 3) * 50;
  return (
    <span aria-hidden="true" className="relative block h-2.5 w-full min-w-16 max-w-40">
      <span className="absolute inset-y-0 left-1/2 w-px bg-line" />
      <span className={`absolute inset-y-0.5 rounded-sm ${index > 0.05 ? "bg-warn" : index < -0.05 ? "bg-water" : "bg-good"}`}
        style={index >= 0 ? { left: "50%", width: `${share}%` } : { right: "50%", width: `${share}%` }} />
    </span>
  );
}

function Species({ row }: { row: Record<string, unknown> }) {
  const all = speciesOf(row);
  if (all.length === 0) return null;
  const main = all.slice(0, 10);
  const rest = all.slice(10);
  return (
    <Block title="main species, mmol/kg">
      <ul className="grid grid-cols-2 gap-x-6 text-sm">
        {main.map(({ name, mmol }) => (
          <li key={name} className="flex justify-between gap-3 py-px"><span><FormulaText>{name}</FormulaText></span><span className="tabular-nums">{significant(mmol, 4)}</span></li>
        ))}
      </ul>
      {rest.length > 0 && (
        <details className="text-xs text-dim">
          <summary className="min-h-7 cursor-pointer leading-6">{rest.length} smaller</summary>
          <ul className="grid grid-cols-2 gap-x-6">
            {rest.map(({ name, mmol }) => <li key={name} className="flex justify-between gap-3"><span><FormulaText>{name}</FormulaText></span><span className="tabular-nums">{significant(mmol, 3)}</span></li>)}
          </ul>
        </details>
      )}
    </Block>
  );
}

function Transfers({ row }: { row: Record<string, unknown> }) {
  const all = transfersOf(row);
  if (all.length === 0) return null;
  return (
    <p className="text-sm">
      {all.map(({ what, mmol }, index) => (
        <span key={what}>{index > 0 && " · "}<FormulaText>{what}</FormulaText> {what === "CO2 gas" ? (mmol > 0 ? "taken up" : "given off") : mmol > 0 ? "dissolved" : "formed"} <span className="tabular-nums">{significant(Math.abs(mmol), 4)}</span> mmol/kg</span>
      ))}
    </p>
  );
}

export function Warnings({ warnings }: { warnings: readonly string[] }) {
  if (warnings.length === 0) return null;
  return (
    <ul className="space-y-0.5 border-l-2 border-warn pl-3 text-xs leading-5">
      {warnings.map((warning) => <li key={warning}><span className="text-warn">Note</span> <FormulaText>{warning}</FormulaText></li>)}
    </ul>
  );
}

function Failed({ status, message, warnings }: { status: string; message: string; warnings: readonly string[] }) {
  return (
    <div className="space-y-2">
      <p><span className="text-bad">{status === "invalid" ? "This water cannot be settled." : "No answer within the allowed iterations."}</span> <FormulaText>{message}</FormulaText></p>
      <Warnings warnings={warnings} />
    </div>
  );
}
