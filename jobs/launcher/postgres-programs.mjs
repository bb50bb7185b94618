/** Where PostgreSQL's own programs are on this machine; installs them where that can be done without asking. */
import { execFileSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, writeFileSync } from "node:fs";
import path from "node:path";
import { captured } from "./captured.mjs";
import { say, StartError } from "./say.mjs";

const OLDEST = 13;
/** Folder, and the pattern of the name below which bin/ stands. */
const PLACES = [
  ["/usr/lib/postgresql", /^\d+$/], ["/usr", /^pgsql-\d+$/], ["/usr/local", /^pgsql$/], ["/opt/homebrew/opt", /^postgresql/],
  ["/usr/local/opt", /^postgresql/], ["/Library/PostgreSQL", /^\d+$/], ["/Applications/Postgres.app/Contents/Versions", /^\d+$/],
];

function candidates() {
  const inPlaces = PLACES.flatMap(([folder, pattern]) => (existsSync(folder) ? readdirSync(folder) : [])
    .filter((name) => pattern.test(name)).map((name) => path.join(folder, name, "bin")));
  return [...(process.env.PATH ?? "").split(path.delimiter).filter(Boolean), ...inPlaces];
}

function versionIn(folder) {
  if (!["initdb", "postgres"].every((name) => existsSync(path.join(folder, name)))) return null;
  try {
    return Number(/\(PostgreSQL\) (\d+)/.exec(execFileSync(path.join(folder, "postgres"), ["--version"], { encoding: "utf8" }))?.[1]);
  } catch {
    return null;
  }
}

/** Folder of the newest PostgreSQL, or of one major version where a cluster has that; null where there is none. */
export function findPrograms(major) {
  const found = candidates().map((folder) => ({ folder, version: versionIn(folder) }))
    .filter(({ version }) => version && (major ? version === major : version >= OLDEST));
  return found.sort((a, b) => b.version - a.version)[0]?.folder ?? null;
}

const canInstall = () => process.getuid?.() === 0 && existsSync("/etc/debian_version") && existsSync("/usr/bin/apt-get");

/** Installs Debian packages without a question. Throws with what apt-get said. */
export async function aptInstall(...packages) {
  const wait = ["-o", "DPkg::Lock::Timeout=120"];
  const quiet = { DEBIAN_FRONTEND: "noninteractive" };
  await captured("apt-get", [...wait, "-q", "update"], quiet);
  const { code, output } = await captured("apt-get", [...wait, "-qy", "--no-install-recommends", "install", ...packages], quiet);
  if (code !== 0) throw new StartError(`apt-get install ${packages.join(" ")} failed:\n${output.trim().split("\n").slice(-10).join("\n")}`);
}

/** The folder of PostgreSQL's programs, installing them first where they are missing. */
export async function ensurePrograms(major) {
  const found = findPrograms(major);
  if (found) return found;
  if (major) throw new StartError(`The data folder was made by PostgreSQL ${major}, which is not installed any more. Install it, or move the data folder away to start afresh.`);
  if (!canInstall()) {
    throw new StartError(process.platform === "darwin"
      ? "PostgreSQL is missing. Install it with: brew install postgresql@17   (or set DATABASE_URL to a server of your own)"
      : "PostgreSQL is missing. Install its server, on Debian and Ubuntu with: sudo apt-get install postgresql   (or set DATABASE_URL to a server of your own)");
  }
  say("Installing PostgreSQL with apt-get …");
  // Without this Debian would make and start a cluster of its own on port 5432.
  const config = "/etc/postgresql-common/createcluster.conf";
  if (!existsSync(config)) {
    mkdirSync(path.dirname(config), { recursive: true });
    writeFileSync(config, "create_main_cluster = false\n");
  }
  await aptInstall("postgresql");
  const installed = findPrograms();
  if (!installed) throw new StartError("apt-get installed postgresql, yet no initdb is in /usr/lib/postgresql/*/bin.");
  return installed;
}
