/** The report as a customer opens and prints it: no network, no script, a tidy PDF. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, expect, it } from "vitest";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor } from "./door.ts";

const artefacts = join(import.meta.dirname, "../artefacts");

describeWindow("the report of the demo run", () => {
  let browser: Browser;
  let page: Page;
  const complaints: string[] = [];
  const requests: string[] = [];

  beforeAll(async () => {
    browser = await launch();
    const door = await openDoor({ demo: true });
    const { text } = await door.ask("exportRun", { run: 1, kind: "html" });
    await door.end();
    mkdirSync(artefacts, { recursive: true });
    const file = join(artefacts, "report.html");
    writeFileSync(file, text);
    page = await browser.newPage({ viewport: { width: 900, height: 1200 } });
    page.on("console", (message) => complaints.push(message.text()));
    page.on("request", (request) => requests.push(request.url()));
    await page.goto(pathToFileURL(file).href);
  });
  afterAll(() => browser?.close());

  it("asks the network for nothing and complains of nothing", () => {
    expect(requests).toHaveLength(1);
    expect(complaints).toEqual([]);
  });

  it("draws pulses as vectors and lists every pulse", async () => {
    expect(await page.locator("svg path.ink").count()).toBe(12);
    expect(await page.locator("svg path.ink").first().getAttribute("d")).toMatch(/^M[\d.]+ [\d.]+L/);
    expect(await page.locator("table.log tbody").count()).toBe(54);
    expect(await page.locator(".counts").textContent()).toMatch(/^54 pulses: /);
  });

  it("is no wider than its page and prints to a PDF of a few pages", async () => {
    const overflow = await page.evaluate(() => document.documentElement.scrollWidth - innerWidth);
    expect(overflow).toBeLessThanOrEqual(0);
    const pdf = await page.pdf({
      path: join(artefacts, "report.pdf"),
      format: "A4",
      preferCSSPageSize: true,
    });
    // Pages are counted by their objects in the file (ISO 32000-1, 7.7.3.3).
    const pages = pdf.toString("latin1").match(/\/Type\s*\/Page\b(?!s)/g)?.length ?? 0;
    expect(pages).toBeGreaterThanOrEqual(4);
    expect(pages).toBeLessThanOrEqual(16);
    await page.screenshot({ path: join(artefacts, "report.png"), fullPage: true });
  });
});
