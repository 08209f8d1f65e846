/** A pulse in full: trace with notes and leaders, verdict by key, zoom, figures, pictures. */
import { readFileSync } from "node:fs";
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, expect, it } from "vitest";
import type { PulseRow } from "../../app/bridge.ts";
import { describeWindow, launch } from "./chromium.ts";
import { openDoor, type TestDoor } from "./door.ts";
import { closeSilent, expectAccessible, goTo, openSheet, turnTo, type Sheet } from "./sheet.ts";

const pathOf = (row: PulseRow) => `/pulse/1/${row.capture}/${row.pulse}`;

describeWindow("a pulse", () => {
  let browser: Browser;
  let door: TestDoor;
  let rows: PulseRow[];
  let sheet: Sheet;
  beforeAll(async () => {
    [browser, door] = await Promise.all([launch(), openDoor({ demo: true })]);
    sheet = await openSheet(browser, door, "/help", { permissions: ["clipboard-read", "clipboard-write"] });
    ({ rows } = await door.ask("pulses", { run: 1, limit: 1000 }));
  });
  afterAll(async () => {
    await closeSilent(sheet);
    await browser?.close();
    await door?.end();
  });

  const first = (wanted: (row: PulseRow) => boolean) =>
    rows.find((row) => wanted(row) && row.quality === "good")!;
  const open = async (row: PulseRow) => {
    await turnTo(sheet.page, pathOf(row));
    await sheet.page.locator(".pulse-figure .ink").first().waitFor();
    await sheet.page.locator(".pulse-figure .fitted").first().waitFor();
    return sheet.page;
  };

  it("is drawn with fit, residuals, envelope, other channels and notes tied to their places", async () => {
    const page = await open(first((row) => row.verdict === "spark"));
    for (const part of [".ink", ".fitted", ".expected", ".onset", ".leader", ".dot"])
      expect(await page.locator(`.pulse-figure ${part}`).count(), part).toBeGreaterThan(0);
    for (const words of [/^Kick .*V$/, /^Ring .*kHz$/, /^Spark, .* after switch-off$/, /^Switch-off$/])
      expect(await page.locator(".note-title", { hasText: words }).count(), String(words)).toBe(1);
    const note = page.locator(".note[data-note='kick']");
    await note.hover();
    await page.locator(".place.lit .leader[data-note='kick']").waitFor({ state: "attached" });
    await expectAccessible(page);
  });

  it("has leaders that neither cross the trace nor each other, as drawn", async () => {
    const page = await open(rows[0]);
    for (const row of [rows[0], first((row) => row.verdict === "no-spark"), rows.at(-1)!]) {
      await goTo(page, pathOf(row));
      await page.getByText(`pulse ${row.number} of ${rows.length}`).waitFor();
      await page.locator(".pulse-figure .leader").first().waitFor({ state: "attached" });
      expect(await page.evaluate(countCrossings), `pulse ${row.number}`).toEqual({ trace: 0, leaders: 0 });
    }
  });

  it("takes the user's verdict with one key and a remark, shows both, counts it, and undoes it", async () => {
    const row = first((row) => row.verdict === "no-spark");
    const page = await open(row);
    await page.keyboard.press("s");
    await page.getByText("You say: spark.").waitFor();
    await page.keyboard.press("n");
    await page.keyboard.type("<b>seen</b> by eye");
    await page.keyboard.press("Enter");
    const ruled = async () =>
      (await door.ask("capture", { capture: row.capture })).reading.pulses[row.pulse].ruled;
    await expect.poll(async () => (await ruled())?.remark).toBe("<b>seen</b> by eye");
    expect(await page.getByText(/^Misfire, .* sure/).count()).toBe(1);
    const counted = await door.ask("run", { run: 1 });
    expect(counted.counts.sparks).toBe(rows.filter((each) => each.verdict === "spark").length + 1);
    // Two statements were made: the verdict, then the verdict with its remark.
    await page.keyboard.press("Control+z");
    await expect.poll(async () => (await ruled())?.remark).toBe("");
    await page.keyboard.press("Control+z");
    await page.getByText("You say:").waitFor({ state: "hidden" });
  });

  it("leads on by key to the next one to look at, and warns where a kick nears the switch's rating", async () => {
    const page = await open(rows[0]);
    const quiet = rows.filter((row) => row.verdict === "no-spark");
    for (const row of quiet.slice(0, 2)) {
      await page.keyboard.press("j");
      await page.getByText(`pulse ${row.number} of ${rows.length}`).waitFor();
    }
    // 80 % of the 300 V that the demo run's setup states.
    const near = rows.find((row) => row.peak_V !== null && row.peak_V > 240)!;
    await goTo(page, pathOf(near));
    await page.locator(".note.tone-warning .note-title", { hasText: /^! Kick/ }).waitFor();
    await page.getByRole("button", { name: "the next unclear pulse" }).waitFor();
  });

  it("looks closer by key, wheel and drag, and comes back", async () => {
    const page = await open(first((row) => row.verdict === "spark"));
    const ticks = () => page.locator(".pulse-figure text.label").allTextContents();
    const whole = await ticks();
    await page.keyboard.press("+");
    await page.keyboard.press("+");
    await expect.poll(ticks).not.toEqual(whole);
    await page.keyboard.press("0");
    await expect.poll(ticks).toEqual(whole);
    const box = (await page.locator(".pulse-figure svg").boundingBox())!;
    await page.mouse.click(box.x + 400, box.y + 200);
    await page.mouse.wheel(0, -400);
    await expect.poll(ticks).not.toEqual(whole);
    const zoomed = await ticks();
    await page.mouse.move(box.x + 400, box.y + 200);
    await page.mouse.down();
    await page.mouse.move(box.x + 250, box.y + 200, { steps: 3 });
    await page.mouse.up();
    await expect.poll(ticks).not.toEqual(zoomed);
    await page.mouse.dblclick(box.x + 400, box.y + 200);
    await expect.poll(ticks).toEqual(whole);
  });

  it("lists every figure with its uncertainty or a dash with the reason, and the budget on demand", async () => {
    const page = await open(first((row) => row.verdict === "no-spark"));
    const row = page.locator(".figures tr", { hasText: "inductance L" });
    expect(await row.locator(".tabular").first().textContent()).toMatch(/^[\d.]+ ± [\d.]+\u00a0mH$/);
    await row.getByText("what adds how much").click();
    expect(await row.locator(".budget li").count()).toBeGreaterThan(0);
    for (const missing of await page.locator(".figures tr.missing").all())
      expect((await missing.locator("td").nth(1).textContent())!.length).toBeGreaterThan(5);
    expect(await page.locator(".caution").count()).toBe(1);
  });

  it("gives its drawing as SVG and PNG that stand alone, and its table as text", async () => {
    const page = await open(first((row) => row.verdict === "spark"));
    const svg = readFileSync(await download(page, "Shift+P"), "utf8");
    expect(svg).toContain('xmlns="http://www.w3.org/2000/svg"');
    expect(svg).toContain("Kick ");
    expect(svg).not.toMatch(/class=|var\(--/);
    const png = readFileSync(await download(page, "p"));
    expect(png.subarray(1, 4).toString()).toBe("PNG");
    expect(png.readUInt32BE(16)).toBeGreaterThan(2000);
    await page
      .getByRole("button", { name: /^[\d.]+ ± [\d.]+\s+mH$/ })
      .first()
      .click();
    await page.getByText(/^Copied [\d.]+ ± [\d.]+\s+mH\.$/).waitFor();
    expect(await page.evaluate(() => navigator.clipboard.readText())).toMatch(/^[\d.]+ ± [\d.]+ mH$/);
    await page.keyboard.press("t");
    await page.getByText("Copied.").waitFor();
    expect(await page.evaluate(() => navigator.clipboard.readText())).toMatch(/inductance L\t.* mH\t/);
  });

  it("survives a reload in place and prints on light paper what the page shows", async () => {
    const row = first((row) => row.verdict === "spark");
    const page = await open(row);
    await page.reload();
    await page.locator(".note-title", { hasText: /^Kick/ }).waitFor();
    const pdf = await page.pdf({ preferCSSPageSize: false });
    expect(pdf.subarray(0, 4).toString()).toBe("%PDF");
    await page.emulateMedia({ media: "print", colorScheme: "dark" });
    const paper = await page.evaluate(() => getComputedStyle(document.body).backgroundColor);
    expect(paper).toBe("rgb(255, 255, 255)");
    expect(await page.locator(".foot").isVisible()).toBe(false);
    expect(await page.locator(".pulse-figure").isVisible()).toBe(true);
  });
});

async function download(page: Page, key: string): Promise<string> {
  const [file] = await Promise.all([page.waitForEvent("download"), page.keyboard.press(key)]);
  return (await file.path())!;
}

/** In the page: how often a drawn leader's horizontal or slanted part meets the ink, or another leader. */
function countCrossings() {
  type Point = [number, number];
  const pointsOf = (path: SVGPathElement): Point[] => {
    const points: Point[] = [];
    let x = 0;
    for (const [, letter, rest] of path.getAttribute("d")!.matchAll(/([MLHV])([^MLHV]*)/g)) {
      const numbers = rest.trim().split(/[ ,]+/).map(Number);
      if (letter === "H") points.push([numbers[0], points.at(-1)![1]]);
      else if (letter === "V") points.push([x, numbers[0]]);
      else points.push([numbers[0], numbers[1]]);
      x = points.at(-1)![0];
    }
    return points;
  };
  const segments = (points: Point[]) => points.slice(1).map((point, at) => [points[at], point]);
  const turn = (p: Point, q: Point, r: Point) =>
    (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0]);
  const cross = ([a, b]: Point[], [c, d]: Point[]) =>
    turn(a, b, c) * turn(a, b, d) < 0 && turn(c, d, a) * turn(c, d, b) < 0;
  const leaders = [...document.querySelectorAll<SVGPathElement>(".pulse-figure .leader")].map((path) =>
    segments(pointsOf(path)),
  );
  const ink = segments(pointsOf(document.querySelector<SVGPathElement>(".pulse-figure .ink")!));
  const lanes = leaders.flatMap((leader) => leader.slice(1));
  let crossed = 0;
  leaders.forEach((one, at) => {
    for (const other of leaders.slice(at + 1))
      for (const a of one) for (const b of other) if (cross(a, b)) crossed += 1;
  });
  return {
    trace: lanes.filter((lane) => ink.some((stroke) => cross(lane, stroke))).length,
    leaders: crossed,
  };
}
