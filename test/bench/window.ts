/**
 * The window's speed, measured on the real page behind the real local door: first paint, usable,
 * redraw of a 10 M-sample record after a gesture, scrolling of a 3,000-pulse run, memory of the page.
 */
import { mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { Page } from "playwright-core";
import { launch } from "../window/chromium.ts";
import { openDoor, type TestDoor } from "../window/door.ts";
import { longRecord, manyPulses } from "./window-records.ts";

interface Line {
  figure: string;
  measured: string;
  target: string;
  reached: boolean;
}

const loads = 5;
const gestures = 12;

const median = (values: number[]) => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)];

export async function run(): Promise<void> {
  const browser = await launch();
  const door = await openDoor({ demo: true });
  try {
    const page = await (await browser.newContext({ viewport: { width: 1360, height: 860 } })).newPage();
    const lines = [
      ...(await measureLoad(page, door)),
      ...(await measureLongRecord(page, door)),
      ...(await measureManyPulses(page, door)),
    ];
    for (const { figure, measured, target, reached } of lines)
      console.log(
        `${figure.padEnd(58)} ${measured.padStart(12)}   ${target.padEnd(12)} ${reached ? "reached" : "MISSED"}`,
      );
  } finally {
    await browser.close();
    await door.end();
  }
}

async function measureLoad(page: Page, door: TestDoor): Promise<Line[]> {
  await page.goto(door.address);
  const paints: number[] = [];
  const usable: number[] = [];
  const bytes: number[] = [];
  for (let load = 0; load < loads; load++) {
    await page.goto(`${door.address.replace(/#.*/, "")}#/run/1`);
    await page.reload();
    await page.waitForFunction(() => document.querySelector(".written-line .glyphs") !== null);
    const times = await page.evaluate(() => ({
      paint: performance.getEntriesByName("first-contentful-paint")[0]?.startTime ?? Number.NaN,
      now: performance.now(),
      plotly: performance.getEntriesByType("resource").filter(({ name }) => name.includes("plotly")).length,
    }));
    paints.push(times.paint);
    usable.push(times.now);
    bytes.push(times.plotly);
  }
  return [
    timeLine("first paint of the demo run, median of 5", median(paints), 500),
    timeLine("usable (the run's line is drawn), median of 5", median(usable), 1000),
    {
      figure: "plotting library fetched by then",
      measured: Math.max(...bytes) === 0 ? "no" : "yes",
      target: "no",
      reached: Math.max(...bytes) === 0,
    },
  ];
}

async function readIn(door: TestDoor, name: string, text: Iterable<string>): Promise<number> {
  const folder = join(door.folder, name);
  mkdirSync(folder);
  writeFileSync(join(folder, `${name}.csv`), "");
  for (const part of text) writeFileSync(join(folder, `${name}.csv`), part, { flag: "a" });
  const { job } = await door.ask("open", { sources: [{ path: folder }] });
  await door.host.idle();
  const state = (await door.ask("jobs", {})).find((each) => each.job === job)!;
  if (state.run === null) throw new Error(`${name} was not read: ${JSON.stringify(state.problems)}`);
  return state.run;
}

async function measureLongRecord(page: Page, door: TestDoor): Promise<Line[]> {
  const run = await readIn(door, "long-record", longRecord(10_000_000));
  const [row] = (await door.ask("pulses", { run, limit: 1 })).rows;
  await page.goto(`${door.address.replace(/#.*/, "")}#/pulse/${run}/${row.capture}/${row.pulse}`);
  await page.locator(".pulse-figure .ink").first().waitFor({ timeout: 60_000 });
  await page.waitForTimeout(2000);
  await page.keyboard.press("9");
  await page.waitForTimeout(1500);
  const drawn: number[] = [];
  const fine: number[] = [];
  for (let gesture = 0; gesture < gestures; gesture++) {
    const key = gesture % 3 === 2 ? "ArrowRight" : "+";
    const times = await page.evaluate(redrawAfter, { key, shift: gesture % 3 === 2 });
    drawn.push(times.drawn);
    fine.push(times.fine);
  }
  return [
    timeLine("10 M samples: trace moved after a gesture, median of 12", median(drawn), 100),
    timeLine("10 M samples: redrawn from its samples, median of 12", median(fine), 100),
    await memoryLine(page, "memory of the page with 10 M samples"),
  ];
}

/** In the page: presses a key, and times until the trace's path changed, and until it changed last. */
async function redrawAfter({
  key,
  shift,
}: {
  key: string;
  shift: boolean;
}): Promise<{ drawn: number; fine: number }> {
  const start = performance.now();
  const changes: number[] = [];
  const observer = new MutationObserver(() => changes.push(performance.now() - start));
  observer.observe(document.querySelector(".pulse-figure")!, {
    subtree: true,
    childList: true,
    attributeFilter: ["d"],
  });
  window.dispatchEvent(new KeyboardEvent("keydown", { key, shiftKey: shift, bubbles: true }));
  await new Promise((done) => setTimeout(done, 900));
  observer.disconnect();
  return { drawn: changes[0] ?? Number.NaN, fine: changes.at(-1) ?? Number.NaN };
}

async function measureManyPulses(page: Page, door: TestDoor): Promise<Line[]> {
  const run = await readIn(door, "many-pulses", manyPulses(3000));
  await page.goto(`${door.address.replace(/#.*/, "")}#/run/${run}`);
  await page.waitForFunction(() => document.querySelectorAll(".written-line").length > 40, null, {
    timeout: 60_000,
  });
  const frames = await page.evaluate(scrollThrough);
  const { rows } = await door.ask("pulses", { run, limit: 5000 });
  const slow = frames.toSorted((a, b) => a - b)[Math.floor(frames.length * 0.95)];
  return [
    {
      figure: `scrolling ${rows.length} pulses: 95 % of frames within`,
      measured: `${slow.toFixed(0)} ms`,
      target: "≤ 34 ms",
      reached: slow <= 34,
    },
    await memoryLine(page, `memory of the page with ${rows.length} pulses`),
  ];
}

/** In the page: scrolls down a step a frame; the time each frame took. */
async function scrollThrough(): Promise<number[]> {
  const frames: number[] = [];
  let before = performance.now();
  const end = document.documentElement.scrollHeight - innerHeight;
  for (let y = 0; y < end; y += 60) {
    scrollTo(0, y);
    await new Promise(requestAnimationFrame);
    frames.push(performance.now() - before);
    before = performance.now();
  }
  return frames;
}

/** What the page's own process holds for itself (anonymous pages, as Linux counts them), libraries left out. */
async function memoryLine(page: Page, figure: string): Promise<Line> {
  const session = await page.context().newCDPSession(page);
  await session.send("HeapProfiler.collectGarbage");
  await session.detach();
  const machine = await page.context().browser()!.newBrowserCDPSession();
  const { processInfo } = await machine.send("SystemInfo.getProcessInfo");
  await machine.detach();
  const held = processInfo
    .filter(({ type }) => type === "renderer")
    .map(({ id }) => Number(/RssAnon:\s+(\d+) kB/.exec(readFileSync(`/proc/${id}/status`, "utf8"))![1]));
  const megabytes = (Math.max(...held) * 1024) / 1e6;
  return { figure, measured: `${megabytes.toFixed(0)} MB`, target: "< 300 MB", reached: megabytes < 300 };
}

function timeLine(figure: string, value_ms: number, most_ms: number): Line {
  return {
    figure,
    measured: `${value_ms.toFixed(0)} ms`,
    target: `≤ ${most_ms} ms`,
    reached: value_ms <= most_ms,
  };
}
