/** One product per data folder: who runs it now, and what a launcher that was killed has left behind. */
import { rmSync } from "node:fs";
import path from "node:path";
import { readJson, writePrivate } from "./files.mjs";
import { commandLine, isAlive, signal, untilGone } from "./processes.mjs";
import { StartError } from "./say.mjs";
import { ROOT } from "./settings.mjs";

const ORPHAN_STOP_MS = 3000;
const file = (dataDir) => path.join(dataDir, "running.json");
const isLauncher = (pid) => isAlive(pid) && commandLine(pid).includes("start.mjs");
const isOurChild = (pid) => isAlive(pid) && (commandLine(pid).includes(ROOT) || /\bnext\b.*(start|dev)|next-server/.test(commandLine(pid)));

/** The product that runs on a data folder, as { pid, address, children }, or null. */
export function runningInstance(dataDir) {
  const found = readJson(file(dataDir));
  return found && found.pid !== process.pid && isLauncher(found.pid) ? found : null;
}

/** Takes the data folder for this process. Throws where another has it; ends the orphans of one that was killed. */
export async function takeInstance(dataDir, address) {
  const other = runningInstance(dataDir);
  if (other) throw new StartError(`Tufa runs from ${dataDir} already: ${other.address} (process ${other.pid}). Stop it first, or name another TUFA_DATA_DIR.`);
  await Promise.all((readJson(file(dataDir))?.children ?? []).filter(isOurChild).map(async (pid) => {
    signal(pid, "SIGTERM");
    if (!(await untilGone(pid, ORPHAN_STOP_MS))) signal(pid, "SIGKILL");
    await untilGone(pid, ORPHAN_STOP_MS);
  }));
  noteChildren(dataDir, address, []);
}

export function noteChildren(dataDir, address, children) {
  writePrivate(file(dataDir), JSON.stringify({ pid: process.pid, address, children }));
}

export function leaveInstance(dataDir) {
  if (readJson(file(dataDir))?.pid === process.pid) rmSync(file(dataDir), { force: true });
}
