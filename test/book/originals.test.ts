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
