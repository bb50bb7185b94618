/**
 * `npm test`: lint, types, one build, and every suite on a throw-away PostgreSQL and a running product of its own; the last line is
 * `N passed, N failed`. Built-ins alone until packages are there. Whatever happens, nothing that was started stays.
 */
import { spawn } from "node:child_process";
import { once } from "node:events";
import { existsSync, mkdirSync, readFileSync, rmSync } from "node:fs";
import path from "node:path";
import { captured, endCaptured } from "../jobs/launcher/captured.mjs";
import { openCluster } from "../jobs/launcher/cluster.mjs";
import { ensurePackages } from "../jobs/launcher/packages.mjs";
import { aptInstall } from "../jobs/launcher/postgres-programs.mjs";
import { pause, say, StartError } from "../jobs/launcher/say.mjs";
import { ROOT } from "../jobs/launcher/settings.mjs";
import { makeDataDir, productEnv, removeDataDir, serverUrl, startProduct } from "./helpers/start-product.mjs";

/** Programs that the suites drive, with Debian's package for each. */
const PROGRAMS = [
  { names: ["chromium", "chromium-browser", "google-chrome"], debian: "chromium", what: "Chromium, for the browser tests" },
  { names: ["python3"], debian: "python3", what: "Python 3, for the README's examples" },
  { names: ["curl"], debian: "curl", what: "curl, for the README's examples" },
];
const SUITES_IN_PROCESS = ["unit", "screen", "property", "outside", "integration", "api"];
const SUITES_OVER_HTTP = ["product", "e2e"];

const total = { passed: 0, failed: 0 };
let dataDir = null;
let cluster = null;
let product = null;
let vitest = null;
let isLeaving = false;

function count(name, isPassed, output = "") {
  total[isPassed ? "passed" : "failed"]++;
  say(`${isPassed ? "✓" : "✗"} ${name}`);
  if (!isPassed && output) say(output.trim());
}

const isThere = ({ names }) => names.some((name) => (process.env.PATH ?? "").split(path.delimiter).some((folder) => existsSync(path.join(folder, name))));

async function ensurePrograms() {
  const missing = PROGRAMS.filter((each) => !isThere(each));
  if (missing.length === 0) return;
  if (process.getuid?.() === 0 && existsSync("/etc/debian_version")) {
    say(`Installing ${missing.map(({ debian }) => debian).join(", ")} with apt-get …`);
    await aptInstall(...missing.map(({ debian }) => debian));
  }
  const still = missing.filter((each) => !isThere(each));
  if (still.length > 0) throw new StartError(`Missing: ${still.map(({ what }) => what).join("; ")}. On Debian: apt-get install ${still.map(({ debian }) => debian).join(" ")}`);
}

async function lintAndTypes() {
  const bin = (name) => path.join(ROOT, "node_modules/.bin", name);
  const types = async () => {
    const generated = await captured(bin("next"), ["typegen"], { NEXT_TELEMETRY_DISABLED: "1" });
    return generated.code === 0 ? captured(bin("tsc"), ["--noEmit", "-p", "tsconfig.check.json"]) : generated;
  };
  const [lint, checked] = await Promise.all([captured(bin("eslint"), [".", "--max-warnings", "0"]), types()]);
  count("lint", lint.code === 0, lint.output);
  count("types", checked.code === 0, checked.output);
}

/** Between two steps: once everything is being taken down, nothing more is begun; the process ends from there. */
const unlessLeaving = () => (isLeaving ? new Promise(() => {}) : undefined);

/** Runs suites by vitest and adds up what its report says. */
async function runSuites(suites, env) {
  // What tests leave there when they are broken off goes with the data folder.
  const temporary = path.join(dataDir, "tmp");
  mkdirSync(temporary, { recursive: true, mode: 0o711 });
  const report = path.join(dataDir, `report-${suites[0]}.json`);
  vitest = spawn(process.execPath, [
    path.join(ROOT, "node_modules/vitest/vitest.mjs"), "run", ...suites.flatMap((name) => ["--project", name]), "--reporter=default", "--reporter=json", `--outputFile.json=${report}`,
  // A group of its own, so that its workers and what they have started can be ended together.
  ], { cwd: ROOT, stdio: ["ignore", "inherit", "inherit"], env: { ...process.env, ...env, TMPDIR: temporary }, detached: true });
  const [code] = await once(vitest, "exit");
  vitest = null;
  await unlessLeaving();
  const results = existsSync(report) ? JSON.parse(readFileSync(report, "utf8")) : null;
  rmSync(report, { force: true });
  const passed = results?.numPassedTests ?? 0;
  // A file that cannot be loaded, or whose preparation fails, has no failed test and must count all the same.
  const broken = (results?.testResults ?? []).filter((file) => file.status === "failed" && !file.assertionResults.some((test) => test.status === "failed"));
  const failed = (results?.numFailedTests ?? 0) + broken.length;
  total.passed += passed;
  total.failed += failed > 0 || (code === 0 && passed > 0) ? failed : 1;
  for (const { name } of broken) say(`✗ ${path.relative(ROOT, name)}: could not be run`);
}

async function runAll() {
  const started = Date.now();
  const step = (name) => say(`\n── ${name} (${Math.round((Date.now() - started) / 1000)} s)`);
  dataDir = makeDataDir();
  step("packages and programs");
  await ensurePackages();
  await ensurePrograms();
  step("lint and types");
  await lintAndTypes();
  await unlessLeaving();
  step("database, build and product");
  cluster = await openCluster(dataDir, { isThrowaway: true });
  product = await startProduct({ dataDir, onLine: (line) => say(`  ${line}`) }).catch((error) => { count("the product starts", false, error.message); return null; });
  await unlessLeaving();
  step(SUITES_IN_PROCESS.join(", "));
  await runSuites(SUITES_IN_PROCESS, { TUFA_TEST_SERVER: serverUrl(dataDir), TUFA_LOG: "warn" });
  if (!product) return;
  step(SUITES_OVER_HTTP.join(", "));
  await runSuites(SUITES_OVER_HTTP, { ...productEnv(dataDir, product.address), TUFA_LOG: "warn" });
  step("end");
  const code = await product.stop();
  count("the product stops cleanly", code === 0, product.output());
  product = null;
}

/** Takes everything down again, also in the middle of anything. */
async function leave() {
  isLeaving = true;
  endCaptured();
  if (vitest) await endGroup(vitest);
  await product?.stop();
  await cluster?.close();
  if (dataDir) removeDataDir(dataDir);
}

/** Ends vitest with all that its tests have started: products among them take down their own databases, for which they get time. */
async function endGroup({ pid }) {
  const send = (name) => {
    try {
      process.kill(-pid, name);
      return true;
    } catch {
      return false; // all gone
    }
  };
  send("SIGTERM");
  for (const end = Date.now() + 20_000; send(0) && Date.now() < end;) await pause(100);
  send("SIGKILL");
}

for (const name of ["SIGINT", "SIGTERM", "SIGHUP"]) {
  process.on(name, () => {
    if (isLeaving) process.exit(130);
    say("\nStopping …");
    void leave().finally(() => process.exit(130));
  });
}

try {
  await runAll();
} catch (error) {
  if (!isLeaving) count("the run", false, error instanceof StartError ? error.message : (error?.stack ?? String(error)));
}
if (!isLeaving) {
  await leave().catch((error) => count("the end of the run", false, String(error)));
  say(`\n${total.passed} passed, ${total.failed} failed`);
  process.exit(total.failed > 0 ? 1 : 0);
}
