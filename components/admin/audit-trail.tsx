"use client";
import { useInfiniteQuery } from "@tanstack/react-query";
import { useDeferredValue, useState } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Field } from "@/components/ui/field";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Section } from "@/components/ui/page";
import { TimeText } from "@/components/ui/time-text";
import { listAudit } from "@/lib/client/accounts";
import type { AuditEvent } from "@/lib/schemas/api";

const COLUMNS: readonly TableColumn<AuditEvent>[] = [
  { title: "when", cell: (event) => <TimeText at={event.at} /> },
  { title: "who", className: "whitespace-nowrap", cell: (event) => event.actor?.name ?? <span className="text-dim">nobody signed in</span> },
  { title: "via", cell: (event) => event.via }, { title: "what", className: "whitespace-nowrap", cell: (event) => event.action },
  { title: "target", className: "text-xs text-dim", cell: (event) => event.target },
  { title: "details", className: "text-xs text-dim max-w-96 break-words", cell: (event) => (Object.keys(event.detail).length > 0 ? JSON.stringify(event.detail) : "") },
];

/** Who did what, newest first. */
export function AuditTrail() {
  const [action, setAction] = useState("");
  const wanted = useDeferredValue(action.trim());
  const list = useInfiniteQuery({
    queryKey: ["audit", wanted], initialPageParam: undefined as string | undefined,
    queryFn: ({ pageParam }) => listAudit({ action: wanted || undefined, limit: 50, cursor: pageParam }), getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
  return (
    <Section title="Audit trail">
      <Field label="What, exactly" type="search" value={action} onChange={(event) => setAction(event.target.value)} placeholder="token-created" className="w-64 max-w-full" />
      {!list.data ? <LoadState error={list.error} onRetry={() => void list.refetch()} /> : <DataTable label="Audit trail" columns={COLUMNS} items={list.data.pages.flatMap((page) => page.events)} keyOf={(event) => event.id} empty="Nothing of that name happened." />}
      <LoadMore hasMore={list.hasNextPage} isLoading={list.isFetchingNextPage} onMore={() => void list.fetchNextPage()} />
    </Section>
  );
}
