/** Chromium driven by keys alone: nothing here can click. */
import { existsSync } from "node:fs";
import { type Browser, chromium, type Download, type Locator, type Page } from "playwright-core";

const CHROMIUM = ["/usr/bin/chromium", "/usr/bin/chromium-browser", "/usr/bin/google-chrome"];
const FLAGS = ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking", "--disable-component-update", "--disable-sync"];
/** More stops than any page has; a target beyond them cannot be reached by Tab. */
const MOST_STOPS = 250;

export function launchChromium(): Promise<Browser> {
  const executablePath = CHROMIUM.find((each) => existsSync(each));
  if (!executablePath) throw new Error(`no Chromium at ${CHROMIUM.join(", ")}; on Debian: apt-get install chromium`);
  return chromium.launch({ executablePath, args: FLAGS });
}

const holdsFocus = (target: Locator): Promise<boolean> => target.evaluateAll((elements) => elements.some((each) => each === document.activeElement || each.contains(document.activeElement)));

/** Tab (or Shift-Tab) until the target, or something in it, has the focus. */
export async function tabTo(page: Page, target: Locator, key: "Tab" | "Shift+Tab" = "Tab"): Promise<void> {
  await target.first().waitFor();
  for (let stop = 0; stop <= MOST_STOPS; stop++) {
    if (await holdsFocus(target)) return;
    await page.keyboard.press(key);
  }
  throw new Error(`Tab does not reach ${target.toString()}`);
}

/** Types a line where the focus is and presses Enter. */
export async function enter(page: Page, text: string): Promise<void> {
  await page.keyboard.insertText(text);
  await page.keyboard.press("Enter");
}

/** Opens the palette, types, goes down to what is wanted and takes it. */
export async function byPalette(page: Page, text: string, wanted: RegExp): Promise<void> {
  await page.keyboard.press("Control+k");
  const palette = page.getByRole("dialog", { name: "Palette" });
  await palette.waitFor();
  await page.keyboard.insertText(text);
  await palette.locator("[cmdk-item]").filter({ hasText: wanted }).first().waitFor();
  const chosen = palette.locator('[cmdk-item][data-selected="true"]').filter({ hasText: wanted });
  const selected = palette.locator('[cmdk-item][data-selected="true"]');
  for (let stop = 0; stop < MOST_STOPS && (await chosen.count()) === 0; stop++) {
    const before = await selected.first().innerText();
    await page.keyboard.press("ArrowDown");
    // The mark moves a frame after the key.
    await page.waitForFunction((text) => document.querySelector<HTMLElement>('[cmdk-item][data-selected="true"]')?.innerText !== text, before, { timeout: 2000 });
  }
  await page.keyboard.press("Enter");
}

/** A download set off by Enter on whatever has the focus. */
export async function downloadByEnter(page: Page): Promise<Download> {
  const [download] = await Promise.all([page.waitForEvent("download"), page.keyboard.press("Enter")]);
  return download;
}
