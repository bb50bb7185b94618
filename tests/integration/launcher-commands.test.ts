/** The commands beside `npm start`, and a start on somebody's own PostgreSQL. */
import { execFile } from "node:child_process";
import { promisify } from "node:util";
import pg from "pg";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { openCluster } from "@/jobs/launcher/cluster.mjs";
import { runningServer } from "@/jobs/launcher/cluster-server.mjs";
import { randomBase62 } from "@/lib/ids";
import { demoPerson, PROJECT_ROOT } from "../helpers/running-server";
import { makeDataDir, removeDataDir, startProduct } from "../helpers/start-product.mjs";

const run = promisify(execFile);
const dataDir = makeDataDir();
const outsideDir = makeDataDir();
let outsideUrl: string;
let server: pg.Client;
let product: Awaited<ReturnType<typeof startProduct>> | null = null;

/** `npm run …` as a user types it: with npm's own words, had it any. */
const npm = (args: string[], env: Record<string, string>) =>
  run("npm", ["run", ...args], { cwd: PROJECT_ROOT, env: { ...process.env, DATABASE_URL: "", TUFA_LOG: "", ...env } })
    .then(({ stdout, stderr }) => ({ code: 0, stdout, stderr }), (error: { code: number; stdout: string; stderr: string }) => error);

beforeAll(async () => {
  server = new pg.Client(process.env.TUFA_TEST_SERVER);
  await server.connect();
  const name = `t_${randomBase62(10).toLowerCase()}`;
  await server.query(`create database ${name}`);
  outsideUrl = Object.assign(new URL(process.env.TUFA_TEST_SERVER!), { pathname: `/${name}` }).href;
});
// Also where a test broke off before it had stopped what it had started.
afterEach(async () => { await product?.stop(); product = null; });
afterAll(async () => {
  await server.query(`drop database ${new URL(outsideUrl).pathname.slice(1)} with (force)`);
  await server.end();
  removeDataDir(dataDir);
  removeDataDir(outsideDir);
});

async function rows<T extends pg.QueryResultRow>(url: string, text: string): Promise<T[]> {
  const client = new pg.Client(url);
  await client.connect();
  const result = await client.query<T>(text);
  await client.end();
  return result.rows;
}

describe.sequential("npm run token", () => {
  const ask = (...args: string[]) => npm(["token", "--", ...args], { TUFA_DATA_DIR: dataDir });
  const { email } = demoPerson("modeller");

  it("says what to do where there is no database yet", async () => {
    const { code, stdout, stderr } = await ask("--email", email);
    expect([code, stdout]).toEqual([1, ""]);
    expect(stderr).toContain("run npm start first");
  });

  it("prints a token and nothing else, beside a running product and without one, and leaves the database as it found it", async () => {
    product = await startProduct({ dataDir });
    const beside = await ask("--email", email, "--scopes", "all", "--expires", "30d");
    expect(beside.stdout).toMatch(/^tufa_[0-9A-Za-z]{36}\n$/);
    const headers = { authorization: `Bearer ${beside.stdout.trim()}` };
    expect((await fetch(`${product.address}/api/v1/me`, { headers })).status).toBe(200);
    await product.stop();
    const alone = await ask("--email", email.toUpperCase());
    expect(alone.stdout).toMatch(/^tufa_[0-9A-Za-z]{36}\n$/);
    const cluster = await openCluster(dataDir);
    const tokens = await rows<{ scopes: string[] }>(cluster.url, "select scopes from api_token order by created_at");
    await cluster.close();
    expect(tokens.map(({ scopes }) => scopes.length)).toEqual([4, 2]);
    expect(runningServer(cluster.folder)).toBeNull();
  }, 420_000);

  it.each([
    [["--email", "nobody@sallowmere.example"], /Nobody has the address/],
    [["--email", email, "--scopes", "everything"], /no such scope/],
    [["--email", email, "--scopes", "admin"], /does not include the scope admin/],
    [["--email", email, "--expires", "soon"], /90d/],
    [["--email", email, "--expires", "999d"], /365 days/],
    [[], /Whose token/],
    [["--mail", email], /--mail/],
  ])("refuses %j in one line on stderr, with nothing on stdout", async (args, reason) => {
    const { code, stdout, stderr } = await ask(...args);
    expect([code, stdout]).toEqual([1, ""]);
    expect(stderr).toMatch(reason);
    expect(stderr).not.toContain("    at ");
  });
});

describe.sequential("on a PostgreSQL of one's own", () => {
  it("npm run admin makes the first administrator, without a password, and a link that sets one", async () => {
    const { stdout } = await npm(["admin", "--", "--email", "ada@lab.example", "--name", "Ada Lowe"], { DATABASE_URL: outsideUrl, TUFA_DATA_DIR: outsideDir });
    expect(stdout).toMatch(/^http:\/\/127\.0\.0\.1:3000\/set-password#[0-9A-Za-z]{32}$/m);
    expect(await rows(outsideUrl, "select email, role, password_hash from app_user")).toEqual([{ email: "ada@lab.example", role: "administrator", password_hash: null }]);
    const again = await npm(["admin", "--", "--email", "ADA@lab.example"], { DATABASE_URL: outsideUrl, TUFA_DATA_DIR: outsideDir });
    expect(again.stdout).toContain("Administrator there already");
    expect(await rows(outsideUrl, "select count(*)::int as n from one_time_link")).toEqual([{ n: 1 }]);
  }, 30_000);

  it("npm start starts no database, seeds nothing and names nobody", async () => {
    product = await startProduct({ dataDir: outsideDir, env: { DATABASE_URL: outsideUrl } });
    expect((await fetch(`${product.address}/api/v1/health`)).ok).toBe(true);
    expect(product.output()).not.toContain("sallowmere");
    expect(product.output()).toContain("npm run admin");
    expect(await product.stop()).toBe(0);
    expect(await rows(outsideUrl, "select email from app_user")).toEqual([{ email: "ada@lab.example" }]);
    expect(await rows(outsideUrl, "select count(*)::int as n from sample_set")).toEqual([{ n: 0 }]);
  }, 420_000);

  it("npm run db:migrate may be run at any time, also by several at once", async () => {
    const runs = await Promise.all([0, 1, 2].map(() => npm(["db:migrate"], { DATABASE_URL: outsideUrl, TUFA_DATA_DIR: outsideDir })));
    expect(runs.map(({ code }) => code)).toEqual([0, 0, 0]);
    const refused = await npm(["db:migrate", "--", "--demo"], { DATABASE_URL: outsideUrl, TUFA_DATA_DIR: outsideDir });
    expect(refused.code).toBe(1);
    expect(refused.stderr).toContain("embedded database only");
  }, 30_000);
});
