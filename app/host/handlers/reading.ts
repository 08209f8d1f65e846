import { basename, resolve } from "node:path";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { Handlers } from "../call.ts";
import type { JobHandle } from "../jobs/jobs.ts";
import { readAgain, readSources, type Readout } from "../jobs/read-sources.ts";
import { changedSetup } from "../setups.ts";
import type { BenchParts } from "./bench-parts.ts";

type Reading = "addFile" | "open" | "openDemo" | "jobs" | "cancel" | "changeSetup" | "undo";

/** Everything that makes a job of reading: opening files, and computing a run again. */
export function readingHandlers(bench: BenchParts): Pick<Handlers, Reading> {
  const { book, jobs, uploads } = bench;

  const judgeAgain = (run: number) =>
    jobs.start("Computing the run again", (job) => recompute(bench, job, run)).job;

  return {
    addFile: ({ name, bytes }) => uploads.add(name, bytes),
    open({ sources, run, setup }) {
      const paths = sources.map((source) =>
        "path" in source ? resolve(source.path) : uploads.pathOf(source.file),
      );
      return { job: startReading(bench, paths, run ?? null, setup ?? null).job };
    },
    openDemo: () => ({ job: startReading(bench, [bench.demo], null, null).job }),
    jobs: () => jobs.list(),
    cancel: ({ job }) => ({ cancelled: jobs.cancel(job) }),
    changeSetup({ run, change }) {
      book.stateSetup(run, changedSetup(book.stated(run), change), change);
      return { job: judgeAgain(run) };
    },
    undo({ run }) {
      const { text, rejudge } = book.undo(run);
      bench.emit({ type: "run-changed", run });
      return { job: rejudge ? judgeAgain(run) : null, text };
    },
  };
}

/** A job that reads files and folders into the book, run by run. */
export function startReading(bench: BenchParts, paths: string[], named: string | null, setup: Setup | null) {
  const what = `Reading ${paths.length === 1 ? basename(paths[0]) : `${paths.length} files`}`;
  return bench.jobs.start(what, async (job) => {
    job.onCancel(() => void bench.reader.stop("the job was cancelled"));
    await readSources(bench.reader, bench.book, readoutOf(bench, job), paths, named, setup);
  });
}

/** The whole run again from its files, with what is stated now. */
async function recompute(bench: BenchParts, job: JobHandle, run: number) {
  job.onCancel(() => void bench.reader.stop("the job was cancelled"));
  await readAgain(bench.reader, bench.book, readoutOf(bench, job), run);
}

function readoutOf({ emit }: BenchParts, job: JobHandle): Readout {
  return {
    get cancelled() {
      return job.cancelled;
    },
    begin: (files) => job.total(files.length),
    progress: job.progress,
    problem: job.problem,
    kept(run) {
      if (run === null) return;
      job.run(run);
      emit({ type: "run-changed", run });
    },
  };
}
