import type { BenchEvent } from "../../bridge.ts";
import type { Book } from "../book/index.ts";
import type { Jobs } from "../jobs/jobs.ts";
import type { Thread } from "../threads/thread.ts";
import type { Uploads } from "../uploads.ts";

/** What the host's handlers work with. */
export interface BenchParts {
  book: Book;
  reader: Thread;
  viewer: Thread;
  jobs: Jobs;
  uploads: Uploads;
  emit: (event: BenchEvent) => void;
  demo: string;
}
