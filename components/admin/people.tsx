"use client";
import { useInfiniteQuery, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/confirm-dialog";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Section } from "@/components/ui/page";
import { ShownOnce } from "@/components/ui/shown-once";
import { TimeText } from "@/components/ui/time-text";
import { listUsers, newPasswordLink, updateUser } from "@/lib/client/accounts";
import type { Role } from "@/lib/schemas/actor";
import type { User } from "@/lib/schemas/api";
import { NewPersonForm } from "./new-person-form";

export const ROLES: readonly Role[] = ["analyst", "modeller", "administrator"];
const STATE_COLOURS: Record<User["state"], string> = { active: "text-good", invited: "text-warn", disabled: "text-bad" };

interface Acts { meId: string; onRole: (user: User, role: Role) => void; onLink: (user: User) => void; onDisable: (user: User) => void }

const columns = ({ meId, onRole, onLink, onDisable }: Acts): readonly TableColumn<User>[] => [
  { title: "name", className: "whitespace-nowrap", cell: (user) => user.name }, { title: "e-mail", cell: (user) => user.email },
  { title: "role", cell: (user) => <select aria-label={`Role of ${user.name}`} value={user.role} disabled={user.id === meId} onChange={(event) => onRole(user, event.target.value as Role)} className="min-h-7 rounded border border-faint/75 bg-raised px-1">{ROLES.map((role) => <option key={role}>{role}</option>)}</select> },
  { title: "state", cell: (user) => <span className={STATE_COLOURS[user.state]}>{user.state}</span> },
  { title: "last in", cell: (user) => <TimeText at={user.lastSignInAt} fallback="never" /> },
  { title: "", cell: (user) => (
    <span className="flex gap-1">
      <Button className="!min-h-7 !px-2 text-xs" onClick={() => onLink(user)} aria-label={`New password link for ${user.name}`}>Password link</Button>
      {user.id !== meId && <Button kind={user.state === "disabled" ? "plain" : "danger"} className="!min-h-7 !px-2 text-xs" onClick={() => onDisable(user)} aria-label={`${user.state === "disabled" ? "Enable" : "Disable"} ${user.name}`}>{user.state === "disabled" ? "Enable" : "Disable"}</Button>}
    </span>
  ) },
];

/** Accounts: made, given a role, disabled, and given a link for a password. */
export function People({ meId }: { meId: string }) {
  const client = useQueryClient();
  const [link, setLink] = useState<{ name: string; url: string } | null>(null);
  const [asked, setAsked] = useState<User | null>(null);
  const [failure, setFailure] = useState("");
  const list = useInfiniteQuery({
    queryKey: ["users"], initialPageParam: undefined as string | undefined, queryFn: ({ pageParam }) => listUsers({ limit: 100, cursor: pageParam }), getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
  const refresh = (): void => { void client.invalidateQueries({ queryKey: ["users"] }); void client.invalidateQueries({ queryKey: ["audit"] }); };
  const run = (what: Promise<unknown>): void => { setFailure(""); what.then(refresh, (error: unknown) => setFailure(error instanceof Error ? error.message : "That failed.")); };
  const acts: Acts = {
    meId, onRole: (user, role) => run(updateUser(user.id, { role })),
    onLink: (user) => run(newPasswordLink(user.id).then(({ url }) => setLink({ name: user.name, url }))),
    onDisable: (user) => { if (user.state === "disabled") run(updateUser(user.id, { disabled: false })); else setAsked(user); },
  };
  return (
    <Section title="People">
      <NewPersonForm onMade={(user) => { setLink({ name: user.name, url: user.passwordLink.url }); refresh(); }} />
      {link && <ShownOnce title={`One-time link for ${link.name} to set a password, good for 7 days; shown this once`} text={link.url} onClose={() => setLink(null)} />}
      {failure && <p role="alert" className="text-sm text-bad">{failure}</p>}
      {!list.data ? <LoadState error={list.error} onRetry={() => void list.refetch()} /> : <DataTable label="People" columns={columns(acts)} items={list.data.pages.flatMap((page) => page.users)} keyOf={(user) => user.id} empty="Nobody yet." />}
      <LoadMore hasMore={list.hasNextPage} isLoading={list.isFetchingNextPage} onMore={() => void list.fetchNextPage()} />
      <ConfirmDialog isOpen={asked !== null} title={`Disable ${asked?.name ?? ""}?`} action="Disable" onClose={() => setAsked(null)} onConfirm={() => { if (asked) run(updateUser(asked.id, { disabled: true })); }}>
        Every session ends and every token fails at once. Jobs already submitted run to their end.
      </ConfirmDialog>
    </Section>
  );
}
