/** One file per channel: the stated files of a shot become one capture, if their time bases agree. */
import { basename } from "node:path";
import type { Capture } from "../../../analysis/capture.ts";
import { ReadingError } from "../../../analysis/errors.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";

/** The part of the setup that speaks of this file's channels. */
export function setupOfFile(setup: Setup, path: string): Setup {
  const channels = (setup.channels ?? []).filter(({ file }) => !file || file === basename(path));
  // Without a position an entry with a file speaks of that file's only channel.
  const placed = channels.map((channel) =>
    channel.file && (channel.position ?? null) === null && !channel.name
      ? { ...channel, position: 0 }
      : channel,
  );
  return { ...setup, channels: placed };
}

/** Throws ReadingError where the files are not of one shot. */
export function joinCaptures(parts: { path: string; captures: Capture[] }[]): Capture[] {
  const [first, ...others] = parts;
  return first.captures.map((capture, record) => {
    const channels = [...capture.channels];
    const notes = [...capture.notes];
    for (const { path, captures } of others) {
      const other = captures[record];
      const why = difference(capture, other);
      if (why !== null)
        throw new ReadingError(
          "channel-files-differ",
          `${basename(path)} can't be joined to ${basename(first.path)}: ${why}`,
          "Name only files of the same shot under channels[].file in the setup",
        );
      channels.push(
        ...other.channels.map((channel) => ({ ...channel, position: channels.length + channel.position })),
      );
      notes.push(...other.notes);
    }
    const acquisition = [
      ...new Set(
        [capture, ...others.map(({ captures }) => captures[record])].flatMap((one) => one.acquisition),
      ),
    ];
    return { ...capture, channels, notes, acquisition };
  });
}

/** null where two records share a time base. */
export function difference(a: Capture, b: Capture | undefined): string | null {
  if (!b) return "it holds fewer records";
  const [one, other] = [a.timebase, b.timebase];
  if (one.samples !== other.samples) return `it holds ${other.samples} samples, not ${one.samples}`;
  if (one.step_s === null || other.step_s === null)
    return one.step_s === other.step_s ? null : "one interval is unknown";
  const allowed = 1e-6 * one.step_s + 3 * (one.stepUncertainty_s + other.stepUncertainty_s);
  if (Math.abs(one.step_s - other.step_s) > allowed)
    return `its interval is ${other.step_s} s, not ${one.step_s} s`;
  if (Math.abs(one.start_s - other.start_s) > one.step_s / 2)
    return `it starts at ${other.start_s} s, not ${one.start_s} s`;
  return null;
}
