import { spawnSync } from "node:child_process";
import { copyFileSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import { DatabaseSync } from "@photostructure/sqlite";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { openBook } from "../../app/host/book/index.ts";
import { migrations } from "../../app/host/book/schema.ts";
import { faultsOf, killWriter } from "./kill.ts";
import { schemaText } from "./schema-text.ts";
import { judged, temporaryFolder, trainOf } from "./runs.ts";

let place: ReturnType<typeof temporaryFolder>;
let path: string;
beforeEach(() => {
  place = temporaryFolder();
  path = join(place.folder, "bench.db");
});
afterEach(() => place.remove());

async function makeBook(): Promise<void> {
  const book = await openBook(path);
  const run = book.ensureRun({ key: "name:a", name: "a", folder: null });
  book.keepRun(run, judged([{ name: "a.csv", verdicts: trainOf(200) }]));
  book.close();
}

describe("the schema", () => {
  it("is the committed one: a change needs a migration of its own and a new fixture", async () => {
    await makeBook();
    expect(schemaText(path)).toBe(readFileSync(join(import.meta.dirname, "fixtures", "schema.sql"), "utf8"));
  });

  const formats = migrations.map((_, i) => i + 1);

  it.each(formats)("reads a book of format %i as it was committed", async (format) => {
    copyFileSync(join(import.meta.dirname, "fixtures", `book-${format}.db`), path);
    const book = await openBook(path);
    expect(book.readOnly).toBe(false);
    expect(book.run(1)).toMatchObject({ name: "old run", counts: { pulses: 5, sparks: 3, quiet: 2 } });
    expect(book.capture(1).reading.pulses[0].ruled).toMatchObject({ verdict: "no-spark" });
    book.close();
  });

  it.each(formats.slice(0, -1))(
    "opens one of format %i for reading while it can't be brought up to date",
    async (format) => {
      copyFileSync(join(import.meta.dirname, "fixtures", `book-${format}.db`), path);
      const other = new DatabaseSync(path);
      other.exec("BEGIN IMMEDIATE");
      const book = await openBook(path);
      other.close();
      expect(book).toMatchObject({ readOnly: true, note: expect.stringContaining("locked") });
      expect(book.run(1)).toMatchObject({ name: "old run", counts: { pulses: 5, sparks: 3, quiet: 2 } });
      expect(book.capture(1)).toMatchObject({ companions: [], file: expect.stringContaining("old.csv") });
      expect(book.runs({}).rows).toHaveLength(1);
      expect(book.coils()).toHaveLength(1);
      expect(() => book.rule(1, 0, "spark", "")).toThrow("for reading only");
      book.close();
    },
    20_000,
  );

  it("refuses a newer book and changes nothing in it", async () => {
    await makeBook();
    const db = new DatabaseSync(path);
    db.exec("INSERT INTO versions VALUES (999, '2030-01-01', '9.0.0')");
    db.close();
    await expect(openBook(path)).rejects.toThrow("written by a newer Ringbook (its format is 999");
  });
});

describe("a file that is no sound book", () => {
  it("is left alone when it is another database", async () => {
    const db = new DatabaseSync(path);
    db.exec("CREATE TABLE other (x)");
    db.close();
    await expect(openBook(path)).rejects.toThrow("no bench book");
  });

  it("is refused when it is no database at all", async () => {
    writeFileSync(path, "time,volts\n".repeat(500));
    await expect(openBook(path)).rejects.toThrow("can't be read");
    expect(readFileSync(path, "utf8")).toMatch(/^time,volts/);
  });

  it("opens for reading only when pages are damaged, and says so", async () => {
    await makeBook();
    const bytes = readFileSync(path);
    const db = new DatabaseSync(path);
    const root = db.prepare("SELECT rootpage FROM sqlite_schema WHERE name = 'preferences'").get() as {
      rootpage: number;
    };
    const { page_size: size } = db.prepare("PRAGMA page_size").get() as { page_size: number };
    db.close();
    bytes.fill(0xa5, (root.rootpage - 1) * size, root.rootpage * size);
    writeFileSync(path, bytes);
    const book = await openBook(path);
    expect(book.readOnly).toBe(true);
    expect(book.note).toContain("for reading only");
    expect(book.run(1).counts.pulses).toBe(200);
    expect(() => book.stateSetup(1, {})).toThrow("for reading only");
    book.close();
  });

  it("says where it can't be made", async () => {
    writeFileSync(join(place.folder, "file"), "");
    await expect(openBook(join(place.folder, "file", "bench.db"))).rejects.toThrow("can't be made at");
  });
});

describe("what a disk can do", () => {
  it("keeps what it had when the disk is full, and says so", async () => {
    await makeBook();
    // A limit on the size of files stands in for the full disk: the write fails in the same place.
    const writer = spawnSync(
      "bash",
      [
        "-c",
        `ulimit -f 400; exec "$0" --import tsx "$1" "$2"`,
        process.execPath,
        join(import.meta.dirname, "writer.ts"),
        path,
      ],
      { encoding: "utf8", timeout: 25_000 },
    );
    expect(writer.stdout).toMatch(/failed (disk-full|book-io): the disk/);
    const kept = [...writer.stdout.matchAll(/^kept (\d+)$/gm)].map((match) => Number(match[1]));
    expect(kept.length).toBeGreaterThan(0);
    expect(await faultsOf(path, kept)).toEqual([]);
  });

  it("loses no acknowledged run and leaves no lock when a writer is killed", async () => {
    const acknowledged: number[] = [];
    for (let i = 0; i < 5; i++) acknowledged.push(...(await killWriter(path, (i * 0.37) % 1)));
    expect(acknowledged.length).toBeGreaterThan(5);
    expect(await faultsOf(path, acknowledged)).toEqual([]);
  });

  it("takes two programs on one book", async () => {
    const first = await openBook(path);
    const second = await openBook(path);
    const run = first.ensureRun({ key: "name:a", name: "a", folder: null });
    expect(second.ensureRun({ key: "name:a", name: "a", folder: null })).toBe(run);
    first.keepRun(run, judged([{ name: "a.csv", verdicts: trainOf(8) }]));
    second.rule(second.captures(run)[0].capture, 3, "spark", "");
    expect(first.run(run).counts).toMatchObject({ sparks: 7, quiet: 1 });
    first.close();
    second.close();
  });

  it("uses a rollback journal where a write-ahead log can't be had, and says so", async () => {
    writeFileSync(path, "");
    // Locks by files, as on shares without shared memory (SQLite's own documentation of its file systems).
    const share = new URL(`${pathToFileURL(path).href}?vfs=unix-dotfile`);
    const book = await openBook(share as unknown as string);
    expect(book).toMatchObject({ readOnly: false, note: expect.stringContaining("rollback journal") });
    const run = book.ensureRun({ key: "name:b", name: "b", folder: null });
    book.keepRun(run, judged([{ name: "b.csv", verdicts: trainOf(8) }]));
    book.close();
    const again = await openBook(path);
    expect(again.run(run).counts.pulses).toBe(8);
    again.close();
  });

  it("makes the folder a new book lies in", async () => {
    path = join(place.folder, "a", "b", "bench.db");
    const book = await openBook(path);
    book.close();
    mkdirSync(join(place.folder, "a", "b"), { recursive: true });
    expect(readFileSync(path).subarray(0, 15).toString()).toBe("SQLite format 3");
  });
});
