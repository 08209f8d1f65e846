/** While files are being read: progress, stopping, a reload in the middle; a name that holds markup. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, expect, it } from "vitest";
import { manyPulses } from "../bench/window-records.ts";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor, type TestDoor } from "./door.ts";
import { closeSilent, openContents, openSheet, type Sheet } from "./sheet.ts";

const files = 40;

describeWindow("while reading", () => {
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

  /** Enough to be read for some seconds. */
  const folderOf = (name: string) => {
    const folder = join(door.folder, name);
    mkdirSync(folder);
    const text = [...manyPulses(60)].join("");
    for (let file = 0; file < files; file++)
      writeFileSync(join(folder, `${file}.csv`), text.replace("Switch", `Switch ${file}`));
    return folder;
  };

  it("shows how far it is, goes on over a reload, and stops on Esc; what was read stays", async () => {
    const folder = folderOf("long job");
    sheet = await openSheet(browser, door);
    const { page } = sheet;
    await page.locator(".sheet-head").waitFor();
    await door.ask("open", { sources: [{ path: folder }] });
    await page.getByText(new RegExp(`: \\d+ of ${files}`)).waitFor();
    // Escape that closes the overview of keys stops no reading.
    await page.keyboard.press("k");
    await page.getByRole("dialog").waitFor();
    await page.keyboard.press("Escape");
    await page.getByRole("dialog").waitFor({ state: "hidden" });
    expect((await door.ask("jobs", {})).at(-1)!.state).not.toBe("cancelled");
    await page.reload();
    await page.getByText(new RegExp(`: \\d+ of ${files}`)).waitFor();
    await page.getByText(/: [1-9]\d* of /).waitFor();
    await page.keyboard.press("Escape");
    await page.getByText("stopped; what was read stays").waitFor();
    await door.host.idle();
    expect((await door.ask("jobs", {})).at(-1)!.state).toBe("cancelled");
  });

  it("shows markup in the name of a run as text", async () => {
    const folder = join(door.folder, "<b onclick=alert(1)>bold & brave");
    mkdirSync(folder);
    writeFileSync(join(folder, "one.csv"), [...manyPulses(1)].join(""));
    await door.ask("open", { sources: [{ path: folder }] });
    await door.host.idle();
    sheet = await openSheet(browser, door);
    await openContents(sheet.page);
    await sheet.page.getByRole("link", { name: "<b onclick=alert(1)>bold & brave" }).click();
    await sheet.page.getByRole("heading", { level: 1, name: "<b onclick=alert(1)>bold & brave" }).waitFor();
    expect(await sheet.page.locator("h1 b").count()).toBe(0);
  });
});
