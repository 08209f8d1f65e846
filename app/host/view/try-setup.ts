import { readCapture } from "../../../analysis/reading.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { TriedSetup } from "../../bridge.ts";
import { CallError } from "../failure.ts";
import type { HeldCaptures } from "./captures.ts";
import { traceWindow } from "./trace.ts";

/** The file's first record read with this setup, and what its samples look like then. */
export function trySetup(
  held: HeldCaptures,
  setup: Setup,
  channel: string | null,
  pixels: number,
): TriedSetup {
  const [capture] = held.captures;
  if (!capture?.channels[0]) throw new CallError("nothing-to-show", "read so, the file holds no samples");
  const { reading, map } = readCapture(capture, setup);
  const good = reading.pulses.find(({ ring }) => ring?.quality === "good") ?? null;
  const asked = capture.channels.find(({ name }) => name === channel);
  const { position } = asked ?? capture.channels[map.ring ?? 0];
  return {
    records: held.captures.length,
    samples: capture.timebase.samples,
    step_s: capture.timebase.step_s,
    switchOffs: reading.pulses.length,
    frequency_Hz: good?.ring?.modes[0]?.frequency_Hz ?? null,
    inductance_H: good?.inductance_H ?? null,
    trace: traceWindow(capture, held.pyramid(0, position), {
      channel: position,
      from_s: null,
      to_s: null,
      pixels,
    }),
  };
}
