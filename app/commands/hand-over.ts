import { writeFile } from "node:fs/promises";
import type { Argument } from "../bridge.ts";
import { exportRun } from "../host/handover/index.ts";
import { placeOfCapture } from "../host/originals.ts";
import { createCaptureHolder } from "../host/view/captures.ts";
import { ringPicture } from "../host/view/ring-picture.ts";
import { traceWindow } from "../host/view/trace.ts";
import type { Book } from "../host/book/index.ts";
import { withBook } from "./book-option.ts";
import { findRun } from "./find-run.ts";
import { complain } from "./usage.ts";

type Kind = Argument<"exportRun">["kind"];

/** A run of the book into a file, or onto standard output. */
export const handOver = (
  kind: Kind,
  { run, book, output }: { run?: string; book?: string; output?: string },
) =>
  withBook(book, async (opened) => {
    const { text } = await exportRun(opened, findRun(opened, run).run, kind, viewsOf(opened));
    if (output === undefined) process.stdout.write(text);
    else {
      await writeFile(output, text);
      complain(`written to ${output}`);
    }
    return 0;
  });

/** The terminal draws in its own process: nothing waits beside it. */
function viewsOf(book: Book) {
  const hold = createCaptureHolder();
  const held = async (capture: number) => {
    const { record, setup, reading } = book.captureFile(capture);
    const path = await placeOfCapture(book, capture);
    const { captures, pyramid } = await hold({ path, setup });
    return { capture: captures[record], pyramid: (channel: number) => pyramid(record, channel), reading };
  };
  return {
    async trace({ capture, ...request }: Argument<"trace">) {
      const source = await held(capture);
      return traceWindow(source.capture, source.pyramid(request.channel), request);
    },
    async ringPicture({ capture, pulse, pixels }: Argument<"ringPicture">) {
      const source = await held(capture);
      return ringPicture(source.capture, source.reading, pulse, pixels);
    },
  };
}
