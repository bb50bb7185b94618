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
