/** Settings beside a column of numbers, and scopes that save each channel by itself. */
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { findSources } from "../../app/host/sources.ts";
import { readFile } from "../../app/host/reading/index.ts";
import { current, node } from "./shapes/shape.ts";

let folder = "";
beforeEach(() => (folder = mkdtempSync(join(tmpdir(), "ringbook-neighbours-"))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const file = (name: string, lines: string[]) => {
  writeFileSync(join(folder, name), `${lines.join("\n")}\n`);
  return join(folder, name);
};
const times = Array.from({ length: 500 }, (_, i) => (i - 100) * 4e-6);
const channel = (name: string, signal: (t: number) => number, start = 0) => [
  `Time (s),${name}`,
  ...times.map((t) => `${(t + start).toFixed(6)},${signal(t).toFixed(3)}`),
];
const numbers = times.map((t) => node(t).toFixed(2));

describe("a settings file of the same stem", () => {
  const settings = [
    "Instrument:bench recorder:",
    "Record Length:1000:",
    "Start:0:",
    "Stop:0.004:",
    "Points:500:",
    "Start:-0.0004:",
    "Stop:0.001596:",
  ];

  it("gives the interval, from the group whose length fits", async () => {
    const path = file("shot.csv", numbers);
    file("shot.txt", settings);
    const { captures } = await readFile(path, {});
    expect(captures[0].timebase.step_s).toBeCloseTo(4e-6, 12);
    expect(captures[0].timebase.start_s).toBe(-0.0004);
    expect(captures[0].timebase.stepUncertainty_s).toBeGreaterThan(0);
  });

  it("is no capture of the folder, and without it the interval is asked", async () => {
    const path = file("shot.csv", numbers);
    file("other.csv", channel("A (V)", node));
    const alone = await readFile(path, {});
    expect(alone.captures[0].timebase.step_s).toBeNull();
    file("shot.txt", settings);
    const { files } = await findSources([folder], null);
    expect(files.map((source) => source.path)).toEqual([join(folder, "other.csv"), path]);
  });
});

describe("one file per channel", () => {
  const channels = [
    { file: "shot1_ch1.csv", role: "switch-node" as const },
    { file: "shot1_ch2.csv", role: "coil-current" as const, unit: "A", scale: 10 },
  ];

  it("is offered, never joined unasked", async () => {
    const path = file("shot1_ch1.csv", channel("A (V)", node));
    file("shot1_ch2.csv", channel("B (V)", current));
    file("shot2_ch1.csv", channel("A (V)", node));
    file("shot1_ch3.csv", channel("C (V)", current, 0.5));
    const { captures } = await readFile(path, {});
    expect(captures[0].channels.length).toBe(1);
    const offer = captures[0].notes.find(({ code }) => code === "channel-files");
    expect(offer?.text).toContain("shot1_ch2.csv");
    expect(offer?.text).not.toMatch(/shot2|ch3/);
    expect(offer?.answers).toBe("channels");
  });

  it("is joined where the setup names the files, and listed once", async () => {
    const path = file("shot1_ch1.csv", channel("A (V)", node));
    const second = file("shot1_ch2.csv", channel("B (V)", current));
    const { captures } = await readFile(path, { channels });
    expect(
      captures[0].channels.map(({ position, role, unit, scale }) => ({ position, role, unit, scale })),
    ).toEqual([
      { position: 0, role: "switch-node", unit: "V", scale: 1 },
      { position: 1, role: "coil-current", unit: "A", scale: 10 },
    ]);
    const { files } = await findSources([path, second], { channels });
    expect(files.map((source) => source.path)).toEqual([path]);
  });

  it("is refused where the files are not of one shot", async () => {
    const path = file("shot1_ch1.csv", channel("A (V)", node));
    file("shot1_ch2.csv", channel("B (V)", current, 0.5));
    await expect(readFile(path, { channels })).rejects.toMatchObject({ code: "channel-files-differ" });
  });
});
