/** Edit distance with insertions, deletions, replacements and exchanges of neighbours. */
function distance(a: string, b: string): number {
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      row[j] = Math.min(last[j] + 1, row[j - 1] + 1, last[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) row[j] = Math.min(row[j], before[j - 2] + 1);
    }
    [before, last] = [last, row];
  }
  return last[b.length];
}

/** The name most like `wanted`, letter case aside, or null when none is within about a third of its length. */
export function nearestName(wanted: string, names: Iterable<string>): string | null {
  // Hostile keys may be megabytes long; nothing of ours is like them.
  if (wanted.length > 100) return null;
  const lower = wanted.toLowerCase();
  let best: string | null = null;
  let least = Math.max(1, Math.round(wanted.length / 3)) + 1;
  for (const name of names) {
    if (Math.abs(name.length - wanted.length) >= least) continue;
    const found = distance(lower, name.toLowerCase());
    if (found < least) [best, least] = [name, found];
  }
  return best;
}
