/** An empty book, the demo run from a click, the contents, help, keys, paper, the last place. */
import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, expect, it } from "vitest";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor, type TestDoor } from "./door.ts";
import {
  closeSilent,
  expectAccessible,
  openContents,
  openSheet,
  sidewaysOverflow,
  type Sheet,
} from "./sheet.ts";

describeWindow("first use", () => {
  let browser: Browser;
  let door: TestDoor;
  let sheet: Sheet | undefined;
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

  it("greets with three steps, reads the demo run on Enter and opens it", async () => {
    sheet = await openSheet(browser, door);
    const { page } = sheet;
    await page.getByRole("heading", { name: "An empty book" }).waitFor();
    expect(await page.locator(".steps > li").count()).toBe(3);
    expect(await page.getByText("It is invented").count()).toBe(1);
    await expectAccessible(page);
    await page.keyboard.press("Enter");
    await page.getByText(/^54 pulses: \d+ sparked, \d+ misfired/).waitFor({ timeout: 30_000 });
    expect(page.url()).toMatch(/#\/run\/1$/);
    await expectAccessible(page);
  });

  it("opens where it was closed, and lists the run with its page", async () => {
    sheet = await openSheet(browser, door);
    const { page } = sheet;
    await page.getByRole("heading", { name: /Kiln burner/ }).waitFor();
    expect(page.url()).toMatch(/#\/run\/1$/);
    await openContents(page);
    await expectAccessible(page);
    await page.keyboard.press("/");
    await page.keyboard.type("no such run");
    await page.getByText("Nothing in the book answers to that.").waitFor();
    await page.keyboard.press("Control+a");
    await page.keyboard.type("kiln");
    await page.locator(".contents a", { hasText: "Kiln burner" }).click();
    await page.getByText(/^54 pulses:/).waitFor();
  });

  it("has all keys in an overview, help and cautions inside, light and dark paper that are remembered", async () => {
    sheet = await openSheet(browser, door);
    const { page } = sheet;
    await page.getByText(/^54 pulses:/).waitFor();
    await page.keyboard.press("k");
    const overview = page.getByRole("dialog");
    await overview.waitFor();
    for (const does of [
      "open captures",
      "open the marked pulse",
      "turn the setup card over",
      "undo",
      "print",
    ])
      expect(await overview.getByText(does).count(), does).toBeGreaterThan(0);
    await expectAccessible(page);
    await page.keyboard.press("Escape");
    await overview.waitFor({ state: "hidden" });

    const paper = () => page.evaluate(() => getComputedStyle(document.body).backgroundColor);
    const light = await paper();
    await page.keyboard.press("d");
    await expect.poll(paper).not.toBe(light);
    const dark = await paper();
    await expectAccessible(page);
    await page.reload();
    await expect.poll(paper).toBe(dark);
    await page.keyboard.press("d");
    await expect.poll(paper).toBe(light);

    await page.keyboard.press("h");
    await page.getByRole("heading", { name: "Cautions" }).waitFor();
    expect(await page.getByText("never a safety device").count()).toBeGreaterThan(0);
    await expectAccessible(page);
  });

  it("works at 200 % and in a narrow window: nothing runs off sideways", async () => {
    for (const width of [680, 380]) {
      sheet = await openSheet(browser, door, "/run/1", { viewport: { width, height: 700 } });
      const { page } = sheet;
      await page.getByText(/^54 pulses:/).waitFor();
      expect(await sidewaysOverflow(page)).toBeLessThanOrEqual(0);
      await page
        .locator(".written-line")
        .first()
        .click({ position: { x: 12, y: 20 } });
      await page.locator(".note-list li").first().waitFor();
      expect(await sidewaysOverflow(page)).toBeLessThanOrEqual(0);
      await expectAccessible(page);
      await closeSilent(sheet);
    }
    sheet = undefined;
  });

  it("without its key says what to do", async () => {
    sheet = await openSheet(browser, { ...door, address: door.address.replace(/#.*/, "") });
    await sheet.page.getByRole("heading", { name: "This page needs its key" }).waitFor();
  });
});
