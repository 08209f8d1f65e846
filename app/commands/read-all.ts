import { resolve } from "node:path";
import { SetupError } from "../../analysis/setup/parse.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { openBook } from "../host/book/index.ts";
import { describeFailure } from "../host/failure.ts";
import type { JudgedSource } from "../host/jobs/read-run.ts";
import { readSources, type Readout } from "../host/jobs/read-sources.ts";
import { keepFiles } from "../host/originals.ts";
import { readSetupFile } from "../host/setups.ts";
import { createReader } from "../host/threads/reader.ts";
import { UsageError } from "./usage.ts";

export interface ReadAll {
  /** Judged, in the order they were named. */
  files: JudgedSource[];
  problems: { file: string; text: string }[];
}

/**
 * Reads files and folders run by run, into the book of that path if one is named; with `copies` that book
 * keeps the files themselves from now on.
 */
export async function readAll(
  paths: string[],
  setup: Setup | null,
  bookPath: string | null,
  copies = false,
): Promise<ReadAll> {
  const book = bookPath === null ? null : await openBook(bookPath);
  if (copies) book?.setPreference(keepFiles, "yes");
  const { readout, result } = collect();
  try {
    await readSources(inProcess(), book, readout, paths, null, setup);
  } finally {
    book?.close();
  }
  clearProgress();
  return result();
}

/** What `--setup FILE` states; an unusable one is wrong usage. */
export async function statedSetup(path: string | undefined): Promise<Setup | null> {
  if (path === undefined) return null;
  try {
    return await readSetupFile(path);
  } catch (error) {
    const { text } = describeFailure(error);
    throw new UsageError(error instanceof SetupError ? text : `--setup: ${text}`);
  }
}

/** The terminal reads in its own process: nothing waits beside it. */
function inProcess() {
  const { read, judge } = createReader();
  return {
    ask: async (name: "read" | "judge", argument: never, onProgress: (fraction: number) => void = () => {}) =>
      (name === "read" ? await read(argument, onProgress) : judge(argument)) as never,
  };
}

function collect() {
  let order: string[] = [];
  const judged = new Map<string, JudgedSource>();
  const problems: ReadAll["problems"] = [];
  const readout: Readout = {
    cancelled: false,
    begin: (sources) => (order = sources.map(({ path }) => resolve(path))),
    progress: (done) => showProgress(done, order.length),
    problem: (file, error) => problems.push({ file, text: describeFailure(error).text }),
    kept(_run, files) {
      for (const file of files) judged.set(resolve(file.path), file);
    },
  };
  const result = (): ReadAll => ({ files: order.flatMap((path) => judged.get(path) ?? []), problems });
  return { readout, result };
}

const showProgress = (done: number, total: number) => {
  if (process.stderr.isTTY) process.stderr.write(`\r${Math.floor(done)} of ${total} read`);
};
const clearProgress = () => {
  if (process.stderr.isTTY) process.stderr.write("\r\u001b[K");
};
