import type { Capture, Channel } from "../../analysis/capture.ts";

/** A capture of one or more voltage channels, for tests of what is done with captures. */
export function captureOf(
  channels: Record<string, Float64Array>,
  { start_s = 0, step_s = 1e-6 as number | null } = {},
): Capture {
  const all = Object.entries(channels).map(([name, samples], position): Channel => ({
    position,
    name,
    unit: "V",
    fileUnit: "V",
    role: position === 0 ? "switch-node" : "other",
    roleGuessed: false,
    scale: 1,
    offset: 0,
    samples,
    lsb: null,
    unusable: new Int32Array(0),
    overrange: 0,
  }));
  return {
    record: { index: 0, count: 1, time: null },
    channels: all,
    timebase: { start_s, step_s, stepUncertainty_s: 0, samples: all[0].samples.length },
    acquisition: [],
    notes: [],
  };
}
