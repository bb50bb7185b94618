"use client";
import { useQuery } from "@tanstack/react-query";
import { LoadState } from "@/components/ui/load-state";
import { Section } from "@/components/ui/page";
import { getHealth } from "@/lib/client/accounts";
import { grouped } from "@/lib/commands/numbers";

const EVERY_MS = 5000;

/** Whether the parts stand, and how much work waits. */
export function SystemHealth() {
  const health = useQuery({ queryKey: ["health"], queryFn: getHealth, refetchInterval: EVERY_MS });
  if (!health.data) return <Section title="System"><LoadState error={health.error} onRetry={() => void health.refetch()} /></Section>;
  const { status, database, workers, queue, engineVersion, constantsVersion } = health.data;
  const facts: [string, string, string][] = [
    ["state", status, status === "ok" ? "text-good" : "text-bad"], ["database", database, database === "ok" ? "text-good" : "text-bad"],
    ["worker processes", String(workers), workers > 0 ? "" : "text-bad"], ["rows waiting", queue ? grouped(queue.waitingRows) : "unknown", ""], ["jobs running", queue ? grouped(queue.runningJobs) : "unknown", ""],
    ["engine", engineVersion, ""], ["constants", constantsVersion, ""],
  ];
  return <Section title="System"><dl className="flex flex-wrap gap-x-8 gap-y-2 text-sm">{facts.map(([name, value, colour]) => <div key={name}><dt className="text-xs text-dim">{name}</dt><dd className={`tabular-nums ${colour}`}>{value}</dd></div>)}</dl></Section>;
}
