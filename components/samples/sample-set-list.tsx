"use client";
import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useDeferredValue, useState } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Field } from "@/components/ui/field";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Page } from "@/components/ui/page";
import { TimeText } from "@/components/ui/time-text";
import { listSampleSets } from "@/lib/client/api";
import { grouped } from "@/lib/commands/numbers";
import type { SampleSet } from "@/lib/schemas/api";

const COLUMNS: readonly TableColumn<SampleSet>[] = [
  { title: "sample set", className: "min-w-44", cell: (set) => <Link href={`/samples/${set.id}`} className="inline-flex min-h-7 items-center text-accent underline-offset-4 hover:underline">{set.name}</Link> },
  { title: "waters", isRight: true, cell: (set) => grouped(set.waterCount) },
  { title: "version", isRight: true, cell: (set) => set.version },
  { title: "findings", isRight: true, cell: (set) => <span className={set.flagCount > 0 ? "text-warn" : "text-dim"}>{grouped(set.flagCount)}</span> },
  { title: "seen by", cell: (set) => (set.visibility === "team" ? "the team" : "its owner") },
  { title: "by", className: "whitespace-nowrap", cell: (set) => set.owner.name },
  { title: "updated", cell: (set) => <TimeText at={set.updatedAt} /> },
];

export function SampleSetList() {
  const [text, setText] = useState("");
  const q = useDeferredValue(text.trim());
  const list = useInfiniteQuery({
    queryKey: ["sample-sets", q], initialPageParam: undefined as string | undefined,
    queryFn: ({ pageParam }) => listSampleSets({ q: q || undefined, limit: 50, cursor: pageParam }), getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
  const sets = (list.data?.pages ?? []).flatMap((page) => page.sampleSets);
  return (
    <Page title="Sample sets" isWide actions={<Link href="/samples/new" className="inline-flex min-h-9 items-center rounded border border-accent bg-accent px-3 text-sm text-on-accent">Upload samples</Link>}>
      <Field label="Name" type="search" value={text} onChange={(event) => setText(event.target.value)} className="w-64 max-w-full" />
      {!list.data ? <LoadState error={list.error} onRetry={() => void list.refetch()} />
        : <DataTable label="Sample sets" columns={COLUMNS} items={sets} keyOf={(set) => set.id} empty={q ? "No sample set fits." : "No sample set yet. Upload a CSV with one row for each water."} />}
      <LoadMore hasMore={list.hasNextPage} isLoading={list.isFetchingNextPage} onMore={() => void list.fetchNextPage()} />
    </Page>
  );
}
