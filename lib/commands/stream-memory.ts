/**
 * What a browser remembers of one person's console: the stream's entries, the lines typed, recent use. Kept under the
 * person's id, so that two people at one computer do not see each other's. Never secrets: no command takes one.
 */
import type { Entry } from "./entry";

/** The parts of Storage used here, so that tests can hand in a map. */
export type Store = Pick<Storage, "getItem" | "setItem" | "removeItem">;

const MOST_ENTRIES = 500;
const MOST_LINES = 1000;
/** Browsers give a site about 5 MB of UTF-16; the stream takes at most this many characters of it. */
const MOST_CHARACTERS = 1_500_000;

const keyOf = (userId: string, what: "stream" | "history" | "recent"): string => `tufa:${userId}:${what}`;

function readJson(store: Store, key: string): unknown {
  try {
    return JSON.parse(store.getItem(key) ?? "null");
  } catch {
    // Somebody else's or a broken value: begin afresh rather than fail.
    return null;
  }
}

function write(store: Store, key: string, text: string): boolean {
  try {
    store.setItem(key, text);
    return true;
  } catch {
    return false;
  }
}

export interface StoredStream { entries: Entry[]; nextNumber: number }

/** The stream as it was left. Entries that were being answered when the page went away are marked so. */
export function loadStream(store: Store, userId: string): StoredStream {
  const stored = readJson(store, keyOf(userId, "stream")) as Partial<StoredStream> | null;
  const entries = (Array.isArray(stored?.entries) ? stored.entries : []).filter(isEntry).map(settle);
  const highest = entries.reduce((most, entry) => Math.max(most, entry.number), 0);
  return { entries, nextNumber: Math.max(highest + 1, typeof stored?.nextNumber === "number" ? stored.nextNumber : 1) };
}

const isEntry = (value: unknown): value is Entry =>
  typeof value === "object" && value !== null && "number" in value && "line" in value && typeof (value as Entry).body?.kind === "string";

const settle = (entry: Entry): Entry => (entry.body.kind === "waiting" ? { ...entry, body: { kind: "not-kept" } } : entry);

/**
 * Keeps the stream. Where it grows too large, the largest answers of the older half lose their numbers first (their
 * lines stay and can be run again), so that what was asked is never lost.
 */
export function keepStream(store: Store, userId: string, stream: StoredStream): void {
  let budget = MOST_CHARACTERS;
  const kept: string[] = [];
  for (const entry of stream.entries.slice(-MOST_ENTRIES).reverse()) {
    let text = JSON.stringify(entry);
    if (text.length > budget) text = JSON.stringify({ ...entry, body: { kind: "not-kept" } } satisfies Entry);
    budget -= text.length;
    kept.unshift(text);
  }
  if (!write(store, keyOf(userId, "stream"), `{"nextNumber":${stream.nextNumber},"entries":[${kept.join(",")}]}`)) {
    const bare = stream.entries.slice(-50).map((entry) => ({ ...entry, body: { kind: "not-kept" } }));
    write(store, keyOf(userId, "stream"), JSON.stringify({ nextNumber: stream.nextNumber, entries: bare }));
  }
}

/** Lines typed, oldest first. */
export function loadHistory(store: Store, userId: string): string[] {
  const stored = readJson(store, keyOf(userId, "history"));
  return Array.isArray(stored) ? stored.filter((line): line is string => typeof line === "string") : [];
}

/** Adds a line; one typed again moves to the end. Anything that looks like a token is left out. */
export function rememberLine(store: Store, userId: string, lines: readonly string[], line: string): string[] {
  const text = line.trim();
  if (text === "" || /\btufa_\w{16,}/i.test(text)) return [...lines];
  const next = [...lines.filter((each) => each !== text), text].slice(-MOST_LINES);
  write(store, keyOf(userId, "history"), JSON.stringify(next));
  return next;
}

/** Newest line before `below` that contains the words; -1 when there is none. */
export function searchHistory(lines: readonly string[], words: string, below = lines.length): number {
  const wanted = words.toLowerCase();
  for (let i = Math.min(below, lines.length) - 1; i >= 0; i--) if (lines[i].toLowerCase().includes(wanted)) return i;
  return -1;
}

export type RecentUse = Record<string, { count: number; at: number }>;

export function loadRecent(store: Store, userId: string): RecentUse {
  const stored = readJson(store, keyOf(userId, "recent"));
  return typeof stored === "object" && stored !== null && !Array.isArray(stored) ? (stored as RecentUse) : {};
}

/** Counts a use of a palette item. */
export function rememberUse(store: Store, userId: string, recent: RecentUse, id: string, now: number): RecentUse {
  const next = { ...recent, [id]: { count: (recent[id]?.count ?? 0) + 1, at: now } };
  const newest = Object.entries(next).sort((a, b) => b[1].at - a[1].at).slice(0, 200);
  const kept = Object.fromEntries(newest);
  write(store, keyOf(userId, "recent"), JSON.stringify(kept));
  return kept;
}

const HALF_LIFE_MS = 3 * 24 * 3600 * 1000;

/** Weight of an item by how often and how lately it was used: a use counts half after three days. */
export const weightOfUse = (recent: RecentUse, id: string, now: number): number =>
  (recent[id] ? recent[id].count * 0.5 ** ((now - recent[id].at) / HALF_LIFE_MS) : 0);

/** A line handed from another page to the console, to be run there. */
const PASSED_LINE = "tufa:passed-line";
export const passLine = (store: Store, line: string): void => { write(store, PASSED_LINE, line); };
export function takePassedLine(store: Store): string | null {
  const line = store.getItem(PASSED_LINE);
  if (line !== null) store.removeItem(PASSED_LINE);
  return line;
}

/** The spec editor's draft; one per person. */
export const loadDraft = (store: Store, userId: string): string | null => store.getItem(`tufa:${userId}:draft`);
export const keepDraft = (store: Store, userId: string, text: string): boolean => write(store, `tufa:${userId}:draft`, text);
