/** The setup card: what was read and guessed, questions, doubts, changes at once, templates, undo. */
import { copyFileSync, mkdirSync } from "node:fs";
import { join } from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, it } from "vitest";
import { seeded } from "../reference/random.ts";
import { describeWindow, launch } from "./chromium.ts";
import { demo, openDoor, type TestDoor } from "./door.ts";
import { closeSilent, dropFiles, expectAccessible, goTo, openSheet, turnTo, type Sheet } from "./sheet.ts";

describeWindow("the setup card", () => {
  let browser: Browser;
  let door: TestDoor;
  let sheet: Sheet;
  beforeAll(async () => {
    [browser, door] = await Promise.all([launch(), openDoor()]);
    sheet = await openSheet(browser, door, "/help");
    // Two quiet pulses of the demo run: a change is judged anew at once.
    const folder = join(door.folder, "two pulses");
    mkdirSync(folder);
    for (const name of ["pulse-03.csv", "pulse-06.csv", "setup.json"])
      copyFileSync(join(demo, name), join(folder, name));
    await door.ask("open", { sources: [{ path: folder }] });
    await door.host.idle();
  });
  afterAll(async () => {
    await closeSilent(sheet);
    await browser?.close();
    await door?.end();
  });
  const turned = async () => {
    await turnTo(sheet.page, "/run/1");
    await sheet.page.getByText(/^2 pulses:/).waitFor();
    await sheet.page.keyboard.press("e");
    await sheet.page.getByRole("heading", { name: "Setup, the back of the card" }).waitFor();
    return sheet.page;
  };
  const inductance = async () => (await door.ask("run", { run: 1 })).combined.inductance_H!.value;

  it("turns over to what every field is for, where it came from, and how the columns were read", async () => {
    const page = await turned();
    expect(await page.locator(".field", { hasText: "from the folder’s setup" }).count()).toBeGreaterThan(5);
    expect(await page.getByRole("row", { name: /Switch node/ }).count()).toBe(1);
    await page.getByLabel("First lines of the file").waitFor();
    expect(await page.getByLabel("First lines of the file").textContent()).toContain("Switch node [V]");
    await expectAccessible(page);
  });

  it("a changed capacitor changes L at once, in proportion, and Ctrl Z takes it back", async () => {
    const before = await inductance();
    const page = await turned();
    await page.getByLabel("capacitor", { exact: true }).fill("660n");
    await page.keyboard.press("Enter");
    // L·C is what the ring gives: with the stray capacitance negligible, twice C is half L.
    await expect.poll(inductance, { timeout: 20_000 }).toBeLessThan(before * 0.7);
    await page.locator(".combined", { hasText: "mH" }).waitFor();
    await page.locator("h1").click();
    await page.keyboard.press("Control+z");
    await expect.poll(inductance, { timeout: 20_000 }).toBeCloseTo(before, 8);
  });

  it("says what is wrong with an entry and keeps it to itself", async () => {
    const page = await turned();
    await page.getByLabel("supply", { exact: true }).fill("twelve");
    await page.keyboard.press("Tab");
    await page.getByText("Write a number with or without prefix").waitFor();
    expect((await door.ask("run", { run: 1 })).setup.supply_V).toBe(12);
  });

  it("questions an implausible capacitor and puts it right with one click", async () => {
    const page = await turned();
    await page.getByLabel("capacitor", { exact: true }).fill("330u");
    await page.keyboard.press("Enter");
    const doubt = page.locator(".doubt");
    await doubt.getByText("Is it meant?").waitFor({ timeout: 20_000 });
    await expectAccessible(page);
    await doubt.getByRole("button", { name: "I meant 330 nF" }).click();
    await doubt.waitFor({ state: "hidden", timeout: 20_000 });
    expect((await door.ask("run", { run: 1 })).setup.capacitor_F).toMatchObject({ value: 3.3e-7 });
  });

  it("keeps a setup by name and lays it on another run", async () => {
    const page = await turned();
    await page.getByPlaceholder("bench or coil").fill("kiln bench");
    await page.getByRole("button", { name: "keep" }).click();
    await page.getByText("Kept as “kiln bench”.").waitFor();
    const lines = ["t [ms],node [V]"];
    for (let at = 0; at < 3000; at++)
      lines.push(`${(at * 0.002 - 1).toFixed(3)},${ring(at * 2e-6 - 1e-3).toFixed(2)}`);
    await goTo(page, "/");
    await page.getByRole("heading", { name: "Contents" }).waitFor();
    await dropFiles(page, [{ name: "lone.csv", text: lines.join("\n") }]);
    await page.getByText(/^1 pulse: /).waitFor({ timeout: 20_000 });
    await page.locator(".card-face .missing").first().waitFor();
    await page.keyboard.press("e");
    await page.getByLabel("Lay a kept setup on this run").selectOption("kiln bench");
    const run = Number(/run\/(\d+)/.exec(page.url())![1]);
    await expect
      .poll(async () => (await door.ask("run", { run })).setup.switchRating_V, { timeout: 20_000 })
      .toBe(300);
  });

  it("asks for the interval that a file does not tell, beside its first lines, and reads it with the answer", async () => {
    const page = await turnTo(sheet.page, "/");
    await page.getByRole("heading", { name: "Contents" }).waitFor();
    const lines = ["node,gate", "Volt,Volt"];
    for (let at = 0; at < 3000; at++) lines.push(`${ring(at * 2e-6 - 1e-3).toFixed(2)},${at < 500 ? 5 : 0}`);
    await dropFiles(page, [{ name: "no-interval.csv", text: lines.join("\n") }]);
    const question = page.locator(".questions .question").first();
    await question.waitFor({ timeout: 20_000 });
    await page.getByLabel("First lines of the file").waitFor();
    await expectAccessible(page);
    await question.locator("input").fill("2u");
    // What the answer would make of it stands beside it before it is given: 3000 samples, ring of 4 kHz.
    await question.getByText(/^3000 samples 2\.00\u00a0µs apart, .* ring of (4\.00|3\.99)\d*/).waitFor();
    expect((await question.locator("svg path.ink").getAttribute("d"))!.length).toBeGreaterThan(1000);
    await question.getByRole("button", { name: "answer" }).click();
    await page.getByText(/^1 pulse: /).waitFor({ timeout: 20_000 });
    await page.locator(".card-face", { hasText: "2.000" }).waitFor();
  });

  it("shows what each choice would make of a file beside the question, and takes the one that is clicked", async () => {
    const lines = ["t,node [V]"];
    for (let at = 0; at < 3000; at++)
      lines.push(`${(at * 0.002 - 1).toFixed(3)},${ring(at * 2e-6 - 1e-3).toFixed(2)}`);
    const run = await door.readIn("no unit", { "one.csv": lines.join("\n") });
    const page = await turnTo(sheet.page, `/run/${run}`);
    const choice = (unit: string) =>
      page.locator(".choices li").filter({ has: page.getByRole("button", { name: unit, exact: true }) });
    await choice("s")
      .getByText(/^3000 samples 2\.00\u00a0ms apart/)
      .waitFor({ timeout: 20_000 });
    await choice("µs")
      .getByText(/^3000 samples 2\.00\u00a0ns apart/)
      .waitFor();
    await choice("ms")
      .getByText(/^3000 samples 2\.00\u00a0µs apart, .* ring of (4\.00|3\.99)\d*.*kHz/)
      .waitFor();
    await expectAccessible(page);
    await choice("ms").getByRole("button").click();
    await page.locator(".choices").waitFor({ state: "hidden", timeout: 20_000 });
    await page.locator(".card-face", { hasText: "2.000\u00a0µs" }).waitFor();
  });
});

const { uniform } = seeded(5);

/** An invented switch-off at t = 0 that rings at 4 kHz with Q 20. */
function ring(time_s: number): number {
  const noise = uniform() - 0.5;
  if (time_s < 0) return 1 + noise;
  const decay = Math.exp(-630 * time_s);
  return 12 + 150 * decay * Math.sin(2 * Math.PI * 4000 * time_s) + noise;
}
