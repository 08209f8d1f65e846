/**
 * The gallery of the README: the demo run on every sheet, light, dark and narrow. Every run takes the
 * pictures; `npm run pictures` keeps them in docs/pictures.
 */
import { mkdirSync } from "node:fs";
import { join } from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, it } from "vitest";
import type { PulseRow } from "../../app/bridge.ts";
import { seeded } from "../reference/random.ts";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor, type TestDoor } from "./door.ts";
import { closeSilent, goTo, openContents, openSheet, type Sheet } from "./sheet.ts";

const folder = join(import.meta.dirname, "../../docs/pictures");
const keep = process.env.PICTURES === "1";

interface Picture {
  name: string;
  path(rows: PulseRow[]): string;
  width: number;
  height: number;
  dark?: boolean;
  /** What must be on the page before the picture is taken. */
  shows: string;
  before?(sheet: Sheet): Promise<void>;
}

/** A single capture's pulse whose spark comes late enough to be seen at a glance. */
const sparking = (rows: PulseRow[]) =>
  rows
    .filter((row) => row.verdict === "spark" && row.quality === "good")
    .toSorted((a, b) => (b.sketchOnset ?? 0) - (a.sketchOnset ?? 0))[0];
const quiet = (rows: PulseRow[]) => rows.find((row) => row.verdict === "no-spark" && row.quality === "good")!;
const pathOf = (row: PulseRow) => `/pulse/1/${row.capture}/${row.pulse}`;

const pictures: Picture[] = [
  { name: "run", path: () => "/run/1", width: 1280, height: 1130, shows: ".distribution .interval" },
  {
    name: "run-dark",
    path: () => "/run/1",
    width: 1280,
    height: 1130,
    dark: true,
    shows: ".distribution .interval",
  },
  { name: "run-narrow", path: () => "/run/1", width: 420, height: 1100, shows: ".distribution .interval" },
  {
    name: "pulse",
    path: (rows) => pathOf(sparking(rows)),
    width: 1280,
    height: 860,
    shows: ".pulse-figure .fitted",
  },
  {
    name: "pulse-dark",
    path: (rows) => pathOf(sparking(rows)),
    width: 1280,
    height: 860,
    dark: true,
    shows: ".pulse-figure .fitted",
  },
  {
    name: "misfire",
    path: (rows) => pathOf(quiet(rows)),
    width: 1280,
    height: 860,
    shows: ".pulse-figure .fitted",
  },
  { name: "narrow", path: (rows) => pathOf(sparking(rows)), width: 420, height: 900, shows: ".note-list li" },
  {
    name: "coil",
    path: () => "/coil/Igniter%20coil%20A",
    width: 1280,
    height: 1100,
    shows: ".plot .scatterlayer",
  },
  {
    name: "card",
    path: () => "/run/1",
    width: 1280,
    height: 900,
    shows: ".card-face",
    before: ({ page }) => turnCard(page),
  },
  {
    name: "coil-dark",
    path: () => "/coil/Igniter%20coil%20A",
    width: 1280,
    height: 1100,
    dark: true,
    shows: ".plot .scatterlayer",
  },
  {
    name: "question",
    path: () => "/run/2",
    width: 1280,
    height: 860,
    shows: ".choices li:nth-child(4) .outcome svg",
  },
  {
    name: "book",
    path: () => "/",
    width: 1280,
    height: 620,
    shows: ".sheet-head",
    before: ({ page }) => openContents(page),
  },
];

async function turnCard(page: Sheet["page"]) {
  await page.keyboard.press("e");
  await page.locator(".card-back").waitFor();
  await page.locator("#setup-card").scrollIntoViewIfNeeded();
  await page.evaluate(() => document.querySelector("#setup-card")!.scrollIntoView());
}

/** An invented capture whose time column has no unit: it counts milliseconds and does not say so. */
function unnamedTimes(): string {
  const { uniform } = seeded(2);
  const lines = ["t,switch node [V]"];
  for (let at = 0; at < 3000; at++) {
    const time_s = at * 2e-6 - 1e-3;
    const ring = 150 * Math.exp(-630 * time_s) * Math.sin(2 * Math.PI * 4000 * time_s);
    const value = (time_s < 0 ? 1 : 12 + ring) + uniform() - 0.5;
    lines.push(`${(time_s * 1e3).toFixed(3)},${value.toFixed(2)}`);
  }
  return lines.join("\n");
}

describeWindow("pictures of the demo run", () => {
  let browser: Browser;
  let door: TestDoor;
  let rows: PulseRow[];
  let sheet: Sheet;
  beforeAll(async () => {
    [browser, door] = await Promise.all([launch(), openDoor({ demo: true })]);
    await door.readIn("saved without a unit", { "capture.csv": unnamedTimes() });
    ({ rows } = await door.ask("pulses", { run: 1, limit: 1000 }));
    sheet = await openSheet(browser, door);
    await sheet.page.locator(".sheet-head").waitFor();
    if (keep) mkdirSync(folder, { recursive: true });
  });
  afterAll(async () => {
    await closeSilent(sheet);
    await browser?.close();
    await door?.end();
  });

  it.each(pictures)("$name", async ({ name, path, width, height, dark, shows, before }) => {
    const { page } = sheet;
    await page.setViewportSize({ width, height });
    await page.emulateMedia({ colorScheme: dark ? "dark" : "light" });
    await goTo(page, path(rows));
    await page.locator(shows).first().waitFor({ state: "attached", timeout: 30_000 });
    await before?.(sheet);
    await page.waitForTimeout(300);
    const bytes = await page.screenshot(keep ? { path: join(folder, `${name}.png`) } : {});
    // A blank page of this size compresses to a few kilobytes.
    expect(bytes.length).toBeGreaterThan(15_000);
  });
});
