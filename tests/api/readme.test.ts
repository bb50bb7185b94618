/** README.md's examples, extracted and run as they stand against a running product: whoever copies them gets what it says. */
import { execFile } from "node:child_process";
import { mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { promisify } from "node:util";
import { tableFromIPC } from "apache-arrow";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import people from "@/db/demo/people.json";
import { sallowmereSets } from "@/db/demo/sallowmere";
import { freshToken, PROJECT_ROOT, serverAddress } from "@/tests/helpers/running-server";

const run = promisify(execFile);
const BECKS = sallowmereSets().find((set) => set.name.includes("becks"))?.rows.length ?? 0;
const ROWS = BECKS * 2 * 21;

let readme: string;
let examples: Map<string, string>;
let folder: string;
let token: string;

/** Writes a marked block to a file and runs it as a reader would. */
async function runExample(name: string): Promise<string> {
  const body = examples.get(name);
  if (!body) throw new Error(`README.md has no block marked <!-- run: ${name} -->`);
  const file = path.join(folder, name);
  await writeFile(file, body);
  const { stdout } = await run(name.endsWith(".py") ? "python3" : "bash", [file], { cwd: folder, env: { ...process.env, TUFA: serverAddress(), TUFA_TOKEN: token }, timeout: 110_000, maxBuffer: 64 * 2 ** 20 });
  return stdout;
}

beforeAll(async () => {
  readme = await readFile(path.join(PROJECT_ROOT, "README.md"), "utf8");
  examples = new Map([...readme.matchAll(/<!-- run: (\S+) -->\n```\w+\n([\s\S]*?)```/g)].map(([, name, body]) => [name, body]));
  folder = await mkdtemp(path.join(os.tmpdir(), "tufa-readme-"));
  token = await freshToken("modeller");
}, 60_000);
afterAll(() => rm(folder, { recursive: true, force: true }));

describe.sequential("README.md", () => {
  it("marks every example in a programming language to be run here", () => {
    expect(readme.match(/```(bash|python)/g)).toHaveLength(examples.size);
    expect([...examples.keys()]).toEqual(["curl.sh", "becks.py", "revoke.sh"]);
  });

  it("lists the demo people and their passwords as they are", () => {
    for (const person of people) expect(readme).toContain(`| ${person.email} | ${person.role} | ${person.password} |`);
    expect(readme).toContain(`${sallowmereSets().reduce((sum, set) => sum + set.rows.length, 0)} invented analyses`);
  });

  it("curl: solves a water, submits a job over a stored set, reads sorted and filtered rows, downloads CSV and Arrow", async () => {
    const stdout = await runExample("curl.sh");
    const [solved, job, page] = stdout.split("\n").filter((line) => line.startsWith("{")).map((line) => JSON.parse(line));
    expect(solved.rows.map((row: { case: string; status: string }) => `${row.case}: ${row.status}`)).toEqual(["open to air, no solid: ok", "with calcite: ok"]);
    expect(solved.rows[1]["SI:calcite"]).toBeCloseTo(0, 8);
    expect(job).toMatchObject({ status: "done", counts: { rows: ROWS, done: ROWS, notConverged: 0 } });
    const pH = page.rows.map((row: { pH: number }) => row.pH);
    expect(pH).toHaveLength(5);
    expect(pH).toEqual([...pH].sort((a, b) => a - b));
    const csv = await readFile(path.join(folder, "becks.csv"), "utf8");
    expect(csv.trim().split("\n")).toHaveLength(ROWS + 1);
    expect(tableFromIPC(await readFile(path.join(folder, "becks.arrow"))).numRows).toBe(ROWS);
  }, 120_000);

  it("Python: does the same with the standard library alone", async () => {
    const stdout = await runExample("becks.py");
    expect(stdout).toContain("Becks from Python done");
    expect(stdout).toMatch(new RegExp(`${ROWS / 2} rows; lowest: .*'pH': \\d`));
    expect(stdout).toMatch(new RegExp(`${ROWS} CSV rows, \\d{5,} bytes of Arrow`));
  }, 120_000);

  it("a revoked token answers 401 on its next call", async () => {
    expect((await runExample("revoke.sh")).trim()).toBe("401");
  }, 60_000);
});
