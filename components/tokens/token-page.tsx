"use client";
import { useInfiniteQuery, useQueryClient } from "@tanstack/react-query";
import { useRef, useState } from "react";
import { Button } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/confirm-dialog";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { LoadMore, LoadState } from "@/components/ui/load-state";
import { Page, Section } from "@/components/ui/page";
import { TimeText } from "@/components/ui/time-text";
import { listTokens, revokeToken } from "@/lib/client/accounts";
import type { Scope } from "@/lib/schemas/actor";
import type { Token, TokenCreated } from "@/lib/schemas/api";
import { NewTokenForm } from "./new-token-form";
import { ShownOnce } from "@/components/ui/shown-once";

const STATE_COLOURS: Record<Token["state"], string> = { active: "text-good", expired: "text-dim", revoked: "text-dim" };

const columns = (isEveryones: boolean, onRevoke: (token: Token) => void): readonly TableColumn<Token>[] => [
  { title: "name", cell: (token) => token.name },
  ...(isEveryones ? [{ title: "of", className: "whitespace-nowrap", cell: (token: Token) => <span title={token.owner.email}>{token.owner.name}</span> }] : []),
  { title: "token", className: "whitespace-nowrap", cell: (token) => <code className="text-dim">{token.prefix}…{token.lastFour}</code> },
  { title: "scopes", className: "text-xs", cell: (token) => token.scopes.join(", ") },
  { title: "made", cell: (token) => <TimeText at={token.createdAt} /> },
  { title: "last used", cell: (token) => <TimeText at={token.lastUsedAt} fallback="never" /> },
  { title: "expires", cell: (token) => <TimeText at={token.expiresAt} fallback="never" /> },
  { title: "state", cell: (token) => <span className={STATE_COLOURS[token.state]}>{token.state}</span> },
  { title: "", cell: (token) => (token.state === "active" ? <Button kind="danger" className="!min-h-7 !px-2 text-xs" onClick={() => onRevoke(token)} aria-label={`Revoke ${token.name}`}>Revoke</Button> : null) },
];

/** One's own tokens, or for administrators everyone's. */
export function TokenPage({ scopes, isAdministrator }: { scopes: readonly Scope[]; isAdministrator: boolean }) {
  const client = useQueryClient();
  const [owner, setOwner] = useState<"me" | "all">("me");
  const [made, setMade] = useState<TokenCreated | null>(null);
  const [asked, setAsked] = useState<Token | null>(null);
  const [failure, setFailure] = useState("");
  const [said, setSaid] = useState("");
  const table = useRef<HTMLDivElement>(null);
  const list = useInfiniteQuery({
    queryKey: ["tokens", owner], initialPageParam: undefined as string | undefined,
    queryFn: ({ pageParam }) => listTokens({ owner, limit: 50, cursor: pageParam }), getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
  const refresh = (): void => void client.invalidateQueries({ queryKey: ["tokens"] });
  const revoke = (token: Token): void => {
    setFailure("");
    // The button that was pressed goes; the table it stood in takes the focus.
    revokeToken(token.id).then(() => { setSaid(`“${token.name}” is revoked.`); table.current?.focus(); refresh(); }, (error: unknown) => setFailure(error instanceof Error ? error.message : "Revoking failed."));
  };
  return (
    <Page title="API tokens" isWide lead="A token lets a script work in your name, within its scopes. Send it as Authorization: Bearer …; a revoked one fails on its next call.">
      <Section title="New token">
        <NewTokenForm scopes={scopes} onMade={(token) => { setMade(token); refresh(); }} />
        {made && <ShownOnce title={`The token “${made.name}”, shown this once`} text={made.token} onClose={() => setMade(null)} />}
      </Section>
      <Section title={owner === "me" ? "Your tokens" : "Everyone’s tokens"} actions={isAdministrator && <Button onClick={() => setOwner(owner === "me" ? "all" : "me")}>{owner === "me" ? "Show everyone’s" : "Show mine"}</Button>}>
        {failure && <p role="alert" className="text-sm text-bad">{failure}</p>}
        <p role="status" className={said ? "text-sm text-dim" : "sr-only"}>{said}</p>
        {!list.data ? <LoadState error={list.error} onRetry={() => void list.refetch()} />
          : <DataTable label="Tokens" columns={columns(owner === "all", setAsked)} items={list.data.pages.flatMap((page) => page.tokens)} keyOf={(token) => token.id} empty="No token yet." regionRef={table} />}
        <LoadMore hasMore={list.hasNextPage} isLoading={list.isFetchingNextPage} onMore={() => void list.fetchNextPage()} />
      </Section>
      <ConfirmDialog isOpen={asked !== null} title={`Revoke “${asked?.name ?? ""}”?`} action="Revoke it" onClose={() => setAsked(null)} onConfirm={() => { if (asked) revoke(asked); }}>
        Scripts that use it fail on their next call. This cannot be taken back.
      </ConfirmDialog>
    </Page>
  );
}
