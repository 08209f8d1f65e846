/** What was answered for one file serves the next of its layout, is said, and can be taken back. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterEach, beforeEach, expect, it } from "vitest";
import { openBook, type Book } from "../../app/host/book/index.ts";
import type { Reader } from "../../app/host/jobs/read-run.ts";
import { readAgain, readSources, type Readout } from "../../app/host/jobs/read-sources.ts";
import { changedSetup } from "../../app/host/setups.ts";
import { createReader } from "../../app/host/threads/reader.ts";
import { temporaryFolder } from "./runs.ts";

let place: ReturnType<typeof temporaryFolder>;
let book: Book;
beforeEach(async () => {
  place = temporaryFolder();
  book = await openBook(join(place.folder, "bench.db"));
});
afterEach(() => {
  book.close();
  place.remove();
});

const { read, judge } = createReader();
const reader = {
  ask: async (name: string, argument: never) =>
    name === "read" ? read(argument, () => {}) : judge(argument),
} as unknown as Reader;
const readout: Readout = {
  cancelled: false,
  begin: () => {},
  progress: () => {},
  problem: (file, error) => {
    throw new Error(`${file}: ${JSON.stringify(error)}`);
  },
  kept: () => {},
};

/** Values without a time: the interval is asked for. `name` makes another layout. */
function write(folder: string, file: string, name = "Node (V)"): string {
  const path = join(place.folder, folder);
  mkdirSync(path, { recursive: true });
  const ring = (i: number) =>
    i < 100 ? 0.3 : 12 + 300 * Math.exp(-(i - 100) / 200) * Math.sin((i - 100) / 9);
  const rows = Array.from({ length: 900 }, (_, i) => `${ring(i).toFixed(2)}`);
  writeFileSync(join(path, file), [name, ...rows].join("\n"));
  return path;
}

async function readFolder(path: string): Promise<number> {
  await readSources(reader, book, readout, [path], null, null);
  return book.runs({}).rows.find(({ name }) => path.endsWith(name))!.run;
}
async function answer(run: number, change: Record<string, unknown>) {
  book.stateSetup(run, changedSetup(book.stated(run), change), change);
  await readAgain(reader, book, readout, run);
}
const codesOf = (run: number) => book.captures(run)[0].reading.notes.map(({ code }) => code);
const first = (run: number) => book.captures(run)[0];

it("asks for the first file, and reads the next of its layout by the answer, with a note that says whence", async () => {
  const a = await readFolder(write("monday", "a.csv"));
  expect(codesOf(a)).toContain("interval-unknown");
  await answer(a, { sampleInterval_s: 2e-7 });
  expect(first(a).reading.timebase.step_s).toBe(2e-7);

  const b = await readFolder(write("tuesday", "b.csv"));
  expect(first(b).reading.timebase.step_s).toBe(2e-7);
  expect(codesOf(b)).toContain("answered-before");
  expect(first(b).reading.notes[0].text).toContain('in the run "monday"');
  expect(book.run(b).origins.sampleInterval_s).toBe("answered before");
});

it("does not carry an answer to another layout, nor over what the file's own setup says", async () => {
  await answer(await readFolder(write("monday", "a.csv")), { sampleInterval_s: 2e-7 });
  expect(codesOf(await readFolder(write("other", "a.csv", "Other (V)")))).toContain("interval-unknown");
  const path = write("stated", "a.csv");
  writeFileSync(join(path, "setup.json"), JSON.stringify({ sampleInterval_s: 5e-7 }));
  const c = await readFolder(path);
  expect(first(c).reading.timebase.step_s).toBe(5e-7);
  expect(codesOf(c)).not.toContain("answered-before");
});

it("remembers no more what was taken back", async () => {
  const a = await readFolder(write("monday", "a.csv"));
  await answer(a, { sampleInterval_s: 2e-7 });
  book.undo(a);
  expect(codesOf(await readFolder(write("tuesday", "b.csv")))).toContain("interval-unknown");
});

it("takes the last of several answers, and none where the last is none", async () => {
  const a = await readFolder(write("monday", "a.csv"));
  await answer(a, { sampleInterval_s: 2e-7 });
  await answer(a, { sampleInterval_s: 4e-7 });
  expect(first(await readFolder(write("tuesday", "b.csv"))).reading.timebase.step_s).toBe(4e-7);
  await answer(a, { sampleInterval_s: null });
  expect(codesOf(await readFolder(write("wednesday", "b.csv")))).toContain("interval-unknown");
});
