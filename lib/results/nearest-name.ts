/** Edit distance with insertions, deletions and replacements of one character. */
function distance(a: string, b: string): number {
  let previous = Array.from({ length: b.length + 1 }, (_, index) => index);
  for (let i = 1; i <= a.length; i++) {
    const current = [i];
    for (let j = 1; j <= b.length; j++) {
      current[j] = Math.min(previous[j] + 1, current[j - 1] + 1, previous[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1));
    }
    previous = current;
  }
  return previous[b.length];
}

/** The name most like `wanted`, letter case aside, or null when none is within about a third of its length. */
export function nearestName(wanted: string, names: readonly string[]): string | null {
  const lower = wanted.toLowerCase();
  let best: string | null = null;
  let least = Math.max(2, Math.ceil(wanted.length / 3)) + 1;
  for (const name of names) {
    if (Math.abs(name.length - wanted.length) >= least) continue;
    const found = distance(lower, name.toLowerCase());
    if (found < least) [best, least] = [name, found];
  }
  return best;
}
