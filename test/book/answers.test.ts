/** What was answered for one file serves the next of its layout, is said, and can be taken back. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterEach, beforeEach, expect, it } from "vitest";
import { openBook, type Book } from "../../app/host/book/index.ts";
import { captureText, readFolder, state } from "./real-files.ts";
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

function write(folder: string, file: string, name?: string): string {
  const path = join(place.folder, folder);
  mkdirSync(path, { recursive: true });
  writeFileSync(join(path, file), captureText(name));
  return path;
}
const codesOf = (run: number) => book.captures(run)[0].reading.notes.map(({ code }) => code);
const first = (run: number) => book.captures(run)[0];

it("asks for the first file, and reads the next of its layout by the answer, with a note that says whence", async () => {
  const a = await readFolder(book, write("monday", "a.csv"));
  expect(codesOf(a)).toContain("interval-unknown");
  await state(book, a, { sampleInterval_s: 2e-7 });
  expect(first(a).reading.timebase.step_s).toBe(2e-7);

  const b = await readFolder(book, write("tuesday", "b.csv"));
  expect(first(b).reading.timebase.step_s).toBe(2e-7);
  expect(codesOf(b)).toContain("answered-before");
  expect(first(b).reading.notes[0].text).toContain('in the run "monday"');
  expect(book.run(b).origins.sampleInterval_s).toBe("answered before");
});

it("does not carry an answer to another layout, nor over what the file's own setup says", async () => {
  await state(book, await readFolder(book, write("monday", "a.csv")), { sampleInterval_s: 2e-7 });
  expect(codesOf(await readFolder(book, write("other", "a.csv", "Other (V)")))).toContain("interval-unknown");
  const path = write("stated", "a.csv");
  writeFileSync(join(path, "setup.json"), JSON.stringify({ sampleInterval_s: 5e-7 }));
  const c = await readFolder(book, path);
  expect(first(c).reading.timebase.step_s).toBe(5e-7);
  expect(codesOf(c)).not.toContain("answered-before");
});

it("remembers no more what was taken back", async () => {
  const a = await readFolder(book, write("monday", "a.csv"));
  await state(book, a, { sampleInterval_s: 2e-7 });
  book.undo(a);
  expect(codesOf(await readFolder(book, write("tuesday", "b.csv")))).toContain("interval-unknown");
});

it("takes the last of several answers, and none where the last is none", async () => {
  const a = await readFolder(book, write("monday", "a.csv"));
  await state(book, a, { sampleInterval_s: 2e-7 });
  await state(book, a, { sampleInterval_s: 4e-7 });
  expect(first(await readFolder(book, write("tuesday", "b.csv"))).reading.timebase.step_s).toBe(4e-7);
  await state(book, a, { sampleInterval_s: null });
  expect(codesOf(await readFolder(book, write("wednesday", "b.csv")))).toContain("interval-unknown");
});
