/** The database of a start: an outside one by DATABASE_URL, else the embedded one of the data folder. */
import { hasDemo, openCluster, rememberDemo } from "./cluster.mjs";
import { captured } from "./captured.mjs";
import { isLoopback, ROOT } from "./settings.mjs";
import { say, StartError } from "./say.mjs";
import path from "node:path";

const WATCH_MS = 1000;

/**
 * @typedef {object} Database
 * @property {string} url
 * @property {"embedded" | "outside"} kind
 * @property {(onGone: (error: Error) => void) => void} watch brings a server that died back; calls onGone where that fails
 * @property {(how?: { isHard?: boolean }) => Promise<void>} close
 */

/** @returns {Promise<Database>} */
export async function openDatabase({ databaseUrl, dataDir }, options) {
  if (databaseUrl) return { url: databaseUrl, kind: "outside", watch: () => {}, close: async () => {} };
  const cluster = await openCluster(dataDir, options);
  let timer;
  let isBusy = false;
  const look = async (onGone) => {
    if (isBusy || cluster.isRunning()) return;
    isBusy = true;
    try {
      say("PostgreSQL has gone; starting it again");
      const { url } = await openCluster(dataDir, options);
      if (url !== cluster.url) throw new StartError("PostgreSQL came back on another port, as its own was taken; start Tufa again.");
    } catch (error) {
      onGone(error);
    }
    isBusy = false;
  };
  return {
    url: cluster.url, kind: "embedded",
    watch: (onGone) => { timer = setInterval(() => void look(onGone), WATCH_MS); },
    close: async (how) => { clearInterval(timer); await cluster.close(how); },
  };
}

/** The demo's passwords stand in the README, so neither the demo nor a database that has it goes onto a network. */
export function refuseDemoOnNetwork({ databaseUrl, dataDir, host }) {
  if (databaseUrl || isLoopback(host) || !hasDemo(dataDir)) return;
  throw new StartError(`HOST=${host} would put the demo accounts, whose passwords everybody knows, on the network. Name another TUFA_DATA_DIR: off loopback it stays without the demo, and npm run admin makes the first account.`);
}

/** Tables, queues and, into an embedded database on loopback, the demo. */
export async function prepareDatabase(database, { dataDir, host }, env) {
  const withDemo = database.kind === "embedded" && isLoopback(host);
  if (withDemo && !hasDemo(dataDir)) say("Preparing the database and its demo …");
  const { code, output } = await captured(process.execPath, [path.join(ROOT, ".build/migrate.mjs"), ...(withDemo ? ["--demo"] : [])], env);
  if (code !== 0) throw new StartError(`The database cannot be prepared: ${output.trim().split("\n").slice(-10).join("\n")}`);
  if (withDemo && !hasDemo(dataDir)) rememberDemo(dataDir);
  return { hasDemo: withDemo };
}
