/** Looking at processes by number: whether they live, and whether they are what a file of ours says they are. */
import { execFileSync } from "node:child_process";
import { readFileSync, readlinkSync } from "node:fs";
import { pause } from "./say.mjs";

export function isAlive(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === "EPERM";
  }
}

/** Command line of a process, or "" where there is none or it may not be seen. */
export function commandLine(pid) {
  try {
    if (process.platform === "linux") return readFileSync(`/proc/${pid}/cmdline`, "utf8").replaceAll("\0", " ").trim();
    return execFileSync("ps", ["-p", String(pid), "-o", "command="], { encoding: "utf8" }).trim();
  } catch {
    return "";
  }
}

/** Working folder of a process, or null where it cannot be told. */
export function workingFolder(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`);
  } catch {
    return null;
  }
}

/** Sends a signal to a process that may be gone already. */
export function signal(pid, name) {
  try {
    process.kill(pid, name);
  } catch (error) {
    if (error.code !== "ESRCH") throw error;
  }
}

/** Waits for a process to end; false when it has not within the time. */
export async function untilGone(pid, timeoutMs) {
  for (const end = Date.now() + timeoutMs; isAlive(pid); await pause(25)) if (Date.now() > end) return false;
  return true;
}
