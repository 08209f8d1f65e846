/** Captures from arrays, with a plain scope model: what ingest would hand on. */
import type { Capture, Channel, ChannelRole } from "../../analysis/capture.ts";
import type { Random } from "./random.ts";

export interface Digitiser {
  bits?: number;
  /** Screen height; 2.4 times the largest magnitude when absent. */
  screen?: number;
  /** Noise before the converter, in LSB. */
  noise_lsb?: number;
  sign?: 1 | -1;
  /** Pinned at this share of the largest magnitude, both sides. */
  clipShare?: number;
  /** Mains pickup as a share of the largest magnitude. */
  hum?: { share: number; step_s: number };
  acCoupling?: { tau_s: number; step_s: number };
  bursts?: { at: number; length: number; share: number }[];
}

export function channelOf(
  role: ChannelRole,
  unit: string,
  samples: Float64Array,
  lsb: number | null,
  pinned?: number,
): Channel {
  const unusable: number[] = [];
  let overrange = 0;
  const out = (i: number) =>
    i < samples.length &&
    (!Number.isFinite(samples[i]) || Math.abs(samples[i]) >= (pinned ?? Infinity) - 1e-9);
  for (let i = 0, begin = -1; i <= samples.length; i++) {
    if (out(i) && begin < 0) begin = i;
    if (out(i) && !Number.isNaN(samples[i])) overrange++;
    if (!out(i) && begin >= 0) {
      unusable.push(begin, i);
      begin = -1;
    }
  }
  return {
    position: 0,
    name: role,
    unit,
    fileUnit: unit,
    role,
    roleGuessed: false,
    scale: 1,
    offset: 0,
    samples,
    lsb,
    unusable: Int32Array.from(unusable),
    overrange,
  };
}

export const captureOf = (channels: Channel[], step_s: number, start_s = 0): Capture => ({
  record: { index: 0, count: 1, time: null },
  channels,
  timebase: { start_s, step_s, stepUncertainty_s: 0, samples: channels[0].samples.length },
  acquisition: [],
  notes: [],
});

export function scoped(
  role: ChannelRole,
  unit: string,
  signal: Float64Array,
  random: Random,
  how: Digitiser = {},
): Channel {
  let top = 0;
  for (const y of signal) top = Math.max(top, Math.abs(y));
  const lsb = (how.screen ?? 2.4 * top) / 2 ** (how.bits ?? 8);
  const pinned = how.clipShare === undefined ? undefined : Math.round((how.clipShare * top) / lsb) * lsb;
  let slow = (how.sign ?? 1) * signal[0];
  const samples = signal.map((value, i) => {
    let y = (how.sign ?? 1) * value;
    if (how.acCoupling) {
      slow += ((y - slow) * how.acCoupling.step_s) / how.acCoupling.tau_s;
      y -= slow;
    }
    if (how.hum) y += how.hum.share * top * Math.sin(2 * Math.PI * 50 * i * how.hum.step_s + 1);
    for (const { at, length, share } of how.bursts ?? [])
      if (i >= at && i < at + length) y += share * top * random.normal();
    y = Math.round((y + (how.noise_lsb ?? 0.5) * lsb * random.normal()) / lsb) * lsb;
    return pinned === undefined ? y : Math.max(-pinned, Math.min(pinned, y));
  });
  return channelOf(role, unit, samples, lsb, pinned);
}
