/** A capture file's copy in the book: made where the user wants it, read where the file itself is gone. */
import { existsSync, mkdirSync, mkdtempSync, rmSync } from "node:fs";
import { readFile, stat, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { basename, dirname, join } from "node:path";
import { promisify } from "node:util";
import { gunzip, gzip } from "node:zlib";
import type { Book } from "./book/index.ts";
import { hashOf, type Companion } from "./reading/index.ts";

/** A preference of the book: "yes" copies every file that is read into it. */
export const keepFiles = "keepFiles";

/** SQLite holds no blobs much larger, and a book is to be carried about. */
const mostKept_bytes = 500e6;

const squeeze = promisify(gzip);
const unsqueeze = promisify(gunzip);

/**
 * Copies the file in with what was read along with it, if the book is to hold files; not when they have changed
 * since they were read.
 */
export async function keepCopy(
  book: Book,
  path: string,
  sha256: string,
  companions: Companion[],
): Promise<void> {
  if (book.preferences()[keepFiles] !== "yes") return;
  await addCopy(book, path, sha256);
  for (const companion of companions)
    await addCopy(book, join(dirname(path), companion.name), companion.sha256);
}

async function addCopy(book: Book, path: string, sha256: string): Promise<void> {
  if (book.originals().has(sha256) || !existsSync(path) || (await stat(path)).size > mostKept_bytes) return;
  const bytes = await readFile(path);
  if (hashOf(bytes) === sha256) book.originals().add(sha256, bytes.length, await squeeze(bytes));
}

const unpacked = new Map<string, string>();

/**
 * Where the file can be read: its own place, else its copy, unpacked until the program ends, with what belongs
 * to it beside it.
 */
export async function placeOf(book: Book, path: string, sha256: string): Promise<string> {
  const companions = book.companions(sha256);
  const beside = companions.map(({ name }) => join(dirname(path), name));
  if ([path, ...beside].every((file) => existsSync(file))) return path;
  const before = unpacked.get(sha256);
  if (before) return before;
  const folder = join(copiesFolder(), sha256);
  const copy = join(folder, basename(path));
  if (!(await unpack(book, sha256, copy))) return path;
  for (const companion of companions)
    await unpack(book, companion.sha256, join(folder, basename(companion.name)));
  unpacked.set(sha256, copy);
  return copy;
}

/** Whether the copy could be had whole. */
async function unpack(book: Book, sha256: string, to: string): Promise<boolean> {
  const kept = book.originals().get(sha256);
  if (!kept) return false;
  const bytes = await unsqueeze(kept);
  if (hashOf(bytes) !== sha256) return false;
  mkdirSync(dirname(to), { recursive: true });
  await writeFile(to, bytes);
  return true;
}

export function placeOfCapture(book: Book, capture: number): Promise<string> {
  const { path, sha256 } = book.captureFile(capture);
  return placeOf(book, path, sha256);
}

let copies: string | null = null;

function copiesFolder(): string {
  if (copies) return copies;
  const folder = mkdtempSync(join(tmpdir(), "ringbook-copies-"));
  process.once("exit", () => rmSync(folder, { recursive: true, force: true }));
  return (copies = folder);
}
