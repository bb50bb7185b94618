/** Packages from the lock file, installed once for each state of the lock file. */
import { createHash } from "node:crypto";
import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { captured } from "./captured.mjs";
import { readIfThere, readJson } from "./files.mjs";
import { say, StartError } from "./say.mjs";
import { ROOT } from "./settings.mjs";

const STAMP = path.join(ROOT, "node_modules/.tufa-lock");

/** Whether npm itself has put everything there that the lock file names: somebody may have run `npm ci` by hand. */
function isInstalled(lock) {
  const there = readJson(path.join(ROOT, "node_modules/.package-lock.json"))?.packages;
  if (!there) return false;
  return Object.entries(lock.packages).every(([where, wanted]) => where === "" || wanted.optional || wanted.peer || there[where]?.version === wanted.version);
}

export async function ensurePackages() {
  const text = readFileSync(path.join(ROOT, "package-lock.json"), "utf8");
  const hash = createHash("sha256").update(text).digest("hex");
  if (readIfThere(STAMP)?.trim() === hash) return;
  if (!isInstalled(JSON.parse(text))) {
    say("Installing packages from the lock file (a minute or two) …");
    // The whole set, also where NODE_ENV=production stands in the environment: the build needs it.
    const { code, output } = await captured("npm", ["ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel", "error"]);
    if (code !== 0) throw new StartError(`npm ci failed:\n${output.trim().split("\n").slice(-15).join("\n")}`);
  }
  writeFileSync(STAMP, `${hash}\n`);
}
