/** Starts the product as a user does, by jobs/start.mjs, on a data folder and a port of its own. Built-ins only: `npm test` uses it too. */
import { spawn } from "node:child_process";
import { once } from "node:events";
import { chmodSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import os from "node:os";
import path from "node:path";
import { clusterUrl } from "../../jobs/launcher/cluster.mjs";
import { readJson } from "../../jobs/launcher/files.mjs";
import { freePort } from "../../jobs/launcher/ports.mjs";
import { ROOT } from "../../jobs/launcher/settings.mjs";

const FIRST_PORT = 3900;

/** A data folder that the database's account may pass through. */
export function makeDataDir() {
  const dataDir = mkdtempSync(path.join(os.tmpdir(), "tufa-test-"));
  chmodSync(dataDir, 0o711);
  return dataDir;
}

/** Removes a data folder and its cluster, which may stand elsewhere. */
export function removeDataDir(dataDir) {
  const cluster = readJson(path.join(dataDir, "database.json"))?.folder;
  if (cluster) rmSync(cluster.startsWith(dataDir) ? cluster : path.dirname(cluster), { recursive: true, force: true });
  rmSync(dataDir, { recursive: true, force: true });
}

/** What tests need to meet a product and its database (use-product-database.ts). */
export const productEnv = (dataDir, address) => ({
  TUFA_TEST_URL: address, TUFA_TEST_PRODUCT_DATABASE: clusterUrl(dataDir), TUFA_TEST_PRODUCT_SECRET: readFileSync(path.join(dataDir, "session-secret"), "utf8").trim(), TUFA_DATA_DIR: dataDir,
});

/** URL of the cluster of a data folder, for making databases in it. */
export const serverUrl = (dataDir) => Object.assign(new URL(clusterUrl(dataDir)), { pathname: "/postgres" }).href;

/**
 * @param {{ dataDir: string, port?: number, env?: Record<string, string | undefined>, onLine?: (line: string) => void, timeoutMs?: number }} options
 * @returns {Promise<{ pid: number, address: string, port: number, tookMs: number, output: () => string, stop: (signal?: NodeJS.Signals) => Promise<number | string | null> }>}
 */
export async function startProduct({ dataDir, port, env = {}, onLine = () => {}, timeoutMs = 420_000 }) {
  const chosen = port ?? (await freePort(FIRST_PORT + Math.floor(Math.random() * 500)));
  const started = Date.now();
  const child = spawn(process.execPath, [path.join(ROOT, "jobs/start.mjs")], {
    cwd: ROOT, stdio: ["ignore", "pipe", "pipe"],
    // Undefined values are left out by spawn: what the surrounding test run has set must not steer the product.
    env: { ...process.env, DATABASE_URL: undefined, NEXTAUTH_SECRET: undefined, NEXTAUTH_URL: undefined, TUFA_PUBLIC_URL: undefined, NODE_ENV: undefined, HOST: undefined, TUFA_LOG: "warn", TUFA_DATA_DIR: dataDir, PORT: String(chosen), ...env },
  });
  let output = "";
  const stop = async (signal = "SIGTERM") => {
    if (child.exitCode === null && child.signalCode === null) {
      child.kill(signal);
      await once(child, "exit");
    }
    return child.exitCode ?? child.signalCode;
  };
  const address = `http://127.0.0.1:${chosen}`;
  let timer;
  try {
    await new Promise((resolve, reject) => {
      timer = setTimeout(() => reject(new Error(`the product has not started within ${timeoutMs} ms: ${output}`)), timeoutMs);
      for (const stream of [child.stdout, child.stderr]) {
        stream.on("data", (data) => {
          output += data;
          String(data).split("\n").filter(Boolean).forEach(onLine);
          // The last line that a start prints stands with or below the address.
          if (/^(Tufa is at .*\n(Demo accounts:\n( {2}.*\n){3}|The first administrator))/m.test(output)) resolve();
        });
      }
      child.once("close", (code, by) => reject(new Error(`the product ended (${code ?? by}) instead of starting:\n${output}`)));
    });
  } catch (error) {
    await stop();
    throw error;
  } finally {
    clearTimeout(timer);
  }
  return { pid: child.pid, address, port: chosen, tookMs: Date.now() - started, output: () => output, stop };
}
