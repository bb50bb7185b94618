import { chooseTheme } from "@/lib/client/theme";
import { leaveSession } from "@/lib/client/session";
import { callAt, type ConsoleHost, type ConsoleView } from "@/lib/commands/command";
import { COMMANDS, findCommand } from "@/lib/commands/registry";

/** Runs a line that needs no stream (theme, go, leave) on whatever page the palette stands. */
export async function runAnywhere(line: string, role: ConsoleView["role"], navigate: (path: string) => void): Promise<void> {
  const name = line.split(" ")[0];
  const command = findCommand(name);
  if (!command?.worksAnywhere) throw new Error(`The command ${name} needs the console.`);
  const view: ConsoleView = {
    entries: [], sets: [], jobs: [], role, origin: location.origin, undoable: 0,
    commandNames: COMMANDS.map((each) => each.name), requestOf: () => ({ request: null, problems: [] }),
  };
  const host = { view: () => view, answer: () => {}, navigate, chooseTheme, signOut: leaveSession } satisfies Partial<ConsoleHost>;
  // Commands marked worksAnywhere use nothing else; a test holds them to it.
  await command.run(callAt(line, name.length), host as unknown as ConsoleHost);
}
