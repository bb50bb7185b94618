/** A word of a line with its place; quotes hold spaces together, commas stand alone. */
export interface Word {
  text: string;
  start: number;
  end: number;
}

const PIECE = /"([^"]*)"?|,|[^\s,"]+/g;

/** Words of a line in order. `"Kiln Well"` is one word without its quotes; a comma between digits stays in its number. */
export function splitWords(text: string, offset = 0): Word[] {
  const words: Word[] = [];
  for (const match of text.matchAll(PIECE)) {
    const start = match.index + offset;
    words.push({ text: match[1] ?? match[0], start, end: start + match[0].length });
  }
  return words;
}

/** Parts between commas, empty ones left out; each with the words in it. */
export function splitParts(words: readonly Word[]): Word[][] {
  const parts: Word[][] = [[]];
  for (const word of words) {
    if (word.text === ",") parts.push([]);
    else parts[parts.length - 1].push(word);
  }
  return parts.filter((part) => part.length > 0);
}

/** Text of several words with single spaces, and the place they cover. */
export function joined(words: readonly Word[]): Word {
  return {
    text: words.map((word) => word.text).join(" "),
    start: words[0]?.start ?? 0,
    end: words[words.length - 1]?.end ?? 0,
  };
}

/** The nearest of `names` within a third of the word's length in single edits (a swap of neighbours is one); null when none is near. */
export function nearestWord(word: string, names: Iterable<string>): string | null {
  const wanted = word.toLowerCase();
  let best: string | null = null;
  let bestDistance = Math.max(1, Math.floor(wanted.length / 3)) + 1;
  for (const name of names) {
    const distance = editDistance(wanted, name.toLowerCase());
    if (distance < bestDistance) [best, bestDistance] = [name, distance];
  }
  return best;
}

function editDistance(a: string, b: string): number {
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
