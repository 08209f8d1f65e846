/**
 * Another program on the book, for tests of kills and faults: adds runs of 20 pulses and says each one
 * on standard output once it is kept. `hold` takes the write lock and keeps it.
 */
import { DatabaseSync } from "@photostructure/sqlite";
import { openBook } from "../../app/host/book/index.ts";
import { judged, trainOf } from "./runs.ts";

const [path, mode] = process.argv.slice(2);

async function write(): Promise<void> {
  const book = await openBook(path);
  for (let i = book.runCount(); ; i++) {
    const name = `${process.pid}-${i}`;
    try {
      const run = book.ensureRun({ key: `name:${name}`, name, folder: null });
      book.keepRun(run, judged([{ name, verdicts: trainOf(20) }]));
      process.stdout.write(`kept ${run}\n`);
    } catch (error) {
      process.stdout.write(`failed ${(error as { code?: string }).code}: ${(error as Error).message}\n`);
      book.close();
      return;
    }
    await new Promise((next) => setImmediate(next));
  }
}

function hold(): void {
  const db = new DatabaseSync(path);
  db.exec("BEGIN IMMEDIATE");
  process.stdout.write("held\n");
  setInterval(() => {}, 1000);
}

await (mode === "hold" ? hold() : write());
