import { randomBytes } from "node:crypto";
import path from "node:path";
import { readIfThere, writePrivate } from "./files.mjs";

/** The key of the sessions: made once and kept in the data folder, unless the environment names one. */
export function sessionSecret(dataDir) {
  if (process.env.NEXTAUTH_SECRET) return process.env.NEXTAUTH_SECRET;
  const file = path.join(dataDir, "session-secret");
  const kept = readIfThere(file)?.trim();
  if (kept) return kept;
  const made = randomBytes(32).toString("base64url");
  writePrivate(file, `${made}\n`);
  return made;
}
