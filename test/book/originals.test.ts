/** The files themselves in the book: only where wanted, and read from there when their own place is gone. */
import { mkdirSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterEach, beforeEach, expect, it } from "vitest";
import { openBook, type Book } from "../../app/host/book/index.ts";
import { keepFiles, placeOfCapture } from "../../app/host/originals.ts";
import { captureText, readFolder, state } from "./real-files.ts";
import { temporaryFolder } from "./runs.ts";

let place: ReturnType<typeof temporaryFolder>;
let book: Book;
let path: string;
beforeEach(async () => {
  place = temporaryFolder();
  book = await openBook(join(place.folder, "bench.db"));
  path = join(place.folder, "monday");
  mkdirSync(path);
  writeFileSync(join(path, "a.csv"), captureText("Node (V)", 2e-7));
  writeFileSync(join(path, "setup.json"), JSON.stringify({ capacitor_F: 1e-7, supply_V: 12 }));
});
afterEach(() => {
  book.close();
  place.remove();
});
const first = (run: number) => book.captures(run)[0];

it("computes a run again from the copies, with the setup its folder had, when the folder is gone", async () => {
  book.setPreference(keepFiles, "yes");
  const run = await readFolder(book, path);
  const before = first(run);
  rmSync(path, { recursive: true });
  await state(book, run, { capacitor_F: 2e-7 });
  const after = first(run);
  expect(after.sha256).toBe(before.sha256);
  expect(after.setup).toMatchObject({ capacitor_F: 2e-7, supply_V: 12 });
  // Thomson's formula: twice the capacitance at the same frequency is half the inductance.
  const [l0, l1] = [before, after].map(({ reading }) => reading.pulses[0].inductance_H!.value);
  expect(l1 / l0).toBeCloseTo(0.5, 6);
  expect(await placeOfCapture(book, after.capture)).not.toBe(after.file);
});

it("keeps what its folder said however often it is computed again", async () => {
  book.setPreference(keepFiles, "yes");
  const run = await readFolder(book, path);
  rmSync(path, { recursive: true });
  for (const capacitor_F of [2e-7, 3e-7]) await state(book, run, { capacitor_F });
  expect(first(run).setup).toMatchObject({ capacitor_F: 3e-7, supply_V: 12 });
  expect(book.run(run).origins).toMatchObject({ capacitor_F: "stated", supply_V: "folder setup" });
});

it("is carried by a backup", async () => {
  book.setPreference(keepFiles, "yes");
  const run = await readFolder(book, path);
  const copy = join(place.folder, "copy.db");
  await book.backup(copy);
  const other = await openBook(copy);
  expect(other.originals().has(first(run).sha256)).toBe(true);
  other.close();
});

it("copies nothing unasked", async () => {
  // Another file than above: what was unpacked once stays so while the program runs.
  writeFileSync(join(path, "a.csv"), captureText("Node (V)", 3e-7));
  const run = await readFolder(book, path);
  expect(book.originals().has(first(run).sha256)).toBe(false);
  rmSync(path, { recursive: true });
  await expect(state(book, run, { supply_V: 14 })).rejects.toThrow("a.csv");
});

it("holds what was read along with a file: its settings, and the further channels of its shot", async () => {
  book.setPreference(keepFiles, "yes");
  const shot = join(place.folder, "shot");
  mkdirSync(shot);
  writeFileSync(join(shot, "a_ch1.csv"), captureText("Node (V)", 4e-7));
  writeFileSync(join(shot, "a_ch2.csv"), captureText("Coil (V)", 4e-7));
  writeFileSync(
    join(shot, "setup.json"),
    JSON.stringify({
      channels: [
        { file: "a_ch1.csv", position: 0 },
        { file: "a_ch2.csv", position: 0, scale: 2 },
      ],
    }),
  );
  const bare = join(place.folder, "bare");
  mkdirSync(bare);
  writeFileSync(join(bare, "b.csv"), captureText("Node (V)"));
  writeFileSync(join(bare, "b.txt"), "Record Length:900:\nStart:0:\nStop:0.0001798:\nPoints:900:\n");
  const runs = [await readFolder(book, shot), await readFolder(book, bare)];
  expect(runs.map((run) => first(run).companions.map(({ name }) => name))).toEqual([
    ["a_ch2.csv"],
    ["b.txt"],
  ]);
  // One of the shot's files is enough to be missed.
  rmSync(join(shot, "a_ch2.csv"));
  rmSync(bare, { recursive: true });
  for (const run of runs) await state(book, run, { supply_V: 14 });
  const [joined, settled] = runs.map((run) => first(run).reading);
  expect(joined.channels.map(({ name, scale }) => [name, scale])).toEqual([
    ["Node", 1],
    ["Coil", 2],
  ]);
  expect(settled.timebase.step_s).toBeCloseTo(2e-7, 12);
});
