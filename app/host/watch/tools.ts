import type { BenchEvent, JobState } from "../../bridge.ts";
import type { Book } from "../book/index.ts";
import type { WatchTools } from "./watches.ts";

const preference = "watched folders";

/** The folders that were watched when the program ended. */
export function rememberedFolders(book: Book): string[] {
  const kept = book.preferences()[preference];
  return kept === undefined ? [] : (JSON.parse(kept) as string[]);
}

/** What watching needs of book and jobs. */
export const watchTools = (
  book: Book,
  emit: (event: BenchEvent) => void,
  read: (paths: string[]) => Promise<JobState>,
): WatchTools => ({
  emit,
  async read(paths) {
    const { run, problems } = await read(paths);
    return { run, problems: problems.map(({ file, text }) => (file === "" ? text : `${file}: ${text}`)) };
  },
  known: (path, bytes, changed_ms) => book.knows(path, bytes, changed_ms),
  remember(paths) {
    if (!book.readOnly) book.setPreference(preference, JSON.stringify(paths));
  },
});
