/** `npm start` as a whole: what it starts, what it leaves, and how it comes back from a kill. */
import { spawn, spawnSync } from "node:child_process";
import { once } from "node:events";
import { readdirSync, statSync } from "node:fs";
import net from "node:net";
import path from "node:path";
import pg from "pg";
import { afterAll, afterEach, describe, expect, it } from "vitest";
import { readIfThere, readJson } from "@/jobs/launcher/files.mjs";
import { commandLine, isAlive, untilGone } from "@/jobs/launcher/processes.mjs";
import { clusterUrl } from "@/jobs/launcher/cluster.mjs";
import { until } from "../helpers/queue-jobs";
import { PROJECT_ROOT } from "../helpers/running-server";
import { makeDataDir, removeDataDir, startProduct } from "../helpers/start-product.mjs";

type Product = Awaited<ReturnType<typeof startProduct>>;
/** The first start of a run may have to build; every other is timed. */
const START_MS = 420_000;
const dataDir = makeDataDir();
let product: Product | null = null;

afterEach(async () => { await product?.stop(); product = null; });
afterAll(() => removeDataDir(dataDir));

const start = async (env: Record<string, string> = {}) => (product = await startProduct({ dataDir, env }));
const clusterFolder = (): string => readJson(path.join(dataDir, "database.json")).folder;
const postmaster = (): number => Number(readIfThere(path.join(clusterFolder(), "postmaster.pid"))?.split("\n")[0]);
const children = (): number[] => readJson(path.join(dataDir, "running.json")).children;
const isHealthy = async () => (await fetch(`${product!.address}/api/v1/health`).catch(() => null))?.ok;
const ended = (pid: number) => untilGone(pid, 10_000);

async function count(table: string): Promise<number> {
  const client = new pg.Client(clusterUrl(dataDir));
  await client.connect();
  const { rows } = await client.query(`select count(*)::int as n from ${table}`);
  await client.end();
  return rows[0].n;
}

