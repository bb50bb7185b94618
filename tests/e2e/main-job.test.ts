/**
 * The main job in a browser, without a mouse: sign in, type a water, read the answer, open the editor, submit a spec over a stored
 * sample set with two cases and an axis, watch the rows come, sort them, see the chart, download, make and revoke a token, sign out.
 */
import { readFile } from "node:fs/promises";
import type { Browser, Page } from "playwright-core";
import { tableFromIPC } from "apache-arrow";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { sallowmereSets } from "@/db/demo/sallowmere";
import { callServer, demoPerson, freshToken, serverAddress } from "@/tests/helpers/running-server";
import { byPalette, downloadByEnter, enter, launchChromium, tabTo } from "./keyboard";

const POINTS = 5;
const BECKS = sallowmereSets().find((set) => set.name.includes("becks"));
const ROWS = (BECKS?.rows.length ?? 0) * 2 * POINTS;
const NUMBER = /−?-?\d+(?:[.,]\d+)?/;

let browser: Browser;
let page: Page;
let setId: string;
const failures: string[] = [];

beforeAll(async () => {
  const token = await freshToken("modeller");
  const { sampleSets } = await callServer<{ sampleSets: { id: string }[] }>(token, "GET", "/sample-sets?q=becks");
  setId = sampleSets[0].id;
  browser = await launchChromium();
  page = await browser.newPage({ viewport: { width: 1440, height: 900 }, acceptDownloads: true });
  page.setDefaultTimeout(20_000);
  page.on("pageerror", (error) => failures.push(error.message));
  page.on("response", (response) => { if (response.status() >= 500) failures.push(`${response.status()} ${response.url()}`); });
}, 60_000);
afterAll(() => browser?.close());

const spec = () => ({
  spec: 1, title: "Becks by keyboard", waters: { set: setId },
  cases: [
    { name: "no solid", close: ["charge", "pCO2"], activity: "davies" },
    { name: "with calcite", like: "no solid", react: { gas: "open", solids: { calcite: { supply: "excess" } } } },
  ],
  vary: [{ field: "pCO2", from: "200 ppm", to: "20000 ppm", points: POINTS, scale: "log" }],
  report: ["pH", "ANC", "SI:calcite"],
});

