import { describe, expect, it } from "vitest";
import { COMMANDS, findCommand } from "@/lib/commands/registry";
import { KEYS, NEVER_BOUND, matchesCombo, type Scope } from "@/lib/commands/keys";
import { readLine } from "@/lib/commands/read-line";
import { callAt } from "@/lib/commands/command";
import { answeredWater, consoleView, gridEntry, recordingHost } from "./commands-fixtures";

interface Bound { who: string; combo: string; scope: Scope }

const BOUND: Bound[] = [
  ...COMMANDS.flatMap((command) => (command.key ? [{ who: command.name, ...command.key }] : [])),
  ...KEYS.map((key) => ({ who: key.id, combo: key.combo, scope: key.scope as Scope })),
];

/** Two scopes that can listen at the same time. */
function overlap(a: Scope, b: Scope): boolean {
  if (a === b || a === "everywhere" || b === "everywhere") return true;
  const inConsole = (scope: Scope): boolean => scope === "console" || scope === "prompt" || scope === "stream";
  // Within the console the prompt and a focused entry never have the focus together.
  return inConsole(a) && inConsole(b) && (a === "console" || b === "console");
}

describe("the registry of commands", () => {
  it("has no two commands of one name", () => {
    const names = COMMANDS.map((command) => command.name);
    expect(new Set(names).size).toBe(names.length);
  });

  it("binds no key twice where both could listen", () => {
    const clashes = BOUND.flatMap((a, i) => BOUND.slice(i + 1).filter((b) => a.combo === b.combo && overlap(a.scope, b.scope)).map((b) => `${a.combo}: ${a.who}, ${b.who}`));
    expect(clashes).toEqual([]);
  });

  it("leaves keys alone that belong to browsers", () => {
    expect(BOUND.filter((each) => NEVER_BOUND.includes(each.combo))).toEqual([]);
  });

  it("binds no bare letter or digit anywhere", () => {
    expect(BOUND.filter((each) => /^[a-z0-9]$/i.test(each.combo))).toEqual([]);
  });

  it("names every command in one lower-case word and explains it", () => {
    for (const command of COMMANDS) {
      expect(command.name).toMatch(/^[a-z]+$/);
      expect(command.help.length, command.name).toBeGreaterThan(20);
      expect(command.title.length, command.name).toBeGreaterThan(5);
      expect(findCommand(command.name)).toBe(command);
    }
  });

  it("gives each command an example that it reads without a fault", () => {
    const view = consoleView({
      entries: [answeredWater(1), answeredWater(2), gridEntry(3), answeredWater(4)], undoable: 1,
      sets: [{ id: "set_abcdefghijklmnopqrst", name: "Springs and becks", waterCount: 12 }],
      jobs: [{ id: "job_abcdefghijklmnopqrst", title: "Springs and becks", status: "running" }],
    });
    for (const command of COMMANDS) {
      const read = readLine(command.example, view);
      expect(read.kind, command.example).toBe("command");
      expect(read.problems, command.example).toEqual([]);
      expect(read.kind === "command" && read.command.name, command.example).toBe(command.name);
    }
  });
});

describe("commands that work on any page", () => {
  it("use nothing of the console but going, theming and leaving", async () => {
    for (const command of COMMANDS.filter((each) => each.worksAnywhere)) {
      const { host, calls, answers } = recordingHost(consoleView());
      await command.run(callAt(command.example, command.name.length), host);
      expect(calls.map(([name]) => name), command.name).toHaveLength(1);
      expect(["navigate", "chooseTheme", "signOut"], command.name).toContain(calls[0][0]);
      expect(answers, command.name).toEqual([]);
    }
  });
});

describe("key combos", () => {
  const press = (key: string, modifiers: Partial<Record<"ctrlKey" | "metaKey" | "altKey" | "shiftKey", boolean>> = {}) =>
    ({ key, ctrlKey: false, metaKey: false, altKey: false, shiftKey: false, ...modifiers });

  it("take Mod for Ctrl, and for Command on Apple keyboards", () => {
    expect(matchesCombo(press("k", { ctrlKey: true }), "Mod+K", false)).toBe(true);
    expect(matchesCombo(press("k", { metaKey: true }), "Mod+K", true)).toBe(true);
    expect(matchesCombo(press("k", { ctrlKey: true }), "Mod+K", true)).toBe(false);
  });

  it("refuse a modifier more or less", () => {
    expect(matchesCombo(press("k", { ctrlKey: true, shiftKey: true }), "Mod+K", false)).toBe(false);
    expect(matchesCombo(press("ArrowUp"), "Alt+ArrowUp", false)).toBe(false);
    expect(matchesCombo(press("Enter", { shiftKey: true }), "Enter", false)).toBe(false);
  });

  it("take a character typed with Shift as the character", () => {
    expect(matchesCombo(press("?", { shiftKey: true }), "?", false)).toBe(true);
  });
});
