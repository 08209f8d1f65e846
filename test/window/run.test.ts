/** Files dropped anywhere, their progress and problems, the run at a glance, the way to each pulse. */
import { mkdtempSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, expect, it } from "vitest";
import { seeded } from "../reference/random.ts";
import { describeWindow, launch } from "./chromium.ts";
import { demo, openDoor, type TestDoor } from "./door.ts";
import {
  closeSilent,
  dropFiles,
  expectAccessible,
  filesOf,
  goTo,
  openContents,
  openSheet,
  type Sheet,
} from "./sheet.ts";

/** Two dozen invented rings of 4 kHz, 2 ms apart at 2 µs a sample; from the thirteenth on Q is 20 instead of 21. */
function dampedTrain(): string {
  const { uniform } = seeded(11);
  const lines = ["t [s],node [V]"];
  for (let at = 0; at < 24 * 2000; at++) {
    const since_s = ((at % 2000) - 400) * 2e-6;
    const decay_per_s = at < 12 * 2000 ? 600 : 630;
    const ring = 150 * Math.exp(-decay_per_s * since_s) * Math.sin(2 * Math.PI * 4000 * since_s);
    const value = (since_s < 0 ? 1 : 12 + ring) + (uniform() - 0.5) * 1.5;
    lines.push(`${(at * 2e-6).toFixed(6)},${value.toFixed(2)}`);
  }
  return lines.join("\n");
}

const sum = (numbers: number[]) => numbers.reduce((all, one) => all + one, 0);

