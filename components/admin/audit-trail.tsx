"use client";
import { useInfiniteQuery } from "@tanstack/react-query";
import { useState } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Section } from "@/components/ui/page";
import { SelectField } from "@/components/ui/select-field";
import { TimeText } from "@/components/ui/time-text";
import { listAudit } from "@/lib/client/accounts";
import type { AuditEvent } from "@/lib/schemas/api";
import { AUDIT_ACTIONS } from "@/lib/schemas/audit-actions";

/** "name nightly batch · scopes jobs:read, jobs:write" */
const detailText = (detail: AuditEvent["detail"]): string =>
  Object.entries(detail).map(([key, value]) => `${key} ${Array.isArray(value) ? value.join(", ") : value === null ? "none" : typeof value === "object" ? JSON.stringify(value) : String(value)}`).join(" · ");

const COLUMNS: readonly TableColumn<AuditEvent>[] = [
  { title: "when", cell: (event) => <TimeText at={event.at} /> },
  { title: "who", className: "whitespace-nowrap", cell: (event) => event.actor?.name ?? <span className="text-dim">nobody signed in</span> },
  { title: "via", cell: (event) => event.via }, { title: "what", className: "whitespace-nowrap", cell: (event) => event.action },
  { title: "target", className: "text-xs text-dim", cell: (event) => event.target },
  { title: "details", className: "text-xs text-dim min-w-56 max-w-96 break-words", cell: (event) => detailText(event.detail) },
];

/** Who did what, newest first. */
export function AuditTrail() {
  const [action, setAction] = useState("");
  const list = useInfiniteQuery({
    queryKey: ["audit", action], initialPageParam: undefined as string | undefined,
    queryFn: ({ pageParam }) => listAudit({ action: action || undefined, limit: 50, cursor: pageParam }), getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
  return (
    <Section title="Audit trail">
      <SelectField label="What" value={action} onChange={(event) => setAction(event.target.value)} className="max-w-64"><option value="">everything</option>{AUDIT_ACTIONS.map((each) => <option key={each}>{each}</option>)}</SelectField>
      {!list.data ? <LoadState error={list.error} onRetry={() => void list.refetch()} /> : <DataTable label="Audit trail" columns={COLUMNS} items={list.data.pages.flatMap((page) => page.events)} keyOf={(event) => event.id} empty="Nothing of that name happened." />}
      <LoadMore hasMore={list.hasNextPage} isLoading={list.isFetchingNextPage} onMore={() => void list.fetchNextPage()} />
    </Section>
  );
}
