import { basename, resolve } from "node:path";
import { parseSetup } from "../../../analysis/setup/parse.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { Handlers } from "../call.ts";
import type { JobHandle } from "../jobs/jobs.ts";
import { readAgain, readSources, type Readout } from "../jobs/read-sources.ts";
import type { BenchParts } from "./bench-parts.ts";

type Reading = "addFile" | "open" | "openDemo" | "jobs" | "cancel" | "changeSetup" | "undo";

/** Everything that makes a job of reading: opening files, and computing a run again. */
export function readingHandlers(bench: BenchParts): Pick<Handlers, Reading> {
  const { book, jobs, uploads } = bench;

  const open = (what: string, paths: string[], run: string | null, setup: Setup | null) => ({
    job: jobs.start(what, (job) => openPaths(bench, job, paths, run, setup)),
  });
  const judgeAgain = (run: number) =>
    jobs.start("Computing the run again", (job) => recompute(bench, job, run));

  return {
    addFile: ({ name, bytes }) => uploads.add(name, bytes),
    open({ sources, run, setup }) {
      const paths = sources.map((source) =>
        "path" in source ? resolve(source.path) : uploads.pathOf(source.file),
      );
      const what = paths.length === 1 ? `Reading ${basename(paths[0])}` : `Reading ${paths.length} files`;
      return open(what, paths, run ?? null, setup ?? null);
    },
    openDemo: () => open("Reading the demo run", [bench.demo], null, null),
    jobs: () => jobs.list(),
    cancel: ({ job }) => ({ cancelled: jobs.cancel(job) }),
    changeSetup({ run, change }) {
      book.stateSetup(run, parseSetup(withChange(book.stated(run), change)));
      return { job: judgeAgain(run) };
    },
    undo({ run }) {
      const { text, rejudge } = book.undo(run);
      bench.emit({ type: "run-changed", run });
      return { job: rejudge ? judgeAgain(run) : null, text };
    },
  };
}

/** What is stated from now on; a key changed to null is stated no more. */
function withChange(stated: Setup | null, change: Record<string, unknown>): Record<string, unknown> {
  const merged = Object.entries({ ...stated, ...change });
  return Object.fromEntries(merged.filter(([, value]) => value !== null && value !== undefined));
}

/** Reads files and folders into the book, run by run. */
async function openPaths(
  bench: BenchParts,
  job: JobHandle,
  paths: string[],
  named: string | null,
  setup: Setup | null,
) {
  job.onCancel(() => void bench.reader.stop("the job was cancelled"));
  await readSources(bench.reader, bench.book, readoutOf(bench, job), paths, named, setup);
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