describeWindow("a run", () => {
  let browser: Browser;
  let door: TestDoor;
  let sheet: Sheet | undefined;
  /** The demo run, once it is read. */
  let run: number;
  beforeAll(async () => {
    [browser, door] = await Promise.all([launch(), openDoor()]);
  });
  afterAll(async () => {
    await browser?.close();
    await door?.end();
  });
  afterEach(async () => {
    await closeSilent(sheet);
    sheet = undefined;
  });

  it("is made of files dropped on the page; a file that can't be read is named, the others are done", async () => {
    sheet = await openSheet(browser, door);
    const { page } = sheet;
    await page.locator(".greeting").waitFor();
    const captures = filesOf(demo, (name) => /^(pulse-0[1-4]\.csv|setup\.json)$/.test(name));
    // A setup of its own, so that it is a run of its own.
    const setup = captures.find(({ name }) => name === "setup.json")!;
    setup.text = JSON.stringify({ ...JSON.parse(setup.text), run: "Dropped on the page" });
    await dropFiles(page, [
      ...captures,
      { name: "<img src=x onerror=alert(1)>.csv", text: "not a capture\n" },
    ]);
    const problem = page.locator(".job li", { hasText: "img src=x onerror=alert(1)" });
    await problem.waitFor({ timeout: 15_000 });
    await page.getByText(/^4 pulses: \d+ sparked/).waitFor();
    expect(await page.locator("img").count()).toBe(0);
    expect(await page.locator(".captures li").count()).toBeGreaterThanOrEqual(4);
    await expectAccessible(page);
    await page.getByRole("button", { name: "put aside" }).click();
    await problem.waitFor({ state: "hidden" });
  });

  it("shows the whole demo run as handwriting, its counts, what to look at first, and its course", async () => {
    const { job } = await door.ask("openDemo", {});
    await door.host.idle();
    run = (await door.ask("jobs", {})).find((state) => state.job === job)!.run!;
    const { rows } = await door.ask("pulses", { run, limit: 1000 });
    sheet = await openSheet(browser, door, `/run/${run}`);
    const { page } = sheet;
    await page.getByText(/^54 pulses:/).waitFor();
    await page.locator(".written-line").first().waitFor();
    const drawn = await page.locator(".written-line").evaluateAll((lines) => ({
      lozenges: lines.map((line) => line.querySelector(".lozenge")!.getAttribute("d")!.split("Z").length - 1),
      circles: lines.map((line) => line.querySelector(".circle")!.getAttribute("d")!.split("Z").length - 1),
    }));
    expect(sum(drawn.lozenges)).toBe(rows.filter((row) => row.verdict === "spark").length);
    expect(sum(drawn.circles)).toBe(rows.filter((row) => row.verdict === "no-spark").length);
    await page.getByRole("heading", { name: "Look at this first" }).waitFor();
    expect(await page.locator(".attention a").count()).toBeGreaterThan(0);
    const near = page.locator(".attention-near-rating li");
    const shares = (await near.allTextContents()).map((text) => Number(/is (\d+) %/.exec(text)![1]));
    expect(shares[0]).toBeGreaterThanOrEqual(80);
    expect(shares).toEqual(shares.toSorted((a, b) => b - a));
    await page.getByLabel("Figure of the chart").selectOption("q");
    await page.getByRole("img", { name: /^Q over 54 pulses/ }).waitFor();
    await expectAccessible(page);
  });

  it("tells when its sparks struck and at what voltage, as distributions with their fit", async () => {
    sheet = await openSheet(browser, door, `/run/${run}`);
    const { page } = sheet;
    const sparks = page.locator("section", { has: page.getByRole("heading", { name: "How it sparked" }) });
    const course = await door.ask("course", { run });
    const fit = course.trends!.breakdown_V!;
    const broke = course.breakdown_V.filter((value) => value !== null);
    expect(fit).toMatchObject({ broke: broke.length, held: 0, from: "ratio" });
    await sparks.getByText(/Weibull fit: 63 % lie below [\d.]+\u00a0kV \([\d.]+\u00a0kV to/).waitFor();
    // A stroke a spark; what lies far beside the others is named instead.
    const onsets = course.onset_s.filter((onset) => onset !== null);
    const drawn = await sparks.locator(".strokes").first().getAttribute("d");
    const beside = (await sparks
      .getByText(/^Far beside the others: /)
      .first()
      .textContent())!;
    expect(drawn!.split("M").length - 1 + beside.split(", ").length).toBe(onsets.length);
    expect(await sparks.locator(".interval").count()).toBe(2);
    await page.getByLabel("Figure of the chart").selectOption("breakdown");
    await page.getByText(`${54 - broke.length} without this figure`).waitFor();
  });

  it("runs over time where one record tells it, with a change of level drawn and named first", async () => {
    const damped = await door.readIn("damped", { "train.csv": dampedTrain() });
    sheet = await openSheet(browser, door, `/run/${damped}`);
    const { page } = sheet;
    await page.getByText(/^24 pulses: 0 sparked, 24 stayed quiet/).waitFor();
    await page.locator(".attention-moved", { hasText: "Q changed at quiet pulse 13" }).waitFor();
    await page.getByLabel("Figure of the chart").selectOption("q");
    await page.locator(".course-mark", { hasText: "changes at pulse 13" }).waitFor();
    await page.getByLabel("Along").selectOption("time");
    await page.getByRole("img", { name: "Q over the time of 24 pulses" }).waitFor();
    const chart = (await page.locator(".run-chart svg").boundingBox())!;
    await page.mouse.click(chart.x + chart.width - 10, chart.y + 80);
    await page.getByText("pulse 24 of 24").waitFor();
    await page.keyboard.press("q");
    await page.getByText("No other pulse is unclear.").waitFor();
  });

  it("lies beside another run, by keys: figures, what lies between them, onsets on one scale", async () => {
    const damped = (await door.ask("runs", {})).rows.find(({ name }) => name === "damped")!.run;
    sheet = await openSheet(browser, door, `/run/${run}`);
    const { page } = sheet;
    await page.getByText(/^54 pulses:/).waitFor();
    await page.getByLabel("beside").waitFor();
    await page.keyboard.press("v");
    await page.getByLabel("beside").selectOption(String(damped));
    await page.getByRole("heading", { name: "Two runs side by side" }).waitFor();
    const { q } = await door.ask("compare", { first: damped, second: run });
    const cells = await page.getByRole("row", { name: /^Q/ }).getByRole("cell").allTextContents();
    expect(cells).toHaveLength(3);
    const [a, b, less] = cells.map((cell) => Number.parseFloat(cell.replace("−", "-")));
    expect(less).toBeCloseTo(b - a, 0);
    expect(less).toBeCloseTo(q!.value, 1);
    await page.getByText(/^Of a hundred pulses/).waitFor();
    await page.getByRole("img", { name: /^Onset after switch-off in / }).waitFor();
    await expectAccessible(page);
    await page.keyboard.press("x");
    await expect.poll(() => page.evaluate(() => location.hash)).toBe(`#/beside/${run}/${damped}`);
  });

  it("leads to a pulse by click, by keys and from the attention list", async () => {
    sheet = await openSheet(browser, door, `/run/${run}`);
    const { page } = sheet;
    await page.getByText(/^54 pulses:/).waitFor();
    const line = page.locator(".written-line").first();
    await line.click({ position: { x: 21 * 3 + 8, y: 20 } });
    await page.getByText("pulse 4 of 54").waitFor();
    await page.keyboard.press("ArrowRight");
    await page.getByText("pulse 5 of 54").waitFor();
    await page.keyboard.press("ArrowUp");
    // Back on the run the pulse is the marked one.
    await page.getByText(/^Pulse 5: /).waitFor();
    await page.keyboard.press("ArrowRight");
    await page.getByText(/^Pulse 6: /).waitFor();
    await page.keyboard.press("Enter");
    await page.getByText("pulse 6 of 54").waitFor();
    await goTo(page, `/run/${run}`);
    const attention = page.locator(".attention a[href^='#/pulse']").first();
    await attention.click();
    await page.locator(".pulse-figure").waitFor();
  });

  it("leaves as CSV, JSON Lines and a report page; figures are copied", async () => {
    sheet = await openSheet(browser, door, `/run/${run}`, {
      permissions: ["clipboard-read", "clipboard-write"],
    });
    const { page } = sheet;
    await page.getByText(/^54 pulses:/).waitFor();
    for (const words of ["a table (CSV)", "readings (JSON Lines)", "a report page"]) {
      const [download] = await Promise.all([
        page.waitForEvent("download"),
        page.getByRole("button", { name: words }).click(),
      ]);
      expect(download.suggestedFilename().length).toBeGreaterThan(4);
    }
    await page.keyboard.press("f");
    await page.getByText("Copied.").waitFor();
    expect(await page.evaluate(() => navigator.clipboard.readText())).toMatch(/54 pulses: .*\nL\t.* mH/s);
  });

  it("grows from a watched folder while one looks on", async () => {
    const folder = mkdtempSync(join(door.folder, "scope-"));
    sheet = await openSheet(browser, door, "/");
    const { page } = sheet;
    await openContents(page);
    await page.getByRole("heading", { name: "A folder to watch" }).waitFor();
    await page.keyboard.press("w");
    await page.keyboard.type(folder);
    await page.keyboard.press("Enter");
    await page.getByText("Watching").waitFor();
    const [capture] = filesOf(demo, (name) => name === "pulse-05.csv");
    writeFileSync(join(folder, capture.name), capture.text);
    await page
      .locator(".watch")
      .getByText(/1 capture so far/)
      .waitFor({ timeout: 20_000 });
    expect(await page.locator(".watch-log li").count()).toBeGreaterThan(0);
    await page.getByRole("button", { name: "stop" }).click();
    await page.getByText("Watching").waitFor({ state: "hidden" });
  });
});
