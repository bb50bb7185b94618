/** The one list of commands. Prompt, palette, shortcuts and help read it; a command's file and this line are all it takes. */
import { api, help } from "./catalog/explain";
import { chart } from "./catalog/chart";
import { compare } from "./catalog/compare";
import { constants } from "./catalog/constants";
import { copy, save } from "./catalog/copy";
import { edit } from "./catalog/edit";
import { cancel, jobs, leave, openJob, sets } from "./catalog/jobs";
import { rangeOver } from "./catalog/range";
import { clear, go, theme, undo } from "./catalog/screen";
import { submit } from "./catalog/submit";
import { tryCase } from "./catalog/try";
import type { Command } from "./command";

export const COMMANDS: readonly Command[] = [
  tryCase, rangeOver, chart, compare, edit, submit, jobs, openJob, cancel, sets, constants, copy, save, api, go, clear, undo, theme,
  help, leave,
];

const byName = new Map(COMMANDS.map((command) => [command.name, command]));

export const findCommand = (name: string): Command | null => byName.get(name.toLowerCase()) ?? null;
