/** The launcher's reading of the environment. lib/env.ts reads the same names for everything that the launcher starts. */
import path from "node:path";
import { StartError } from "./say.mjs";

export const ROOT = path.resolve(import.meta.dirname, "../..");
const OLDEST_NODE = [20, 11];

const valueOf = (name) => process.env[name]?.trim() || undefined;

function wholeNumber(name, fallback, low, high) {
  const text = valueOf(name);
  if (text === undefined) return fallback;
  const number = Number(text);
  if (!Number.isInteger(number) || number < low || number > high) throw new StartError(`${name}=${text}: write a whole number from ${low} to ${high}.`);
  return number;
}

export const isLoopback = (host) => host === "localhost" || host === "::1" || /^127\./.test(host);

/** Settings of a start, checked before anything is installed or started. */
export function readSettings() {
  const [major, minor] = process.versions.node.split(".").map(Number);
  if (major < OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor < OLDEST_NODE[1])) {
    throw new StartError(`Node ${process.versions.node} is too old: Tufa wants ${OLDEST_NODE.join(".")} or later.`);
  }
  const host = valueOf("HOST") ?? "127.0.0.1";
  const port = wholeNumber("PORT", 3000, 1, 65_535);
  const publicUrl = valueOf("TUFA_PUBLIC_URL");
  if (!isLoopback(host) && !publicUrl) {
    throw new StartError(`HOST=${host} puts Tufa on the network: say under which address browsers reach it, e.g. TUFA_PUBLIC_URL=https://tufa.lab.example`);
  }
  return {
    host, port, publicUrl,
    dataDir: path.resolve(ROOT, valueOf("TUFA_DATA_DIR") ?? ".data"),
    databaseUrl: valueOf("DATABASE_URL"),
    workers: wholeNumber("WORKERS", 1, 1, 256),
    distDir: valueOf("TUFA_DIST_DIR") ?? ".next",
    // The last lines of a start are for people: the address and the accounts, not the workers' greetings.
    log: valueOf("TUFA_LOG") ?? "warn",
    isDev: process.argv.includes("--dev"),
  };
}

/** Address at which this machine reaches the server; a wildcard host answers on loopback too. */
export function localAddress({ host, port }) {
  const name = host === "0.0.0.0" || host === "::" ? "127.0.0.1" : host.includes(":") ? `[${host}]` : host;
  return `http://${name}:${port}`;
}
