import type { BenchEvent } from "../../bridge.ts";
import type { Book } from "../book/index.ts";
import type { Views } from "../handover/index.ts";
import type { Jobs } from "../jobs/jobs.ts";
import type { Thread } from "../threads/thread.ts";
import type { Uploads } from "../uploads.ts";
import type { Watches } from "../watch/watches.ts";

/** What the host's handlers work with. */
export interface BenchParts {
  book: Book;
  reader: Thread;
  viewer: Thread;
  /** Drawings from raw samples, answered by the viewer. */
  views: Views;
  watches: Watches;
  jobs: Jobs;
  uploads: Uploads;
  emit: (event: BenchEvent) => void;
  demo: string;
}
