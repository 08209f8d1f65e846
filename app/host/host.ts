import { join } from "node:path";
import type { BenchEvent } from "../bridge.ts";
import { openBook } from "./book/index.ts";
import { answerCall, type Handlers, type Reply } from "./call.ts";
import { bookHandlers } from "./handlers/book.ts";
import { coilHandlers } from "./handlers/coil.ts";
import { readingHandlers, startReading } from "./handlers/reading.ts";
import { createViews, viewHandlers } from "./handlers/view.ts";
import { watchHandlers } from "./handlers/watch.ts";
import { createJobs } from "./jobs/jobs.ts";
import { createThread } from "./threads/thread.ts";
import { createUploads } from "./uploads.ts";
import { createWatches } from "./watch/watches.ts";
import { rememberedFolders, watchTools } from "./watch/tools.ts";

export interface HostOptions {
  bookPath: string;
  /** The built worker beside the entry file that starts the host. */
  workerUrl: URL;
  /** Folder of the demo run. */
  demo: string;
  /** Where files that a window sent are kept; beside the book when nothing else is said. */
  uploads?: string;
}

export interface Host {
  /** Answers a call from outside; never throws, an error is part of the reply. */
  answer(name: unknown, argument: unknown): Promise<Reply>;
  subscribe(listener: (event: BenchEvent) => void): () => void;
  /** Settles when no job is in hand. */
  idle(): Promise<void>;
  close(): Promise<void>;
}

/** The machine's side of Ringbook: files, threads and the bench book, whatever door stands before it. */
export async function createHost(options: HostOptions): Promise<Host> {
  const book = await openBook(options.bookPath);
  const listeners = new Set<(event: BenchEvent) => void>();
  const emit = (event: BenchEvent) => {
    for (const listener of listeners) listener(event);
  };
  // Two threads: what the window looks at must not wait behind a folder being read.
  const reader = createThread(options.workerUrl);
  const viewer = createThread(options.workerUrl);
  const jobs = createJobs(emit);
  const uploads = createUploads(options.uploads ?? join(options.bookPath, "..", "dropped"));
  const views = createViews(book, viewer);
  const watches = createWatches(
    watchTools(book, emit, (paths) => startReading(bench, paths, null, null).finished),
  );
  const bench = { book, reader, viewer, views, watches, jobs, uploads, emit, demo: options.demo };
  const handlers: Handlers = {
    ...bookHandlers(bench),
    ...coilHandlers(bench),
    ...readingHandlers(bench),
    ...viewHandlers(bench),
    ...watchHandlers(bench),
  };
  // A folder that went away meanwhile is no reason not to start.
  for (const path of rememberedFolders(book)) await watches.watch(path).catch(() => {});

  return {
    answer: (name, argument) => answerCall(handlers, name, argument),
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    idle: () => jobs.idle(),
    async close() {
      watches.close();
      for (const { job, state } of jobs.list()) if (state === "working") jobs.cancel(job);
      await Promise.all([reader.stop("the program ends"), viewer.stop("the program ends")]);
      await jobs.idle();
      book.close();
    },
  };
}
