/**
 * `node jobs/command.mjs NAME …`: a command of jobs/commands/, or `worker`, on the database that `npm start` would use. The embedded one is
 * started where it is down, and stopped afterwards. stdout is the command's own; progress goes to stderr.
 */
import { spawn } from "node:child_process";
import { constants } from "node:os";
import path from "node:path";
import { buildBundles } from "./launcher/build-product.mjs";
import { hasCluster } from "./launcher/cluster.mjs";
import { openDatabase } from "./launcher/database.mjs";
import { runningInstance } from "./launcher/instance.mjs";
import { ensurePackages } from "./launcher/packages.mjs";
import { say, sayOnStderr, StartError } from "./launcher/say.mjs";
import { sessionSecret } from "./launcher/secret.mjs";
import { localAddress, readSettings, ROOT } from "./launcher/settings.mjs";

sayOnStderr();
const [name, ...args] = process.argv.slice(2);
let child = null;
let gotSignal = null;
// A terminal's Ctrl-C reaches the child by itself; it ends, and then so does this.
for (const each of ["SIGINT", "SIGTERM", "SIGHUP"]) process.on(each, () => { gotSignal = each; child?.kill(each); });

async function main() {
  const settings = readSettings();
  await ensurePackages();
  if (!settings.databaseUrl && name !== "migrate" && !hasCluster(settings.dataDir)) {
    throw new StartError(`There is no database in ${settings.dataDir} yet: run npm start first, or set DATABASE_URL.`);
  }
  await buildBundles();
  const database = await openDatabase(settings);
  try {
    // Links in what a command prints must lead to the product as it runs now.
    const publicUrl = settings.publicUrl ?? runningInstance(settings.dataDir)?.address ?? localAddress(settings);
    const env = {
      ...process.env, DATABASE_URL: database.url, TUFA_DATABASE: database.kind, TUFA_DATA_DIR: settings.dataDir,
      TUFA_PUBLIC_URL: publicUrl, NEXTAUTH_SECRET: sessionSecret(settings.dataDir), NODE_ENV: "production",
    };
    child = spawn(process.execPath, [path.join(ROOT, `.build/${name}.mjs`), ...args], { cwd: ROOT, env, stdio: "inherit" });
    if (gotSignal) child.kill(gotSignal);
    return await new Promise((resolve, reject) => {
      child.once("error", reject);
      child.once("exit", (code, by) => resolve(code ?? 128 + constants.signals[by]));
    });
  } finally {
    await database.close();
  }
}

main().then((code) => { process.exitCode = code; }, (error) => {
  say(error instanceof StartError ? error.message : (error?.stack ?? String(error)));
  process.exitCode = 1;
});
