/**
 * Bundles everything that runs outside Next into .build/: the worker process, its threads, the web process's threads
 * and the commands behind npm run. Own code is bundled, packages stay external. Takes well under a second.
 */
import { existsSync, readdirSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { build, context } from "esbuild";

const root = path.resolve(import.meta.dirname, "..");

/** `jobs/worker.ts`, every `jobs/threads/*-thread.ts` and every file in `jobs/commands/`, `db/commands/`. */
export function entryPoints() {
  const files = (folder, suffix) => (existsSync(path.join(root, folder)) ? readdirSync(path.join(root, folder)) : [])
    .filter((name) => name.endsWith(suffix)).map((name) => path.join(root, folder, name));
  return [path.join(root, "jobs/worker.ts"), ...files("jobs/threads", "-thread.ts"), ...files("jobs/commands", ".ts"), ...files("db/commands", ".ts")];
}

/**
 * @param {{ outdir?: string, only?: string[], alias?: Record<string, string> }} options for tests: `only` names the
 * entries to build, `alias` puts stand-ins in the place of modules
 */
export async function buildJobs(options = {}) {
  await build(buildOptions(options));
}

/** Builds into .build/ again whenever a source changes, and says so each time after the first. */
export async function watchJobs(onRebuilt) {
  let builds = 0;
  const plugin = { name: "rebuilt", setup(builder) { builder.onEnd(({ errors }) => { if (errors.length === 0 && builds++ > 0) onRebuilt(); }); } };
  const options = buildOptions({});
  await (await context({ ...options, plugins: [...options.plugins, plugin] })).watch();
}

function buildOptions({ outdir = path.join(root, ".build"), only = undefined, alias = {} }) {
  const standIns = {
    name: "stand-ins",
    setup(builder) {
      for (const [name, file] of Object.entries(alias)) {
        builder.onResolve({ filter: new RegExp(`^${name.replaceAll(/[/.]/g, "\\$&")}$`) }, () => ({ path: file }));
      }
    },
  };
  return {
    entryPoints: entryPoints().filter((entry) => !only || only.includes(path.basename(entry, ".ts"))), outdir, outExtension: { ".js": ".mjs" }, entryNames: "[name]",
    bundle: true, platform: "node", target: "node20", format: "esm", packages: "external", sourcemap: true,
    absWorkingDir: root, tsconfig: path.join(root, "tsconfig.json"), logLevel: "warning", plugins: [standIns],
  };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await buildJobs();
