"use client";
import { keepPreviousData, useQuery } from "@tanstack/react-query";
import { useDeferredValue, useMemo, useState } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Field } from "@/components/ui/field";
import { FormulaText, ReactionText } from "@/components/ui/formula-text";
import { LoadState } from "@/components/ui/load-state";
import { Page, Section } from "@/components/ui/page";
import { CheckTable } from "./check-table";
import { MethodTable } from "./method-table";
import { getConstants } from "@/lib/client/api";
import { fixed } from "@/lib/commands/numbers";
import type { ConstantEntry } from "@/lib/schemas/api";

const columnsAt = (temperature: number): readonly TableColumn<ConstantEntry>[] => [
  { title: "name", className: "whitespace-nowrap", cell: (entry) => (entry.kind === "species" ? <ReactionText>{entry.name}</ReactionText> : <FormulaText>{entry.name}</FormulaText>) },
  { title: "reaction", className: "whitespace-nowrap", cell: (entry) => (entry.reaction ? <ReactionText>{entry.reaction}</ReactionText> : <span className="text-dim">reference species of its balance</span>) },
  { title: `log K at ${temperature} °C`, isRight: true, cell: (entry) => fixed(entry.logK, 3) },
  { title: "at 25 °C", isRight: true, cell: (entry) => fixed(entry.logK25, 3) },
  { title: "source", cell: (entry) => <span className="text-xs">{entry.reference ? `${entry.reference}.` : ""}{entry.fromMemory && <span className="text-warn"> From memory.</span>}{entry.note && <span className="text-dim"> {entry.note}</span>}</span> },
];

const fits = (entry: ConstantEntry, words: string): boolean =>
  words.toLowerCase().split(/\s+/).every((word) => `${entry.name} ${entry.formula} ${entry.reaction} ${entry.source ?? ""}`.toLowerCase().includes(word));

export function ConstantsView() {
  const [text, setText] = useState("");
  const [celsius, setCelsius] = useState("25");
  const wanted = Number(celsius.replace(",", "."));
  const isSound = celsius.trim() !== "" && wanted >= 0 && wanted <= 90;
  const temperature = useDeferredValue(isSound ? wanted : 25);
  const table = useQuery({ queryKey: ["constants", temperature], queryFn: () => getConstants(temperature), placeholderData: keepPreviousData });
  const columns = useMemo(() => columnsAt(table.data?.temperature ?? temperature), [table.data, temperature]);
  const entries = (table.data?.entries ?? []).filter((entry) => fits(entry, text.trim()));
  return (
    <Page title="Constants and their sources" isWide lead={<>Constants set {table.data?.constantsVersion ?? "…"}. Reactions as printed; reference state of infinite dilution, 1 atm. Figures marked “from memory” were written down from memory of their source.</>}>
      <div className="flex flex-wrap items-start gap-4">
        <Field label="Find" type="search" value={text} onChange={(event) => setText(event.target.value)} placeholder="calcite, CO3, Nordstrom" className="w-64 max-w-full" />
        <Field label="Temperature, °C" inputMode="decimal" value={celsius} onChange={(event) => setCelsius(event.target.value)} error={isSound ? "" : "0 to 90"} className="w-40" />
      </div>
      {!table.data ? <LoadState error={table.error} onRetry={() => void table.refetch()} /> : (
        <>
          <Section title="Solids"><DataTable label="Solids" columns={columns} items={entries.filter((entry) => entry.kind === "solid")} keyOf={(entry) => entry.name} empty="No solid fits." /></Section>
          <Section title="Aqueous species and gas"><DataTable label="Species" columns={columns} items={entries.filter((entry) => entry.kind === "species")} keyOf={(entry) => entry.name} empty="No species fits." /></Section>
          <Section title="Methods"><MethodTable methods={table.data.methods} /></Section>
          <Section title="Checks against published values"><CheckTable /></Section>
        </>
      )}
    </Page>
  );
}
