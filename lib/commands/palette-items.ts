/** What the palette offers and in which order. Pure, so that ranking is tested without a screen. */
import { SOLIDS, SPECIES } from "./named-constants";
import type { Job, SampleSet } from "@/lib/schemas/api";
import { PAGES, THEMES } from "./catalog/screen";
import type { ConsoleView } from "./command";
import { COMMANDS } from "./registry";
import { weightOfUse, type RecentUse } from "./stream-memory";

export type PaletteGroup = "Commands" | "Pages" | "Jobs" | "Sample sets" | "Constants";

export interface PaletteItem {
  /** Unique and stable; recent use is counted under it. */
  id: string;
  group: PaletteGroup;
  title: string;
  detail: string;
  keywords: readonly string[];
  /** Shortcut, where the item has one. */
  combo: string | null;
  act: { go: string } | { line: string; isWhole: boolean };
}

/** True where a command may be run by its name alone. */
const runsBare = (signature: string): boolean => signature === "" || signature.startsWith("[");

export function paletteItems(
  view: Pick<ConsoleView, "role">, jobs: readonly Pick<Job, "id" | "title" | "status">[], sets: readonly Pick<SampleSet, "id" | "name" | "waterCount">[],
): PaletteItem[] {
  return [
    ...COMMANDS.map((command): PaletteItem => ({
      id: `command:${command.name}`, group: "Commands", title: command.title, detail: command.name, keywords: [command.name, ...command.keywords],
      combo: command.key?.combo ?? null,
      act: runsBare(command.signature) ? { line: command.name, isWhole: true } : { line: `${command.name} `, isWhole: false },
    })),
    ...THEMES.map((name): PaletteItem => ({
      id: `theme:${name}`, group: "Commands", title: `Theme: ${name === "system" ? "as the system has it" : name}`, detail: `theme ${name}`,
      keywords: ["appearance", "colour", "color"], combo: null, act: { line: `theme ${name}`, isWhole: true },
    })),
    ...PAGES.filter((page) => !page.role || page.role === view.role).map((page): PaletteItem => ({
      id: `page:${page.path}`, group: "Pages", title: page.title, detail: page.path, keywords: [page.word, "page", "go"], combo: null, act: { go: page.path },
    })),
    ...jobs.map((job): PaletteItem => ({
      id: `job:${job.id}`, group: "Jobs", title: job.title, detail: job.status, keywords: [job.id, "job"], combo: null, act: { go: `/jobs/${job.id}` },
    })),
    ...sets.map((set): PaletteItem => ({
      id: `set:${set.id}`, group: "Sample sets", title: set.name, detail: `${set.waterCount} waters`, keywords: [set.id, "samples"], combo: null, act: { go: `/samples/${set.id}` },
    })),
    ...SOLIDS.map((solid): PaletteItem => ({
      id: `constant:${solid.name}`, group: "Constants", title: solid.name, detail: "solid", keywords: [solid.formula, "log k", "constant"], combo: null, act: { line: `constant ${solid.name}`, isWhole: true },
    })),
    ...SPECIES.map((species): PaletteItem => ({
      id: `constant:${species.name}`, group: "Constants", title: species.name, detail: "species", keywords: [species.name.replace("^", ""), "log k", "constant"], combo: null, act: { line: `constant ${species.name}`, isWhole: true },
    })),
  ];
}

/** How well a text answers what was typed: 1 whole, then beginnings, then insides, then letters in order; 0 not at all. */
export function matchScore(text: string, typed: string): number {
  const lower = text.toLowerCase();
  if (lower === typed) return 1;
  if (lower.startsWith(typed)) return 0.9;
  if (lower.split(/[\s\-/_()]+/).some((word) => word.startsWith(typed))) return 0.7;
  if (lower.includes(typed)) return 0.5;
  let at = 0;
  for (const letter of lower) if (letter === typed[at]) at++;
  return at === typed.length && typed.length > 2 ? 0.15 : 0;
}

const GROUP_WEIGHT: Record<PaletteGroup, number> = { Commands: 1.1, Pages: 1.05, Jobs: 1, "Sample sets": 1, Constants: 0.8 };

/** Items that answer the words typed, best first; every word must be found in title, detail or keywords. Recent use lifts. */
export function rankItems(items: readonly PaletteItem[], typed: string, recent: RecentUse, now: number, most = 60): PaletteItem[] {
  const words = typed.toLowerCase().split(/\s+/).filter(Boolean);
  const scored = items.map((item, order) => {
    let score = GROUP_WEIGHT[item.group];
    for (const word of words) {
      const best = Math.max(matchScore(item.title, word), 0.9 * matchScore(item.detail, word), ...item.keywords.map((each) => 0.95 * matchScore(each, word)));
      score *= best;
    }
    const used = weightOfUse(recent, item.id, now);
    return { item, order, score: score * (1 + Math.min(used, 10)) };
  });
  return scored.filter((each) => each.score > 0).sort((a, b) => b.score - a.score || a.order - b.order).slice(0, most).map((each) => each.item);
}
