/** Reading speed against two general CSV readers on the same file in one run, and peak memory up to 1 GB. */
import { execFileSync } from "node:child_process";
import { createReadStream, mkdtempSync, readFileSync, rmSync, statSync } from "node:fs";
import { availableParallelism, tmpdir } from "node:os";
import { join } from "node:path";
import Papa from "papaparse";
import { inferSchema, initParser } from "udsv";
import { build } from "vite";
import { readFile, useParseWorker } from "../../app/host/reading/index.ts";
import { writeCapture } from "./ingest-file.ts";

const speedFile_bytes = 90e6;
const largeFile_bytes = 1e9;
const worker = new URL("../../dist/app/parse-worker.js", import.meta.url);

export async function run(): Promise<void> {
  const folder = mkdtempSync(join(tmpdir(), "ringbook-bench-"));
  try {
    await speed(join(folder, "speed.csv"));
    await memory(folder);
    await cancelling(join(folder, "speed.csv"));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

async function speed(path: string): Promise<void> {
  const rows = writeCapture(path, speedFile_bytes);
  const bytes = statSync(path).size;
  console.log(`${(bytes / 1e6).toFixed(0)} MB, ${rows} rows of 3 numbers, ${availableParallelism()} cores`);
  useParseWorker(worker);
  const readers: [string, () => Promise<number>][] = [
    ["Ringbook, layout, hash and captures included", () => byRingbook(path)],
    ["PapaParse, chunks, numbers into typed arrays", () => byPapaParse(path, rows)],
    ["udsv, whole string, numbers into typed arrays", () => byUdsv(path, rows)],
  ];
  const best = new Map<string, number>();
  // Turn about, so that a busy moment of the machine hits all alike; the best of three counts.
  for (let round = 0; round < 3; round++)
    for (const [name, read] of readers) {
      const start = performance.now();
      const sum = await read();
      if (!Number.isFinite(sum)) throw new Error(`${name} read no numbers`);
      best.set(name, Math.min(best.get(name) ?? Infinity, (performance.now() - start) / 1000));
    }
  const own = best.get(readers[0][0]) ?? NaN;
  for (const [name, seconds] of best)
    console.log(
      `${name.padEnd(48)} ${seconds.toFixed(2)} s  ${(bytes / 1e6 / seconds).toFixed(0)} MB/s  ratio ${(seconds / own).toFixed(1)}`,
    );
}

async function byRingbook(path: string): Promise<number> {
  const { captures } = await readFile(path, {});
  return captures[0].channels[0].samples[1000];
}

function byPapaParse(path: string, rows: number): Promise<number> {
  const columns = [0, 1, 2].map(() => new Float64Array(rows));
  let row = -1;
  return new Promise((resolve, reject) =>
    Papa.parse<string[]>(createReadStream(path, { highWaterMark: 1 << 20 }), {
      chunk: ({ data }) => {
        for (const cells of data) {
          if (row >= 0 && row < rows) for (let k = 0; k < 3; k++) columns[k][row] = Number(cells[k]);
          row++;
        }
      },
      complete: () => resolve(columns[1][1000]),
      error: reject,
    }),
  );
}

async function byUdsv(path: string, rows: number): Promise<number> {
  const text = readFileSync(path, "utf8");
  const parser = initParser(inferSchema(text));
  const columns = [0, 1, 2].map(() => new Float64Array(rows));
  const table = parser.typedCols(text) as number[][];
  for (let k = 0; k < 3; k++) columns[k].set(table[k]);
  return columns[1][1000];
}

interface Used {
  idle: number;
  arrays: number;
  peak: number;
  seconds: number;
  longestPause_ms: number;
}

const mb = (count: number) => `${(count / 1e6).toFixed(0)} MB`;

/** In a process of its own, built as the program is: a compiler beside it would count as its memory. */
async function memory(folder: string): Promise<void> {
  const entry = join(import.meta.dirname, "ingest-memory.ts");
  const rollupOptions = { input: entry, output: { entryFileNames: "memory.mjs" } };
  await build({
    configFile: false,
    logLevel: "error",
    ssr: { noExternal: true },
    build: { ssr: true, outDir: folder, emptyOutDir: false, rollupOptions },
  });
  const path = join(folder, "large.csv");
  for (const bytes of [speedFile_bytes, largeFile_bytes]) {
    writeCapture(path, bytes);
    const output = execFileSync(process.execPath, [join(folder, "memory.mjs"), path, worker.href], {
      encoding: "utf8",
    });
    const used = JSON.parse(output) as Used;
    console.log(
      `${mb(bytes)} file in ${used.seconds.toFixed(1)} s: channel arrays ${mb(used.arrays)}, peak memory ${mb(used.peak)}, ` +
        `beyond the arrays ${mb(used.peak - used.arrays)} (an idle process has ${mb(used.idle)}), longest time between progress ${used.longestPause_ms.toFixed(0)} ms`,
    );
    rmSync(path);
  }
}

async function cancelling(path: string): Promise<void> {
  writeCapture(path, speedFile_bytes);
  const signal = { aborted: false };
  let at = 0;
  setTimeout(() => {
    signal.aborted = true;
    at = performance.now();
  }, 150);
  const code = await readFile(path, {}, { signal }).then(
    () => "read to the end",
    (error: { code: string }) => error.code,
  );
  console.log(`stopped ${(performance.now() - at).toFixed(0)} ms after the signal (${code})`);
}
