/**
 * `npm run verify [-- --waters 2000 --from 1]`: random waters through the kernel and through the independent second solver, on every core.
 * Prints what was covered and how closely the two agree; exits 1 where one water disagrees.
 */
import { fork } from "node:child_process";
import os from "node:os";
import { fileURLToPath } from "node:url";
import { AGREEMENT, compareSeed } from "./independent-compare";
import { PAIRS } from "./random-waters";

interface Report { seed: number; pair: string; model: string; meets: string; worst: number; worstName: string; isUnsolvable: boolean; isConfirmed: boolean; wrong: string | null }

const argument = (name: string, fallback: number): number => {
  const at = process.argv.indexOf(`--${name}`);
  const value = at < 0 ? fallback : Number(process.argv[at + 1]);
  if (!Number.isInteger(value) || value < 1) { console.error(`--${name} takes a whole number above 0`); process.exit(2); }
  return value;
};

function reportOf(seed: number): Report | null {
  try {
    const found = compareSeed(seed);
    if (!found) return null;
    const { label, worst, worstName, misses } = found;
    const [, pair, model, , ...met] = label.split(", ");
    const isUnsolvable = typeof found.answer === "string";
    return { seed, pair, model, meets: met.join(", ") || "nothing", worst, worstName, isUnsolvable, isConfirmed: found.isConfirmed, wrong: misses.length > 0 ? `${label}: ${misses.slice(0, 3).join("; ")}` : null };
  } catch (error) {
    return { seed, pair: "?", model: "?", meets: "?", worst: NaN, worstName: "", isUnsolvable: false, isConfirmed: false, wrong: `the second solver failed: ${error instanceof Error ? error.message : String(error)}` };
  }
}

/** A share of the seeds: the next one is asked for when one is done. */
function work(): void {
  process.on("message", (seed: number) => {
    if (seed === 0) process.exit(0); // nothing left
    process.send!({ seed, report: reportOf(seed) });
  });
}

async function lead(): Promise<void> {
  const wanted = argument("waters", 2000);
  let next = argument("from", 1);
  const reports: Report[] = [];
  const started = Date.now();
  let compared = 0;
  const shown = { at: started };
  await Promise.all(Array.from({ length: os.availableParallelism() }, () => new Promise<void>((resolve, reject) => {
    const child = fork(fileURLToPath(import.meta.url), ["--worker"], { execArgv: process.execArgv });
    child.once("error", reject);
    child.once("exit", (code) => (code === 0 ? resolve() : reject(new Error(`a worker ended with ${code}`))));
    child.on("message", ({ report }: { report: Report | null }) => {
      if (report) { reports.push(report); if (!report.isUnsolvable) compared++; }
      if (Date.now() - shown.at > 15_000) { shown.at = Date.now(); console.log(`${compared} of ${wanted} waters, ${Math.round((Date.now() - started) / 1000)} s`); }
      child.send(compared >= wanted ? 0 : next++);
    });
    child.send(next++);
  })));
  process.exit(summarise(reports.sort((a, b) => a.seed - b.seed), started));
}

function count(reports: readonly Report[], key: (each: Report) => string): string {
  const counts = new Map<string, number>();
  for (const each of reports) counts.set(key(each), (counts.get(key(each)) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1]).map(([name, n]) => `${name} ${n}`).join(" · ");
}

function summarise(reports: readonly Report[], started: number): number {
  const solved = reports.filter((each) => !each.isUnsolvable);
  const wrong = reports.filter((each) => each.wrong !== null);
  const ranked = [...solved].sort((a, b) => b.worst - a.worst);
  const quantile = (p: number) => ranked[Math.floor((1 - p) * (ranked.length - 1))].worst.toExponential(1);
  console.log(`\n${solved.length} waters compared, ${reports.length - solved.length} that have no state by either way, seeds ${reports[0].seed}–${reports[reports.length - 1].seed}, ${Math.round((Date.now() - started) / 1000)} s`);
  console.log(`${solved.filter((each) => each.isConfirmed).length} of them found by the kernel alone, and confirmed by the second way's balances in 34 digits`);
  console.log(`pairs (${PAIRS.length} in all): ${count(solved, (each) => each.pair)}`);
  console.log(`activity models: ${count(solved, (each) => each.model)}`);
  console.log(`react: ${count(solved, (each) => (each.meets === "nothing" ? "none" : each.meets.includes(" + ") ? "several solids" : /excess|may-form|finite/.test(each.meets) ? "one solid" : "gas only"))}; ${new Set(solved.map((each) => each.meets)).size} different sets of gas and solids`);
  console.log(`largest relative deviation in a concentration above 1e-20 mol/kg: median ${quantile(0.5)}, 99 % ${quantile(0.99)}, worst ${ranked[0].worst.toExponential(1)} (${ranked[0].worstName}, seed ${ranked[0].seed}); wanted ${AGREEMENT}`);
  for (const { seed, wrong: why } of wrong) console.log(`✗ seed ${seed}: ${why}`);
  console.log(wrong.length === 0 ? "✓ the two agree" : `✗ ${wrong.length} waters disagree`);
  return wrong.length === 0 ? 0 : 1;
}

if (process.argv.includes("--worker")) work(); else void lead();