describe.sequential("npm start", () => {
  it("serves a seeded product and says where it is and who may sign in, last of all", async () => {
    await start();
    expect(await isHealthy()).toBe(true);
    expect(await count("app_user")).toBe(3);
    const last = product!.output().trim().split("\n").slice(-5);
    expect(last[0]).toBe(`Tufa is at ${product!.address}`);
    expect(last[3]).toContain("tom.okoro@sallowmere.example");
    expect(last[3]).toContain("quarry otter compass");
    expect(children()).toHaveLength(3);
    expect(children().map(commandLine).filter((line) => line.includes("worker.mjs --lane"))).toHaveLength(2);
  }, START_MS);

  it("keeps its secrets to its own account, and its database to this machine and its password", async () => {
    await start();
    for (const name of ["database.json", "session-secret"]) expect(statSync(path.join(dataDir, name)).mode & 0o077).toBe(0);
    expect(statSync(clusterFolder()).mode & 0o077).toBe(0);
    expect(readdirSync(clusterFolder())).not.toContain("database.password");
    const wrong = Object.assign(new URL(clusterUrl(dataDir)), { password: "guessed" });
    await expect(new pg.Client(wrong.href).connect()).rejects.toThrow(/password authentication failed/);
    const client = new pg.Client(clusterUrl(dataDir));
    await client.connect();
    const { rows } = await client.query("select current_setting('listen_addresses') as listens, current_setting('unix_socket_directories') as sockets");
    await client.end();
    expect(rows[0]).toEqual({ listens: "127.0.0.1", sockets: "" });
  }, 60_000);

  it("is quick the second time, seeds nothing again, and leaves no process when it is told to stop", async () => {
    await start();
    expect(product!.tookMs).toBeLessThan(6000);
    expect(await count("app_user")).toBe(3);
    const pids = [...children(), postmaster(), product!.pid!];
    expect(pids.every(isAlive)).toBe(true);
    const asked = Date.now();
    expect(await product!.stop("SIGTERM")).toBe(0);
    expect(Date.now() - asked).toBeLessThan(10_000);
    expect(pids.filter(isAlive)).toEqual([]);
    expect(readdirSync(path.join(dataDir, "users"))).toEqual([]);
  }, 60_000);

  it("ends at a terminal's Ctrl-C, which reaches every process of it at once, without starting any again", async () => {
    const { pid, port, output } = await start();
    // A request that never ends holds the web server, so that the workers are gone long before it is their turn.
    const slow = net.connect(port, "127.0.0.1", () => slow.write("POST /api/v1/solve HTTP/1.1\r\nHost: x\r\nContent-Length: 9\r\n\r\n"));
    slow.on("error", () => {});
    await once(slow, "connect");
    const pids = [...children(), postmaster(), pid!];
    for (const each of [...children(), pid!]) process.kill(each, "SIGINT");
    await ended(pid!);
    slow.destroy();
    expect(pids.filter(isAlive)).toEqual([]);
    expect(output()).toContain("Stopping …");
    expect(output()).not.toContain("starting it again");
  }, 60_000);

  it("comes back after every process of it was killed with SIGKILL, over a stale postmaster.pid", async () => {
    await start();
    const pids = [product!.pid!, ...children(), postmaster()];
    for (const pid of pids) process.kill(pid, "SIGKILL");
    for (const pid of pids) await ended(pid);
    expect(readdirSync(clusterFolder())).toContain("postmaster.pid");
    await start();
    expect(await isHealthy()).toBe(true);
    expect(await count("app_user")).toBe(3);
  }, 60_000);

  it("ends what a killed launcher has left and takes its place at the same port", async () => {
    const first = await start();
    const orphans = children();
    process.kill(first.pid!, "SIGKILL");
    await ended(first.pid!);
    product = await startProduct({ dataDir, port: first.port });
    for (const pid of orphans) expect(isAlive(pid)).toBe(false);
    expect(await isHealthy()).toBe(true);
  }, 60_000);

  it("starts a process that died again within a second or two, the database too", async () => {
    await start();
    const [web] = children();
    process.kill(web, "SIGKILL");
    await until("another web server", async () => !children().includes(web) && isHealthy(), 5000);
    const database = postmaster();
    process.kill(database, "SIGKILL");
    await until("another database", async () => postmaster() > 0 && postmaster() !== database && isHealthy(), 15_000);
  }, 60_000);

  it("says so where its port is taken or its folder in use, and stops what it had started", async () => {
    await start();
    const other = makeDataDir();
    const attempt = (env: Record<string, string>) => spawnSync(process.execPath, ["jobs/start.mjs"], { cwd: PROJECT_ROOT, encoding: "utf8", env: { ...process.env, DATABASE_URL: "", ...env } });
    const taken = attempt({ TUFA_DATA_DIR: other, PORT: String(product!.port) });
    expect(taken.status).toBe(1);
    expect(taken.stdout).toContain(`Port ${product!.port} of 127.0.0.1 is taken`);
    expect(taken.stdout).toContain(`PORT=${product!.port + 1} npm start`);
    const twice = attempt({ TUFA_DATA_DIR: dataDir, PORT: String(product!.port + 1) });
    expect(twice.status).toBe(1);
    expect(twice.stdout).toContain(`already: ${product!.address}`);
    const network = attempt({ TUFA_DATA_DIR: other, HOST: "0.0.0.0", PORT: String(product!.port + 1) });
    expect(network.stdout).toContain("TUFA_PUBLIC_URL");
    expect(await isHealthy()).toBe(true);
    removeDataDir(other);
  }, 60_000);

  it("keeps demo accounts off the network", async () => {
    const { status, stdout } = spawnSync(process.execPath, ["jobs/start.mjs"], {
      cwd: PROJECT_ROOT, encoding: "utf8", env: { ...process.env, DATABASE_URL: "", TUFA_DATA_DIR: dataDir, HOST: "0.0.0.0", PORT: "3999", TUFA_PUBLIC_URL: "https://tufa.sallowmere.example" },
    });
    expect(status).toBe(1);
    expect(stdout).toContain("passwords everybody knows");
  });

  it("two side by side do not clash, and one that is stopped while it starts leaves nothing", async () => {
    await start();
    const other = makeDataDir();
    const second = await startProduct({ dataDir: other });
    expect(await isHealthy()).toBe(true);
    expect((await fetch(`${second.address}/api/v1/health`)).ok).toBe(true);
    expect(new URL(clusterUrl(other)).port).not.toBe(new URL(clusterUrl(dataDir)).port);
    await second.stop();
    const hasty = spawn(process.execPath, ["jobs/start.mjs"], { cwd: PROJECT_ROOT, stdio: ["ignore", "pipe", "inherit"], env: { ...process.env, DATABASE_URL: "", TUFA_DATA_DIR: other, PORT: String(second.port) } });
    await new Promise<void>((resolve) => { hasty.stdout.on("data", (data) => { if (String(data).includes("Starting PostgreSQL")) resolve(); }); });
    hasty.kill("SIGTERM");
    await ended(hasty.pid!);
    expect(readdirSync(readJson(path.join(other, "database.json")).folder)).not.toContain("postmaster.pid");
    removeDataDir(other);
  }, 60_000);
});
