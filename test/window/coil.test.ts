/** The coil's sheet: history, another capacitor by slider, dwell, stress; curves drawn when they arrive. */
import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, expect, it } from "vitest";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor, type TestDoor } from "./door.ts";
import { closeSilent, expectAccessible, openSheet, sidewaysOverflow, type Sheet } from "./sheet.ts";

const coil = "Igniter coil A";
const path = `/coil/${encodeURIComponent(coil)}`;

describeWindow("a coil", () => {
  let browser: Browser;
  let door: TestDoor;
  let sheet: Sheet | undefined;
  beforeAll(async () => {
    [browser, door] = await Promise.all([launch(), openDoor({ demo: true })]);
  });
  afterAll(async () => {
    await browser?.close();
    await door?.end();
  });
  afterEach(async () => {
    await closeSilent(sheet);
    sheet = undefined;
  });

  it("shows its history, the dwell as table and curve, and what each part bears", async () => {
    sheet = await openSheet(browser, door, path);
    const { page } = sheet;
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
  });

  it("answers what another capacitor would do: a larger one, a lower kick and a slower ring", async () => {
    sheet = await openSheet(browser, door, path);
    const { page } = sheet;
    const sentence = page.locator(".capacitor-choice .sentence");
    const kick = async () => Number(/Kick ([\d.]+)/.exec((await sentence.textContent()) ?? "")?.[1]);
    await page.getByText(/Kick [\d.]+ ±/).waitFor();
    const fitted = await kick();
    await page.getByRole("slider").focus();
    for (let step = 0; step < 20; step++) await page.keyboard.press("ArrowRight");
    await expect.poll(kick).toBeLessThan(fitted);
    await page.locator(".capacitor-choice .plot .scatterlayer").waitFor({ timeout: 30_000 });
  });

  it("is reached from its run, fits a narrow window, and says what is missing", async () => {
    sheet = await openSheet(browser, door, "/run/1", { viewport: { width: 380, height: 800 } });
    const { page } = sheet;
    await page.getByRole("link", { name: coil }).click();
    await page.getByRole("heading", { name: coil, level: 1 }).waitFor();
    await page.getByRole("heading", { name: "Added-capacitor line" }).waitFor();
    expect(await page.getByText(/different capacitors/).count()).toBeGreaterThan(0);
    expect(await sidewaysOverflow(page)).toBeLessThanOrEqual(0);
    await page.locator(".plot .scatterlayer").first().waitFor({ timeout: 30_000 });
    expect(await sidewaysOverflow(page)).toBeLessThanOrEqual(0);
  });
});
