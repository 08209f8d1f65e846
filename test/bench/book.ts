/**
 * A book of a million pulses in 10,000 captures of 1,000 runs: what a list, a history and a page cost
 * against reading the whole table, in one run. Invented readings; the sizes are those of a busy bench.
 */
import { join } from "node:path";
import { DatabaseSync } from "@photostructure/sqlite";
import { openBook } from "../../app/host/book/index.ts";
import { judged, setup, temporaryFolder, trainOf } from "../book/runs.ts";

const runs = Number(process.env.BENCH_RUNS ?? 1000);
const capturesEach = 10;
const pulsesEach = 100;

const milliseconds = async <T>(work: () => T | Promise<T>): Promise<[number, T]> => {
  const start = performance.now();
  const answer = await work();
  return [performance.now() - start, answer];
};

export async function run(): Promise<void> {
  const place = temporaryFolder();
  const path = join(place.folder, "bench.db");
  await fill(path);

  const [opening, book] = await milliseconds(() => openBook(path));
  const scanned = new DatabaseSync(path, { readOnly: true });
  const [scan] = await milliseconds(() => scanned.prepare("SELECT * FROM pulses").all().length);
  const middle = Math.ceil(runs / 2);
  const lines: [string, number, number | null][] = [["open", opening, 300]];
  const time = async (name: string, limit: number, work: () => unknown) =>
    lines.push([name, (await milliseconds(work))[0], limit]);
  await time("runs, first page", 100, () => book.runs({}));
  await time("runs, search in names and remarks", 100, () => book.runs({ search: "run 77" }));
  await time("runs, by verdict", 100, () => book.runs({ verdict: "unclear" }));
  await time("pulses of a run, first page", 100, () => book.pulses(middle, {}));
  await time("coil history", 500, () => book.coilHistory("Coil 3"));
  const id = book.ensureRun({ key: "name:new", name: "new", folder: null });
  const train = judged([{ name: "new.csv", verdicts: trainOf(300) }]);
  await time("keep 300 pulses", 50, () => book.keepRun(id, train));

  console.log(`${runs * capturesEach * pulsesEach} pulses; a plain scan of them takes ${scan.toFixed(0)} ms`);
  for (const [name, ms, limit] of lines)
    console.log(
      `${name.padEnd(36)} ${ms.toFixed(1).padStart(8)} ms   limit ${limit} ms   scan / this = ${(scan / ms).toFixed(0)}`,
    );
  scanned.close();
  book.close();
  place.remove();
}

async function fill(path: string): Promise<void> {
  const book = await openBook(path);
  for (let i = 0; i < runs; i++) {
    const stated = { ...setup, coil: `Coil ${i % 20}`, taken: new Date(1.6e12 + i * 8.64e7).toISOString() };
    const id = book.ensureRun({ key: `name:${i}`, name: `run ${i}`, folder: null });
    const files = Array.from({ length: capturesEach }, (_, c) => ({
      name: `${i}-${c}.csv`,
      verdicts: trainOf(pulsesEach),
      stated,
    }));
    book.keepRun(id, judged(files));
  }
  book.close();
}
