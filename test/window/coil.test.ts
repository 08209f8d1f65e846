/** The coil's sheet: history, another capacitor by slider, dwell, stress; curves drawn when they arrive. */
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, it } from "vitest";
import { seeded } from "../reference/random.ts";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor, type TestDoor } from "./door.ts";
import { closeSilent, expectAccessible, openSheet, sidewaysOverflow, turnTo, type Sheet } from "./sheet.ts";

const coil = "Igniter coil A";
const path = `/coil/${encodeURIComponent(coil)}`;

/** One invented switch-off that rings with Q 20, a kick of 150 V above 12 V. */
function ringAt(frequency_Hz: number): string {
  const { uniform } = seeded(3);
  const lines = ["t [s],node [V]"];
  const decay_per_s = (Math.PI * frequency_Hz) / 20;
  for (let at = 0; at < 4000; at++) {
    const time_s = at * 2e-6 - 1e-3;
    const ring = 150 * Math.exp(-decay_per_s * time_s) * Math.sin(2 * Math.PI * frequency_Hz * time_s);
    const value = (time_s < 0 ? 1 : 12 + ring) + (uniform() - 0.5);
    lines.push(`${time_s.toFixed(6)},${value.toFixed(2)}`);
  }
  return lines.join("\n");
}

describeWindow("a coil", () => {
  let browser: Browser;
  let door: TestDoor;
  let sheet: Sheet;
  beforeAll(async () => {
    [browser, door] = await Promise.all([launch(), openDoor({ demo: true })]);
    // One page for all: the plotting library is large, and is fetched and compiled once.
    sheet = await openSheet(browser, door, "/help");
  });
  afterAll(async () => {
    await closeSilent(sheet);
    await browser?.close();
    await door?.end();
  });

  it("shows its history, the dwell as table and curve, and what each part bears", async () => {
    const page = await turnTo(sheet.page, path);
    await page.getByRole("heading", { name: coil, level: 1 }).waitFor();
    const told = await door.ask("coil", { coil });
    const rows = page
      .locator("section", { has: page.getByRole("heading", { name: /^History/ }) })
      .locator("tbody tr");
    expect(await rows.count()).toBe(told.history.length);
    const dwell = page.locator("section", { has: page.getByRole("heading", { name: "Dwell" }) });
    expect(await dwell.locator("tbody tr").count()).toBe(told.dwell!.supplies_V.length);
    await dwell.locator(".plot .scatterlayer .trace").first().waitFor({ timeout: 30_000 });
    expect(await dwell.locator(".plot .trace").count()).toBe(told.dwell!.temperatures_C.length);
    const stress = page.locator("section", {
      has: page.getByRole("heading", { name: "What the parts bear" }),
    });
    expect(await stress.locator("tbody tr").count()).toBe(told.stress.length);
    // 280 V on a switch of 300 V: above 80 %, said in words.
    expect(await stress.locator("tr.warned", { hasText: "! near" }).count()).toBeGreaterThan(0);
    await expectAccessible(page);
    // A printed page is narrower: the curves shrink to it and stand in its flow.
    await page.emulateMedia({ media: "print" });
    const layer = dwell.locator(".plot .main-svg").first();
    expect(await layer.getAttribute("viewBox")).toMatch(/^0 0 [1-9][\d.]* [1-9][\d.]*$/);
    expect(await layer.evaluate((drawing) => getComputedStyle(drawing).position)).toBe("static");
  });

  it("answers what another capacitor would do: a larger one, a lower kick and a slower ring", async () => {
    const page = await turnTo(sheet.page, path);
    const sentence = page.locator(".capacitor-choice .sentence");
    const kick = async () => Number(/Kick ([\d.]+)/.exec((await sentence.textContent()) ?? "")?.[1]);
    await page.getByText(/Kick [\d.]+ ±/).waitFor();
    const fitted = await kick();
    await page.getByRole("slider").focus();
    for (let step = 0; step < 20; step++) await page.keyboard.press("ArrowRight");
    await expect.poll(kick).toBeLessThan(fitted);
    await page.locator(".capacitor-choice .plot .scatterlayer").waitFor({ timeout: 30_000 });
  });

  it("draws the line of two capacitors, whose slope is L and whose start the winding's own capacitance", async () => {
    // An invented coil: 5 mH, 200 pF of its own; ω² = 1/(L·C).
    for (const added_F of [100e-9, 330e-9]) {
      const frequency_Hz = 1 / (2 * Math.PI * Math.sqrt(5e-3 * (added_F + 200e-12)));
      const setup = { coil: "Line coil", capacitor_F: { value: added_F, tolerance: 0.01 } };
      const files = { "one.csv": ringAt(frequency_Hz), "setup.json": JSON.stringify(setup) };
      await door.readIn(`line ${added_F}`, files);
    }
    const page = await turnTo(sheet.page, "/coil/Line%20coil");
    const line = page.locator("section", {
      has: page.getByRole("heading", { name: "Added-capacitor line" }),
    });
    await line.locator(".plot .scatterlayer .trace").first().waitFor({ timeout: 30_000 });
    const told = (await line.locator(".combined").textContent())!;
    expect(Number(/L ([\d.]+)/.exec(told)![1])).toBeCloseTo(5, 0);
    expect(told).toMatch(/self-capacitance/);
    expect(await line.locator(".xtick text").allTextContents()).toContain("200\u00a0nF");
    await page
      .getByText(/saturat/)
      .first()
      .waitFor();
  });

  it("is reached from its run, fits a narrow window, and says what is missing", async () => {
    const page = await turnTo(sheet.page, "/run/1", { width: 380, height: 800 });
    await page.getByRole("link", { name: coil }).click();
    await page.getByRole("heading", { name: coil, level: 1 }).waitFor();
    await page.getByRole("heading", { name: "Added-capacitor line" }).waitFor();
    expect(await page.getByText(/different capacitors/).count()).toBeGreaterThan(0);
    expect(await sidewaysOverflow(page)).toBeLessThanOrEqual(0);
    await page.locator(".plot .scatterlayer").first().waitFor({ timeout: 30_000 });
    expect(await sidewaysOverflow(page)).toBeLessThanOrEqual(0);
  });
});
