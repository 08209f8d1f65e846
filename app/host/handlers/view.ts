import type { Argument } from "../../bridge.ts";
import type { Book } from "../book/index.ts";
import type { Handlers } from "../call.ts";
import { fileHead } from "../file-head.ts";
import type { Views } from "../handover/index.ts";
import { placeOfCapture } from "../originals.ts";
import type { Thread } from "../threads/thread.ts";
import { changedSetup } from "../setups.ts";
import type { BenchParts } from "./bench-parts.ts";

/** Windows onto raw samples, answered by a thread that holds them. */
export function createViews(book: Book, viewer: Thread): Views {
  return {
    async trace({ capture, ...request }: Argument<"trace">) {
      const { record, setup } = book.captureFile(capture);
      const path = await placeOfCapture(book, capture);
      return viewer.ask("trace", { file: { path, setup }, record, ...request });
    },
    async ringPicture({ capture, ...request }: Argument<"ringPicture">) {
      const { record, setup, reading } = book.captureFile(capture);
      const path = await placeOfCapture(book, capture);
      return viewer.ask("ringPicture", { file: { path, setup }, record, reading, ...request });
    },
  };
}

export const viewHandlers = ({
  book,
  views,
  viewer,
}: BenchParts): Pick<Handlers, "trace" | "ringPicture" | "fileHead" | "trySetup"> => ({
  ...views,
  async trySetup({ capture, change, channel, pixels }) {
    const { setup } = book.captureFile(capture);
    const path = await placeOfCapture(book, capture);
    return viewer.ask("trySetup", {
      file: { path, setup: changedSetup(setup, change) },
      channel: channel ?? null,
      pixels,
    });
  },
  fileHead: async ({ capture, lines }) => fileHead(await placeOfCapture(book, capture), lines),
});
