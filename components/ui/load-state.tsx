import { Button } from "./button";

/** What stands in a list's place while it comes, or when it did not. */
export function LoadState({ error, onRetry }: { error: Error | null; onRetry: () => void }) {
  if (!error) return <p role="status" className="py-6 text-sm text-dim">Reading …</p>;
  return <div role="alert" className="flex flex-wrap items-center gap-3 py-6 text-sm"><p className="text-bad">{error.message}</p><Button onClick={onRetry}>Try again</Button></div>;
}

/** Fetches the next part of a list. */
export function LoadMore({ hasMore, isLoading, onMore }: { hasMore: boolean; isLoading: boolean; onMore: () => void }) {
  return hasMore ? <div><Button disabled={isLoading} onClick={onMore}>{isLoading ? "Reading …" : "Show more"}</Button></div> : null;
}
