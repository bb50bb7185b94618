/** Under whose name the embedded PostgreSQL runs: it refuses root. */
import { chownSync, readFileSync, statSync } from "node:fs";
import path from "node:path";
import { StartError } from "./say.mjs";

/** For root an unprivileged account of this machine (initdb wants one with a passwd entry); for others null, themselves. */
export function databaseAccount() {
  if (process.getuid?.() !== 0) return null;
  const entries = readFileSync("/etc/passwd", "utf8").split("\n").map((line) => line.split(":"));
  for (const name of ["postgres", "nobody"]) {
    const entry = entries.find(([each]) => each === name);
    if (entry) return { name, uid: Number(entry[2]), gid: Number(entry[3]) };
  }
  throw new StartError("PostgreSQL refuses to run as root, and this machine has neither an account postgres nor nobody. Start Tufa as an ordinary user.");
}

/** Whether the account may pass through every folder down to this one. */
export function isReachable(folder, account) {
  if (!account) return true;
  for (let at = folder; ; at = path.dirname(at)) {
    const { mode, uid, gid } = statSync(at);
    const bit = uid === account.uid ? 0o100 : gid === account.gid ? 0o010 : 0o001;
    if (!(mode & bit)) return false;
    if (at === path.dirname(at)) return true;
  }
}

export function giveTo(file, account) {
  if (account) chownSync(file, account.uid, account.gid);
}
