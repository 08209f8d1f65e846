import { CallError } from "../failure.ts";
import { createCaptureHolder, type HeldCaptures } from "../view/captures.ts";
import { ringPicture } from "../view/ring-picture.ts";
import { trySetup } from "../view/try-setup.ts";
import { traceWindow } from "../view/trace.ts";
import type { Tasks } from "./tasks.ts";

/** Answers what a window shows of raw samples, thinned to its pixels. */
export function createViewer() {
  const hold = createCaptureHolder();

  return {
    async trace({ file, record, ...request }: Tasks["trace"]["argument"]) {
      const held = await hold(file);
      const capture = recordOf(held, record);
      return traceWindow(capture, held.pyramid(record, request.channel), request);
    },
    async ringPicture({ file, record, reading, pulse, pixels }: Tasks["ringPicture"]["argument"]) {
      const held = await hold(file);
      return ringPicture(recordOf(held, record), reading, pulse, pixels);
    },
    async trySetup({ file, channel, pixels }: Tasks["trySetup"]["argument"]) {
      return trySetup(await hold(file), file.setup, channel, pixels);
    },
  };
}

function recordOf(held: HeldCaptures, record: number) {
  const capture = held.captures[record];
  if (capture) return capture;
  throw new CallError("no-such-record", `the file has changed: it has no record ${record + 1} any more`);
}
