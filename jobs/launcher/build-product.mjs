/** Builds what has changed since it was last built: the bundles in .build/ and Next's folder, each with a hash of its sources beside it. */
import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import path from "node:path";
import { readIfThere } from "./files.mjs";
import { captured } from "./captured.mjs";
import { say, StartError } from "./say.mjs";
import { ROOT } from "./settings.mjs";

const FOLDERS = ["app", "components", "db", "jobs", "lib", "openapi", "public"];
const FILES = ["next.config.mjs", "package-lock.json", "postcss.config.mjs", "tailwind.config.ts", "instrumentation.ts"];

/** Hash over names and contents of everything that goes into a build. */
export function sourcesHash() {
  const hash = createHash("sha256").update(process.version);
  const add = (file) => hash.update(`${path.relative(ROOT, file)}\0`).update(readFileSync(file)).update("\0");
  const walk = (folder) => {
    for (const entry of readdirSync(folder, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1))) {
      const at = path.join(folder, entry.name);
      if (entry.isDirectory()) walk(at);
      else add(at);
    }
  };
  for (const folder of FOLDERS) if (existsSync(path.join(ROOT, folder))) walk(path.join(ROOT, folder));
  for (const file of FILES) if (existsSync(path.join(ROOT, file))) add(path.join(ROOT, file));
  return hash.digest("hex");
}

async function once(stamp, hash, body) {
  if (readIfThere(stamp) === hash) return;
  rmSync(stamp, { force: true });
  await body();
  writeFileSync(stamp, hash);
}

/** Workers, threads and commands: under a second. */
export async function buildBundles(hash = sourcesHash()) {
  await once(path.join(ROOT, ".build/sources-hash"), hash, async () => {
    const { buildJobs } = await import("../build.mjs");
    await buildJobs().catch((error) => { throw new StartError(`The workers cannot be built: ${error.message}`); });
  });
}

/** Everything that serving needs. `env` reaches Next's build, which loads the routes to look at them. */
export async function buildProduct(distDir, env) {
  const hash = sourcesHash();
  await buildBundles(hash);
  await once(path.join(ROOT, distDir, "sources-hash"), hash, async () => {
    say("Building the pages (a minute or so, only after changes) …");
    const started = Date.now();
    const { code, output } = await captured(process.execPath, ["node_modules/next/dist/bin/next", "build"], { ...env, NODE_ENV: "production", NEXT_TELEMETRY_DISABLED: "1" });
    if (code !== 0) throw new StartError(`next build failed:\n${output.trim().split("\n").slice(-40).join("\n")}`);
    say(`Built in ${Math.round((Date.now() - started) / 1000)} s`);
  });
}
