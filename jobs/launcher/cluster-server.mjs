/** The server process of an embedded cluster: finding it, starting it on a free port of 127.0.0.1, stopping it. */
import { closeSync, openSync, readFileSync, rmSync } from "node:fs";
import path from "node:path";
import { databaseAccount } from "./account.mjs";
import { DATABASE_USER, spawnAs } from "./cluster-init.mjs";
import { readIfThere } from "./files.mjs";
import { freePort } from "./ports.mjs";
import { ensurePrograms } from "./postgres-programs.mjs";
import { commandLine, isAlive, signal, untilGone, workingFolder } from "./processes.mjs";
import { pause, StartError } from "./say.mjs";

const FIRST_PORT = 54_320;
const READY_TIMEOUT_MS = 60_000;
const STOP_TIMEOUT_MS = 20_000;
/** Connections: web pool, event listeners, and a pool for each worker thread on a large machine. */
const MAX_CONNECTIONS = 300;

/** What a cluster's postmaster.pid says, as far as the process is there and is that cluster's; else null. */
export function runningServer(folder) {
  const lines = readIfThere(path.join(folder, "postmaster.pid"))?.split("\n");
  if (!lines) return null;
  const pid = Number(lines[0]);
  if (!(pid > 0) || !isAlive(pid)) return null;
  // Process numbers come round again after a crash: a server works in its own data folder.
  const at = workingFolder(pid);
  const isOurs = at === null ? commandLine(pid).includes("postgres") : at === folder;
  return isOurs ? { pid, port: Number(lines[3]) || null, isReady: lines[7]?.trim() === "ready" } : null;
}

/** Starts a cluster's server and waits until it takes connections; returns its port. Leaves none running when it fails. */
export async function startServer(folder, { preferredPort, logFile, isThrowaway }) {
  const programs = await ensurePrograms(Number(readFileSync(path.join(folder, "PG_VERSION"), "utf8")));
  let first = preferredPort ?? FIRST_PORT;
  for (let attempt = 0; ; attempt++) {
    // Left behind by a kill -9; PostgreSQL itself refuses where another process of its account has got the number since.
    if (!runningServer(folder)) rmSync(path.join(folder, "postmaster.pid"), { force: true });
    const port = await freePort(first);
    const failure = await tryStart(folder, programs, port, { logFile, isThrowaway });
    if (!failure) return port;
    const isPortTaken = /could not bind|could not create any TCP\/IP sockets/.test(failure);
    // Backends of a killed server hold its shared memory for a moment.
    const isStillDying = /pre-existing shared memory block|lock file "postmaster.pid" already exists/.test(failure);
    if (attempt >= 20 || (!isPortTaken && !isStillDying)) throw new StartError(`PostgreSQL does not start; ${logFile} says:\n${failure}`);
    if (isPortTaken) first = port + 1;
    else await pause(500);
  }
}

/** Null when the server is up, else the end of its log. */
async function tryStart(folder, programs, port, { logFile, isThrowaway }) {
  const log = openSync(logFile, "w", 0o600);
  const risky = isThrowaway ? ["-c", "fsync=off", "-c", "synchronous_commit=off", "-c", "full_page_writes=off"] : [];
  const child = spawnAs(databaseAccount(), path.join(programs, "postgres"), [
    "-D", folder, "-p", String(port), "-c", "listen_addresses=127.0.0.1", "-c", "unix_socket_directories=", "-c", `max_connections=${MAX_CONNECTIONS}`, ...risky,
  ], ["ignore", log, log]);
  closeSync(log);
  let isEnded = false;
  let spawnError = null;
  child.once("error", (error) => { spawnError = String(error); isEnded = true; });
  child.once("exit", () => { isEnded = true; });
  try {
    for (const end = Date.now() + READY_TIMEOUT_MS; Date.now() < end && !isEnded; await pause(30)) {
      const server = runningServer(folder);
      if (server?.pid === child.pid && server.isReady) return null;
    }
    if (!isEnded) {
      signal(child.pid, "SIGQUIT");
      await untilGone(child.pid, STOP_TIMEOUT_MS);
    }
    return spawnError ?? readFileSync(logFile, "utf8").trim().split("\n").slice(-8).join("\n");
  } finally {
    // It outlives whoever started it, where that is a command beside a running product.
    child.unref();
  }
}

/** Makes sure that what answers at a port is this cluster, and that it has the product's database. */
export async function checkServer(folder, url) {
  // Not among the built-ins, but by now the packages are there.
  const { default: pg } = await import("pg");
  const connect = async (database) => {
    const client = new pg.Client({ connectionString: Object.assign(new URL(url), { pathname: `/${database}` }).href, connectionTimeoutMillis: 10_000 });
    client.on("error", () => {});
    await client.connect();
    return client;
  };
  const client = await connect("postgres");
  try {
    const { rows } = await client.query("select current_setting('data_directory') as folder, exists (select from pg_database where datname = $1) as made", [DATABASE_USER]);
    if (rows[0].folder !== folder) throw new StartError(`Another PostgreSQL answers at ${new URL(url).host}: that of ${rows[0].folder}.`);
    if (!rows[0].made) await client.query(`create database ${DATABASE_USER}`);
  } finally {
    await client.end();
  }
}

/** Stops a cluster's server if it runs: at once, but cleanly ("fast"); the hard way after 20 s. */
export async function stopServer(folder, { isHard = false } = {}) {
  const server = runningServer(folder);
  if (!server) return;
  signal(server.pid, isHard ? "SIGQUIT" : "SIGINT");
  if (await untilGone(server.pid, STOP_TIMEOUT_MS)) return;
  signal(server.pid, "SIGQUIT");
  await untilGone(server.pid, 5000);
}
