/** A page on the door, whose console must stay silent, with the questions that tests ask of it. */
import { readdirSync, readFileSync } from "node:fs";
import { basename, join } from "node:path";
import type { Browser, BrowserContextOptions, Page } from "playwright-core";
import { expect, vi } from "vitest";
import type { TestDoor } from "./door.ts";

const axe = readFileSync(join(import.meta.dirname, "../../node_modules/axe-core/axe.min.js"), "utf8");

export interface Sheet {
  page: Page;
  /** Console errors and warnings, and errors nobody caught. */
  noise: string[];
  close(): Promise<void>;
}

export async function openSheet(
  browser: Browser,
  door: TestDoor,
  path = "/",
  options: BrowserContextOptions = {},
): Promise<Sheet> {
  const context = await browser.newContext({
    viewport: { width: 1360, height: 860 },
    colorScheme: "light",
    ...options,
  });
  const page = await context.newPage();
  // Generous: a busy machine is slow, not wrong.
  page.setDefaultTimeout(15_000);
  const noise: string[] = [];
  page.on("console", (message) => {
    if (message.type() === "error" || message.type() === "warning") noise.push(message.text());
  });
  page.on("pageerror", (error) => noise.push(String(error.stack)));
  await page.goto(door.address);
  if (path !== "/") {
    await page.locator(".sheet-head").waitFor();
    await goTo(page, path);
  }
  return { page, noise, close: () => context.close() };
}

export const goTo = (page: Page, path: string) => page.evaluate((path) => (location.hash = `#${path}`), path);

/** A page that several tests share, brought to a sheet as if it were new: nothing is left of the one before. */
export async function turnTo(
  page: Page,
  path: string,
  viewport = { width: 1360, height: 860 },
): Promise<Page> {
  await page.emulateMedia({ media: "screen", colorScheme: "light" });
  await page.setViewportSize(viewport);
  await goTo(page, "/help");
  await page.getByRole("heading", { name: "Cautions" }).waitFor();
  await goTo(page, path);
  return page;
}

/** To the book's contents by key, once the place where the book was closed is restored. */
export async function openContents(page: Page): Promise<void> {
  await page.locator(".sheet-head").waitFor();
  // A key pressed before the page listens is lost, for a person too, who presses it once more.
  const contents = page.getByRole("heading", { name: "Contents" });
  const pressed = async () => {
    await page.keyboard.press("b");
    await contents.waitFor({ timeout: 3000 });
  };
  await vi.waitFor(pressed, { timeout: 30_000, interval: 200 });
}

/** Closes the page and asserts that it was silent. */
export async function closeSilent(sheet: Sheet | undefined): Promise<void> {
  if (!sheet) return;
  await sheet.close();
  expect(sheet.noise).toEqual([]);
}

/** Rules of WCAG 2 A and AA, by axe-core, on light and on dark paper: nothing serious or critical. */
export async function expectAccessible(page: Page): Promise<void> {
  // The page's policy forbids inline scripts; the test's own is not the page's.
  await page.evaluate(axe);
  const found = await page.evaluate(async () => {
    const { axe } = window as never as { axe: typeof import("axe-core") };
    const { dataset } = document.documentElement;
    const before = dataset.paper;
    const serious: string[] = [];
    for (const paper of ["light", "dark"]) {
      dataset.paper = paper;
      for (const { id, impact, nodes } of (await axe.run()).violations)
        if (impact === "serious" || impact === "critical")
          serious.push(
            `${paper}, ${id}: ${nodes.map((node) => `${node.html} ${node.failureSummary}`).join("\n")}`,
          );
    }
    if (before === undefined) delete dataset.paper;
    else dataset.paper = before;
    return serious;
  });
  expect(found).toEqual([]);
}

/** Drops files on the page as a hand would, sidecars too. */
export async function dropFiles(page: Page, files: { name: string; text: string }[]): Promise<void> {
  await page.evaluate((files) => {
    const carried = new DataTransfer();
    for (const { name, text } of files) carried.items.add(new File([text], name));
    for (const type of ["dragenter", "dragover", "drop"])
      window.dispatchEvent(new DragEvent(type, { dataTransfer: carried, bubbles: true, cancelable: true }));
  }, files);
}

export function filesOf(folder: string, wanted: (name: string) => boolean): { name: string; text: string }[] {
  return readdirSync(folder)
    .filter(wanted)
    .map((name) => ({ name: basename(name), text: readFileSync(join(folder, name), "utf8") }));
}

/** Hidden widths that would make a page scroll sideways. */
export const sidewaysOverflow = (page: Page) =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
