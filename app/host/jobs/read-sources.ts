import { resolve } from "node:path";
import type { RunReading } from "../../../analysis/run.ts";
import { mergeSetups } from "../../../analysis/setup/merge.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { Book } from "../book/index.ts";
import { describeFailure } from "../failure.ts";
import { keepCopy, placeOf } from "../originals.ts";
import type { Companion } from "../reading/index.ts";
import { readSetups } from "../setups.ts";
import { findSources, groupIntoRuns, type CaptureSource } from "../sources.ts";
import { readRun, type JudgedSource, type Reader, type RunProgress } from "./read-run.ts";

/** Whoever wants to know how a reading goes: a job, or the terminal. */
export interface Readout extends RunProgress {
  /** The files that will be read, in their order. */
  begin(files: CaptureSource[]): void;
  problem(file: string, error: unknown): void;
  /**
   * A run has been judged and kept; again each time it grows. `files` are those of this reading, without
   * what the run held before; `run` is null where no book is used.
   */
  kept(run: number | null, files: JudgedSource[], reading: RunReading): void;
}

/**
 * Files and folders into their runs, run by run. With a book they join what their run holds already and
 * are kept in it; without one every run is judged by itself.
 */
export async function readSources(
  reader: Reader,
  book: Book | null,
  readout: Readout,
  paths: string[],
  named: string | null,
  setup: Setup | null,
): Promise<void> {
  const found = await findSources(paths, setup);
  for (const { file, ...failure } of found.problems) readout.problem(file, failure);
  readout.begin(found.files);
  let done = 0;
  for (const run of groupIntoRuns(found.files, named)) {
    if (readout.cancelled) return;
    const progress = countFrom(readout, done);
    done += run.files.length;
    if (!book) {
      await readRun(reader, keeperWithoutBook(readout), progress, [], run.files);
      continue;
    }
    const id = book.ensureRun(run);
    if (setup) book.stateSetup(id, mergeSetups([setup, book.stated(id) ?? {}]));
    const fresh = await withStated(run.files, book.stated(id), readout);
    const known = await keptFiles(book, id, readout);
    await readRun(reader, keeperInto(book, id, readout, fresh), progress, known, fresh);
  }
}

/** A run of the book again from its files, with what is stated now. */
export async function readAgain(reader: Reader, book: Book, readout: Readout, run: number): Promise<void> {
  const files = await keptFiles(book, run, readout);
  readout.begin(files);
  await readRun(reader, keeperInto(book, run, readout, files), readout, [], files);
}

/** The run's files where they lie, else from their copies in the book, with the setup they had there. */
async function keptFiles(book: Book, run: number, readout: Readout): Promise<CaptureSource[]> {
  const kept = book.runFiles(run);
  const files = await withStated(kept, book.stated(run), readout);
  return Promise.all(
    files.map(async (file) => {
      const { sha256, setup, origins } = kept.find(({ path }) => resolve(path) === file.path)!;
      const copy = await placeOf(book, file.path, sha256);
      if (copy === file.path) return file;
      const merged = mergeSetups([file.setup, setup]);
      return { ...file, copy, setup: merged, origins: { ...origins, ...file.origins } };
    }),
  );
}

async function withStated(files: { path: string }[], stated: Setup | null, readout: Readout) {
  const merged: CaptureSource[] = [];
  for (const file of files) {
    const path = resolve(file.path);
    try {
      merged.push({ path, ...(await readSetups(path, stated)) });
    } catch (error) {
      readout.problem(path, error);
    }
  }
  return merged;
}

const countFrom = (readout: Readout, start: number): RunProgress => ({
  get cancelled() {
    return readout.cancelled;
  },
  progress: (done) => readout.progress(start + done),
});

const keeperWithoutBook = (readout: Readout) => ({
  keep: (files: JudgedSource[], reading: RunReading) => readout.kept(null, files, reading),
  remembered: () => [],
  copy: async () => {},
  problem: (file: CaptureSource, error: unknown) => readout.problem(file.path, error),
});

const keeperInto = (book: Book, run: number, readout: Readout, fresh: CaptureSource[]) => ({
  keep(files: JudgedSource[], reading: RunReading) {
    book.keepRun(run, { files, reading });
    readout.kept(
      run,
      files.filter(({ path }) => fresh.some((file) => file.path === path)),
      reading,
    );
  },
  remembered: book.remembered,
  copy: ({ path }: CaptureSource, sha256: string, companions: Companion[]) =>
    keepCopy(book, path, sha256, companions),
  problem(file: CaptureSource, error: unknown) {
    book.keepProblem(run, file.path, describeFailure(error));
    readout.problem(file.path, error);
  },
});
