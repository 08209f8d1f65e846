import type { Handlers } from "../call.ts";
import type { BenchParts } from "./bench-parts.ts";

/** Windows onto raw samples, answered by a thread that holds them. */
export function viewHandlers({ book, viewer }: BenchParts): Pick<Handlers, "trace" | "ringPicture"> {
  return {
    async trace({ capture, ...request }) {
      const { path, record, setup } = book.captureFile(capture);
      return viewer.ask("trace", { file: { path, setup }, record, ...request });
    },
    async ringPicture({ capture, ...request }) {
      const { path, record, setup, reading } = book.captureFile(capture);
      return viewer.ask("ringPicture", { file: { path, setup }, record, reading, ...request });
    },
  };
}
