/** Real files through the reading road into a book, in this very process. */
import { basename } from "node:path";
import type { Book } from "../../app/host/book/index.ts";
import type { Reader } from "../../app/host/jobs/read-run.ts";
import { readAgain, readSources, type Readout } from "../../app/host/jobs/read-sources.ts";
import { changedSetup } from "../../app/host/setups.ts";
import { createReader } from "../../app/host/threads/reader.ts";

function inThisProcess(): Reader {
  const { read, judge } = createReader();
  return {
    ask: async (name: string, argument: never) =>
      name === "read" ? read(argument, () => {}) : judge(argument),
  } as unknown as Reader;
}

const readout: Readout = {
  cancelled: false,
  begin: () => {},
  progress: () => {},
  problem: (file, error) => {
    throw new Error(`${file}: ${JSON.stringify(error)}`);
  },
  kept: () => {},
};

/** Reads a folder into the run of its name, and answers that run. */
export async function readFolder(book: Book, path: string): Promise<number> {
  await readSources(inThisProcess(), book, readout, [path], null, null);
  return book.runs({}).rows.find(({ name }) => name === basename(path))!.run;
}

/** Changes what is stated and computes the run again, as the window does. */
export async function state(book: Book, run: number, change: Record<string, unknown>): Promise<void> {
  book.stateSetup(run, changedSetup(book.stated(run), change), change);
  await readAgain(inThisProcess(), book, readout, run);
}

/** A switch-off's trace, values only unless `step_s` is given; `name` makes another layout. */
export function captureText(name = "Node (V)", step_s?: number): string {
  const ring = (i: number) =>
    i < 100 ? 0.3 : 12 + 300 * Math.exp(-(i - 100) / 200) * Math.sin((i - 100) / 9);
  const rows = Array.from({ length: 900 }, (_, i) => ring(i).toFixed(2));
  if (step_s === undefined) return [name, ...rows].join("\n");
  return [`Time (s),${name}`, ...rows.map((row, i) => `${(i * step_s).toExponential(6)},${row}`)].join("\n");
}
