/** Makes the embedded cluster: own account, own random password, no trust for anybody. */
import { spawn } from "node:child_process";
import { randomBytes } from "node:crypto";
import { chmodSync, existsSync, mkdirSync, mkdtempSync, readdirSync, renameSync, rmSync, writeFileSync } from "node:fs";
import path from "node:path";
import { databaseAccount, giveTo, isReachable } from "./account.mjs";
import { ensurePrograms } from "./postgres-programs.mjs";
import { say, StartError } from "./say.mjs";

export const DATABASE_USER = "tufa";

/** PostgreSQL's own variables in the user's environment must not reach it, nor may the user's folder, which it may not enter. */
export function spawnAs(account, program, args, stdio) {
  const identity = account ? { uid: account.uid, gid: account.gid } : {};
  return spawn(program, args, { ...identity, cwd: "/", env: { PATH: process.env.PATH ?? "/usr/bin:/bin", LC_ALL: "C" }, detached: true, stdio });
}

/**
 * Makes a cluster and returns what database.json keeps: { folder, password }. It stands in the data folder unless the account it runs
 * under may not reach that (a clone below /root), then in a new folder of /var/tmp.
 */
export async function makeCluster(dataDir, { isThrowaway }) {
  const account = databaseAccount();
  const programs = await ensurePrograms();
  const home = isReachable(dataDir, account) ? dataDir : mkdtempSync("/var/tmp/tufa-");
  if (home !== dataDir) {
    chmodSync(home, 0o711);
    say(`PostgreSQL's account cannot enter ${dataDir}: its files go to ${home}`);
  }
  const folder = path.join(home, "cluster");
  if (existsSync(folder)) throw new StartError(`${folder} is there, but not the file database.json that belongs to it. Move both away, or name another TUFA_DATA_DIR.`);
  for (const name of readdirSync(home)) if (name.startsWith("cluster.new-")) rmSync(path.join(home, name), { recursive: true });
  say("Making a PostgreSQL cluster …");
  // Under another name until it is whole: an initdb that was cut off must not be taken for a cluster.
  const draft = path.join(home, `cluster.new-${randomBytes(4).toString("hex")}`);
  const passwordFile = `${draft}.password`;
  const password = randomBytes(24).toString("base64url");
  mkdirSync(draft, { mode: 0o700 });
  giveTo(draft, account);
  try {
    writeFileSync(passwordFile, `${password}\n`, { mode: 0o600 });
    giveTo(passwordFile, account);
    await runInitdb(account, path.join(programs, "initdb"), [
      "-D", draft, "-U", DATABASE_USER, "--auth=scram-sha-256", `--pwfile=${passwordFile}`, "--encoding=UTF8", "--locale=C", ...(isThrowaway ? ["--no-sync"] : []),
    ]);
    renameSync(draft, folder);
  } finally {
    rmSync(passwordFile, { force: true });
    rmSync(draft, { recursive: true, force: true });
  }
  return { folder, password };
}

async function runInitdb(account, program, args) {
  const child = spawnAs(account, program, args, ["ignore", "pipe", "pipe"]);
  let output = "";
  for (const stream of [child.stdout, child.stderr]) stream.on("data", (data) => { output += data; });
  const code = await new Promise((resolve, reject) => { child.once("error", reject); child.once("close", resolve); });
  if (code !== 0) throw new StartError(`initdb failed:\n${output.trim().split("\n").slice(-10).join("\n")}`);
}
