/**
 * The product as a user meets it: web server and workers over a seeded throw-away database, started once by tests/run.mjs for all files
 * that need them. `TUFA_TEST_URL` is its address; `DATABASE_URL` the database it runs on.
 */
import { execFile } from "node:child_process";
import path from "node:path";
import { promisify } from "node:util";
import people from "@/db/demo/people.json";

const run = promisify(execFile);
export const PROJECT_ROOT = path.resolve(import.meta.dirname, "../..");

/** Address of the running product, without a slash at the end. */
export function serverAddress(): string {
  const text = process.env.TUFA_TEST_URL;
  if (!text) throw new Error("TUFA_TEST_URL is missing: the address of a running, seeded Tufa; `npm test` starts one and says so");
  const { hostname } = new URL(text);
  if (hostname !== "127.0.0.1" && hostname !== "localhost") throw new Error(`TUFA_TEST_URL is on ${hostname}; tests speak to this machine alone`);
  return text.replace(/\/+$/, "");
}

export type DemoRole = "administrator" | "modeller" | "analyst";

/** The demo's person of a role. */
export function demoPerson(role: DemoRole): (typeof people)[number] {
  const person = people.find((each) => each.role === role);
  if (!person) throw new Error(`the demo has no ${role}`);
  return person;
}

/** A fresh token by the command that README.md names; fails where it prints anything else. */
export async function freshToken(role: DemoRole): Promise<string> {
  const { stdout } = await run("npm", ["run", "--silent", "token", "--", "--email", demoPerson(role).email, "--scopes", "all"], { cwd: PROJECT_ROOT });
  const token = stdout.trim();
  if (!/^tufa_[0-9A-Za-z]{36}$/.test(token)) throw new Error("npm run token printed something else than a token");
  return token;
}

/** A call to the running server with JSON both ways; the body is shown where the status is not the one expected. */
export async function callServer<T>(token: string, method: string, at: string, options: { body?: unknown; headers?: Record<string, string>; status?: number } = {}): Promise<T> {
  const response = await fetch(`${serverAddress()}/api/v1${at}`, {
    method, body: options.body === undefined ? undefined : JSON.stringify(options.body),
    headers: { authorization: `Bearer ${token}`, "content-type": "application/json", ...options.headers },
  });
  const text = await response.text();
  const wanted = options.status ?? 200;
  if (response.status !== wanted) throw new Error(`${method} ${at}: ${response.status} instead of ${wanted}: ${text.slice(0, 2000)}`);
  return (text === "" ? null : JSON.parse(text)) as T;
}
