"use client";
import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { layOut, TEMPLATES } from "@/components/spec-editor/templates";
import { Button } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/confirm-dialog";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { FormulaText } from "@/components/ui/formula-text";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Page, Section } from "@/components/ui/page";
import { SelectField } from "@/components/ui/select-field";
import { TimeText } from "@/components/ui/time-text";
import { deleteSampleSet, getSampleRows } from "@/lib/client/samples";
import { grouped } from "@/lib/commands/numbers";
import { keepDraft } from "@/lib/commands/stream-memory";
import type { SampleRows, SampleSet } from "@/lib/schemas/api";

type Water = Record<string, unknown>;
type Flag = SampleRows["flags"][number];

/** A stored value as written: 62.1, "<0.05 mg/L", or an object's value with its unit. */
function valueText(value: unknown): string {
  if (value === null || value === undefined) return "";
  if (typeof value !== "object") return String(value);
  const { value: number, unit, as, below } = value as { value?: unknown; unit?: unknown; as?: unknown; below?: unknown };
  return [`${below === true ? "<" : ""}${String(number ?? "")}`, unit, as ? `as ${String(as)}` : ""].filter(Boolean).join(" ");
}

export function SampleSetView({ set, me }: { set: SampleSet; me: { id: string; mayChange: boolean } }) {
  const router = useRouter();
  const [version, setVersion] = useState(set.version);
  const [isAsking, setAsking] = useState(false);
  const [failure, setFailure] = useState("");
  const rows = useInfiniteQuery({
    queryKey: ["sample-rows", set.id, version], initialPageParam: 0,
    queryFn: ({ pageParam }) => getSampleRows(set.id, { version, limit: 100, firstRow: pageParam }),
    getNextPageParam: (page) => (page.firstRow + page.rows.length < page.rowCount ? page.firstRow + page.rows.length : undefined),
  });
  const openInEditor = (): void => {
    const template = TEMPLATES.find((each) => each.id === "set");
    if (!template) return;
    keepDraft(localStorage, me.id, layOut(template.make({ id: version === set.version ? set.id : `${set.id}@${version}`, name: set.name })) + "\n");
    router.push("/spec");
  };
  const remove = (): void => { deleteSampleSet(set.id).then(() => router.push("/samples"), (error: unknown) => setFailure(error instanceof Error ? error.message : "Deleting failed.")); };
  const pages = rows.data?.pages ?? [];
  const waters: Water[] = pages.flatMap((page) => page.rows);
  const flags = pages.flatMap((page) => page.flags);
  return (
    <Page title={set.name} isWide lead={set.description || undefined} actions={(
      <>
        <Button kind="primary" onClick={openInEditor}>Write a spec over it</Button>
        {me.mayChange && <Link href={`/samples/${set.id}/new-version`} className="inline-flex min-h-9 items-center rounded border border-line bg-raised px-3 text-sm hover:bg-sunken">New version</Link>}
        {me.mayChange && <Button kind="danger" onClick={() => setAsking(true)}>Delete</Button>}
      </>
    )}>
      {failure && <p role="alert" className="text-sm text-bad">{failure}</p>}
      <dl className="flex flex-wrap items-end gap-x-6 gap-y-2 text-sm">
        <Fact name="waters">{grouped(pages[0]?.rowCount ?? set.waterCount)}</Fact><Fact name="by">{set.owner.name}</Fact><Fact name="seen by">{set.visibility === "team" ? "the team" : "its owner"}</Fact>
        <Fact name="updated"><TimeText at={set.updatedAt} /></Fact><Fact name="id"><code>{set.id}</code></Fact>
        {set.version > 1 && <SelectField label="Version" value={version} onChange={(event) => setVersion(Number(event.target.value))}>{Array.from({ length: set.version }, (_, k) => <option key={k} value={set.version - k}>{set.version - k}</option>)}</SelectField>}
      </dl>
      {!rows.data ? <LoadState error={rows.error} onRetry={() => void rows.refetch()} /> : (
        <>
          {flags.length > 0 && <Section title={`Findings of the checks (${grouped(flags.length)}${waters.length < pages[0].rowCount ? " so far" : ""})`}><Flags flags={flags} /></Section>}
          <Section title="Waters"><WaterTable columns={pages[0].columns} units={pages[0].units} waters={waters} flags={flags} /></Section>
          <LoadMore hasMore={rows.hasNextPage} isLoading={rows.isFetchingNextPage} onMore={() => void rows.fetchNextPage()} />
        </>
      )}
      <ConfirmDialog isOpen={isAsking} title={`Delete ${set.name}?`} action="Delete it" onConfirm={remove} onClose={() => setAsking(false)}>All its versions go. Jobs over it keep their results.</ConfirmDialog>
    </Page>
  );
}

function Fact({ name, children }: { name: string; children: React.ReactNode }) {
  return <div><dt className="text-xs text-dim">{name}</dt><dd>{children}</dd></div>;
}

const FLAG_COLUMNS: readonly TableColumn<Flag>[] = [
  { title: "water", className: "whitespace-nowrap", cell: (flag) => flag.water }, { title: "column", cell: (flag) => (flag.column ? <FormulaText>{flag.column}</FormulaText> : "") },
  { title: "finding", cell: (flag) => <FormulaText>{flag.message}</FormulaText> },
];
const FEW_FLAGS = 8;

/** Findings never change data; they are for a person to look at. */
function Flags({ flags }: { flags: readonly Flag[] }) {
  const [isAll, setAll] = useState(false);
  return (
    <>
      <DataTable label="Findings" columns={FLAG_COLUMNS} items={(isAll ? flags : flags.slice(0, FEW_FLAGS)).map((flag, index) => ({ ...flag, index }))} keyOf={(flag) => (flag as Flag & { index: number }).index} empty="None." />
      {!isAll && flags.length > FEW_FLAGS && <div><Button onClick={() => setAll(true)}>All {flags.length}</Button></div>}
    </>
  );
}

function WaterTable({ columns, units, waters, flags }: { columns: readonly string[]; units: Record<string, string>; waters: readonly Water[]; flags: readonly Flag[] }) {
  const flagged = new Map<string, Flag[]>();
  for (const flag of flags) flagged.set(flag.water, [...(flagged.get(flag.water) ?? []), flag]);
  return (
    <div role="region" aria-label="Waters" tabIndex={0} className="max-h-[70vh] overflow-auto border border-line">
      <table className="text-[13px] tabular-nums">
        <thead className="sticky top-0 z-10 bg-sunken"><tr className="text-left">{columns.map((column) => <th key={column} scope="col" className="whitespace-nowrap px-3 py-1.5 align-top font-normal"><FormulaText>{column}</FormulaText><span className="block text-[11px] text-dim">{units[column] ?? "\u00a0"}</span></th>)}</tr></thead>
        <tbody>
          {waters.map((water, index) => {
            const own = flagged.get(String(water.id)) ?? [];
            return (
              <tr key={index} className="border-t border-line/50">
                {columns.map((column) => {
                  const flag = own.find((each) => each.column === column || (each.column === null && column === "id"));
                  return <td key={column} title={flag?.message} className={`max-w-64 truncate whitespace-nowrap px-3 py-1 ${flag ? "bg-mark" : ""}`}>{valueText(water[column])}{flag && column === "id" ? <span className="text-warn" aria-label="has a finding"> •</span> : null}</td>;
                })}
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}
