/**
 * `npm start`: from a fresh clone to a running product. Until packages are installed there is nothing but Node, so this file and
 * jobs/launcher/ import built-ins alone (what needs a package is imported when it is there).
 */
import { readFileSync } from "node:fs";
import os from "node:os";
import path from "node:path";
import { buildBundles, buildProduct } from "./launcher/build-product.mjs";
import { endCaptured } from "./launcher/captured.mjs";
import { openDatabase, prepareDatabase, refuseDemoOnNetwork } from "./launcher/database.mjs";
import { leaveInstance, noteChildren, takeInstance } from "./launcher/instance.mjs";
import { ensurePackages } from "./launcher/packages.mjs";
import { isFree } from "./launcher/ports.mjs";
import { pause, say, StartError } from "./launcher/say.mjs";
import { sessionSecret } from "./launcher/secret.mjs";
import { localAddress, readSettings, ROOT } from "./launcher/settings.mjs";
import { Service } from "./launcher/supervisor.mjs";

/** Web requests in flight are cut off after this; event streams would otherwise hold the server for ever. */
const WEB_STOP_MS = 2000;
/** Workers drain within 8 s and close their connections within another (jobs/worker.ts). */
const WORKER_STOP_MS = 10_000;
const READY_TIMEOUT_MS = 120_000;

/** Promise of the database, so that a stop in the middle of its start waits and takes it down again. */
let opening = null;
let dataDir = null;
let services = [];
let stopping = null;

/** Ends everything in order: web first, so that nobody is promised what workers do no more; the database last. */
async function stop(code, message) {
  stopping ??= (async () => {
    if (message) say(message);
    endCaptured();
    for (const each of services) each.letGo();
    const [web, ...workers] = services;
    await web?.stop();
    await Promise.all(workers.map((each) => each.stop()));
    await (await opening?.catch(() => null))?.close();
    if (dataDir) leaveInstance(dataDir);
    process.exit(code);
  })();
  await stopping;
}

let signals = 0;
function onSignal(name) {
  signals++;
  if (signals === 1) {
    void stop(0, `${name === "SIGINT" ? "\n" : ""}Stopping …`).catch(fail);
    return;
  }
  for (const each of services) each.kill();
  void Promise.resolve(opening).then((database) => database?.close({ isHard: true })).finally(() => process.exit(130));
}

function fail(error) {
  if (stopping) return;
  say(error instanceof StartError ? error.message : (error?.stack ?? String(error)));
  void stop(1).catch(() => process.exit(1));
}

/** glibc keeps a heap for each thread, which result blocks handed between threads swell: two keep a worker's memory flat (measured over 10^6 rows). */
const FEW_ARENAS = { MALLOC_ARENA_MAX: "2" };

function makeServices(settings, env) {
  const onGiveUp = (message) => void stop(1, message).catch(fail);
  const address = localAddress(settings);
  const onChange = () => noteChildren(settings.dataDir, address, services.map((each) => each.pid).filter(Boolean));
  const worker = (name, lane, threads, nice) =>
    new Service({ name, args: [path.join(ROOT, ".build/worker.mjs"), "--lane", lane, "--threads", String(threads)], env: { ...env, ...FEW_ARENAS }, nice, stopMs: WORKER_STOP_MS, onGiveUp, onChange });
  const web = new Service({
    // Next's banner would stand below the last lines of a start; what goes wrong is on stderr.
    name: "The web server", env, isQuiet: !settings.isDev, stopMs: WEB_STOP_MS, onGiveUp, onChange,
    args: ["node_modules/next/dist/bin/next", settings.isDev ? "dev" : "start", "-H", settings.host, "-p", String(settings.port)],
  });
  const batch = Array.from({ length: settings.workers }, (_, index) => worker(`Batch worker ${index + 1}`, "batch", os.availableParallelism(), 10));
  return [web, worker("The interactive worker", "interactive", 1), ...batch];
}

async function untilAnswering(settings) {
  const address = `${localAddress(settings)}/api/v1/health`;
  for (const end = Date.now() + READY_TIMEOUT_MS; Date.now() < end && !stopping; await pause(50)) {
    const response = await fetch(address).catch(() => null);
    if (response?.ok) return;
  }
  if (!stopping) throw new StartError(`The web server does not answer at ${address}.`);
}

function announce(settings, hasDemo) {
  const lines = ["", `Tufa is at ${settings.publicUrl ?? localAddress(settings)}`];
  if (hasDemo) {
    const people = JSON.parse(readFileSync(path.join(ROOT, "db/demo/people.json"), "utf8"));
    lines.push("Demo accounts:", ...people.map(({ email, role, password }) => `  ${email.padEnd(32)} ${role.padEnd(14)} ${password}`));
  } else {
    lines.push("The first administrator: npm run admin -- --email you@lab.example");
  }
  say(lines.join("\n"));
}

async function main() {
  const settings = readSettings();
  await takeInstance(settings.dataDir, localAddress(settings));
  dataDir = settings.dataDir;
  if (!(await isFree(settings.port, settings.host))) {
    throw new StartError(`Port ${settings.port} of ${settings.host} is taken. Stop what listens there, or choose another: PORT=${settings.port + 1} npm start`);
  }
  refuseDemoOnNetwork(settings);
  await ensurePackages();
  if (stopping) return;
  opening = openDatabase(settings);
  const database = await opening;
  const env = {
    DATABASE_URL: database.url, TUFA_DATABASE: database.kind, TUFA_DATA_DIR: settings.dataDir, NEXTAUTH_SECRET: sessionSecret(settings.dataDir),
    HOST: settings.host, PORT: String(settings.port), TUFA_DIST_DIR: settings.distDir, NEXT_TELEMETRY_DISABLED: "1",
    NODE_ENV: settings.isDev ? "development" : "production", TUFA_LOG: settings.log,
  };
  // The database before the pages: an address or a password that is wrong shows at once, not after the build.
  await buildBundles();
  const { hasDemo } = await prepareDatabase(database, settings, env);
  if (!settings.isDev) await buildProduct(settings.distDir, env);
  if (stopping) return;
  say("Starting web server and workers …");
  services = makeServices(settings, env);
  for (const each of services) each.start();
  database.watch(fail);
  if (settings.isDev) await rebuildOnChange();
  await untilAnswering(settings);
  if (!stopping) announce(settings, hasDemo);
}

/** While developing, workers follow the sources; Next does so by itself. */
async function rebuildOnChange() {
  const { watchJobs } = await import("./build.mjs");
  await watchJobs(() => { for (const each of services.slice(1)) each.restart(); });
}

for (const name of ["SIGINT", "SIGTERM", "SIGHUP"]) process.on(name, () => onSignal(name));
process.on("uncaughtException", fail);
main().catch(fail);