describe.sequential("the main job, without a mouse", () => {
  it("signs in", async () => {
    const person = demoPerson("modeller");
    await page.goto(serverAddress());
    await page.waitForURL(/sign-in/);
    await tabTo(page, page.getByLabel(/e-?mail/i));
    await page.keyboard.insertText(person.email);
    await tabTo(page, page.locator('input[type="password"]'));
    await enter(page, person.password);
    await page.getByRole("log", { name: "Stream" }).waitFor();
  }, 40_000);

  it("answers a typed water, with the focus in the prompt from the start", async () => {
    await page.waitForFunction(() => document.activeElement?.tagName === "TEXTAREA");
    await enter(page, "Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C");
    const answer = page.getByRole("article", { name: /^Entry 1/ });
    await answer.getByText(/calcite/).first().waitFor();
    expect(await answer.innerText()).toMatch(/7[.]90?/);
  }, 40_000);

  it("opens the editor, takes a spec over a stored set, counts its rows and says that there is no fault", async () => {
    await enter(page, "edit #1");
    await page.waitForURL(/\/spec/);
    await page.waitForFunction(() => document.activeElement?.closest(".cm-content") !== null);
    await page.keyboard.press("Control+a");
    await page.keyboard.insertText(JSON.stringify(spec(), null, 2));
    const sidebar = page.getByRole("complementary", { name: "What the spec does" });
    await sidebar.getByText("No faults.").waitFor();
    await expect.poll(async () => (await sidebar.innerText()).replace(/[\s\u2009\u202f,]/g, "")).toContain(`resultrows${ROWS}`);
  }, 40_000);

  it("submits it and shows every row as done", async () => {
    await page.keyboard.press("Control+Enter");
    await page.waitForURL(/\/jobs\/job_/);
    await page.getByText(/\bdone\b/i).first().waitFor({ timeout: 60_000 });
    await page.getByRole("grid").getByRole("row").nth(1).waitFor();
    await expect.poll(async () => Number(await page.getByRole("grid").getAttribute("aria-rowcount"))).toBeGreaterThanOrEqual(ROWS);
  }, 90_000);

  it("sorts the whole job by a column", async () => {
    const header = page.getByRole("columnheader", { name: /^pH/ });
    await tabTo(page, header);
    await page.keyboard.press("Enter");
    await expect.poll(() => header.getAttribute("aria-sort")).toMatch(/ascending|descending/);
    const token = await freshToken("modeller");
    const jobId = /job_\w+/.exec(page.url())?.[0];
    const direction = (await header.getAttribute("aria-sort")) === "ascending" ? "pH" : "-pH";
    const first = await callServer<{ rows: { water: string }[] }>(token, "GET", `/jobs/${jobId}/results?sort=${direction}&limit=1`);
    await expect.poll(() => page.getByRole("grid").getByRole("row").nth(1).innerText()).toContain(first.rows[0].water);
  }, 60_000);

  it("draws the job as a chart with points in it", async () => {
    const chart = page.locator("figure svg, svg[role=img]").first();
    await chart.waitFor();
    expect(await chart.locator("circle, path, polyline").count()).toBeGreaterThan(1);
    expect(await chart.innerHTML()).toMatch(NUMBER);
    expect(await chart.innerHTML()).not.toContain("NaN");
  }, 40_000);

  it("downloads CSV and Arrow with every row", async () => {
    await tabTo(page, page.getByRole("link", { name: /CSV/ }).or(page.getByRole("button", { name: /CSV/ })));
    const csv = await readFile(await (await downloadByEnter(page)).path(), "utf8");
    expect(csv.trim().split("\n")).toHaveLength(ROWS + 1);
    await tabTo(page, page.getByRole("link", { name: /Arrow/ }).or(page.getByRole("button", { name: /Arrow/ })));
    expect(tableFromIPC(await readFile(await (await downloadByEnter(page)).path())).numRows).toBe(ROWS);
  }, 60_000);

  it("makes a token that works, and revokes it", async () => {
    await byPalette(page, "tokens", /API tokens/);
    await page.waitForURL(/\/tokens/);
    await tabTo(page, page.getByLabel(/name/i).first());
    await enter(page, "from the keyboard");
    const shown = page.getByText(/tufa_[0-9A-Za-z]{36}/).or(page.locator("input[value^=tufa_]"));
    await shown.first().waitFor();
    const text = (await shown.first().evaluate((each) => (each as HTMLInputElement).value ?? each.textContent)) ?? "";
    const token = /tufa_[0-9A-Za-z]{36}/.exec(text)?.[0] ?? "";
    await callServer(token, "GET", "/me");
    await tabTo(page, page.getByRole("row").filter({ hasText: "from the keyboard" }).getByRole("button", { name: /revoke/i }));
    await page.keyboard.press("Enter");
    const confirm = page.getByRole("dialog").or(page.getByRole("alertdialog")).getByRole("button", { name: /revoke/i });
    if (await confirm.waitFor({ timeout: 3000 }).then(() => true, () => false)) { await tabTo(page, confirm); await page.keyboard.press("Enter"); }
    await expect.poll(async () => (await fetch(`${serverAddress()}/api/v1/me`, { headers: { authorization: `Bearer ${token}` } })).status).toBe(401);
  }, 60_000);

  it("signs out, after which nothing is reachable", async () => {
    await byPalette(page, "sign out", /Sign out/);
    await page.waitForURL(/sign-in/);
    await page.goto(`${serverAddress()}/tokens`);
    await page.waitForURL(/sign-in/);
  }, 40_000);

  it("met no error of the page and no answer above 499 on the way", () => expect(failures).toEqual([]));
});
