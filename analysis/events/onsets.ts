/**
 * Switch-offs on a voltage trace: the places where a quiet trace (the switch conducts) starts to swing
 * at once. Later half-waves of a ring, beats and turn-on edges of a ringing node have no quiet before
 * them or no swing after.
 */
import { lineThrough, meanAndDeviation, medianOf } from "../numeric/robust.ts";
import type { Scale } from "./scale.ts";

export interface Onset {
  /** Instant by the edge itself, fractional sample number. */
  at: number;
  u: number;
  /** Level just before, and its scatter. */
  level: number;
  scatter: number;
  /** Largest excursion from the level within a period, with its sign. */
  swing: number;
  polarity: 1 | -1;
}

/** Standing out most from the quiet before it. */
export const sharpness = (onset: Onset) => Math.abs(onset.swing) / onset.scatter;

/** Values a period in the search. */
const PER_PERIOD = 16;
/** Quiet needed before, and swing looked for after, in periods: a ring is never quiet for that long. */
const QUIET = 0.55;
const AHEAD = 0.65;
/** The swing must exceed the scatter before it by this factor; a ring or a beat reaches 4 at most. */
const CONTRAST = 8;
/** Swings below this share of the record's largest are turn-on edges, bursts, pick-up. */
const LEAST_SHARE = 0.1;

export function findOnsets(samples: Float64Array, scale: Scale, noise: number, lsb: number | null): Onset[] {
  const width = Math.max(1, Math.round(scale.period / PER_PERIOD));
  const values = thinned(samples, width);
  const quiet = Math.max(4, Math.ceil((QUIET * scale.period) / width));
  const ahead = Math.max(4, Math.ceil((AHEAD * scale.period) / width));
  const floor = Math.max(noise / Math.sqrt(width), (lsb ?? 0) / 3, 1e-9 * scale.reach);
  const onsets: Onset[] = [];
  let best = -1;
  let bestContrast = 0;
  const close = () => {
    if (best >= 0) {
      const onset = refine(samples, best * width, width, quiet, scale, noise, lsb);
      if (onset && !(onset.at <= (onsets.at(-1)?.at ?? -1) + quiet * width * 0.5)) onsets.push(onset);
    }
    best = -1;
    bestContrast = 0;
  };
  for (let b = 3; b + 2 < values.length; b++) {
    const contrast = contrastAt(values, b, quiet, ahead, floor, LEAST_SHARE * scale.reach);
    if (contrast > CONTRAST) {
      if (contrast > bestContrast) {
        best = b;
        bestContrast = contrast;
      }
    } else if (best >= 0 && b > best + quiet / 2) close();
  }
  close();
  return onsets;
}

function thinned(samples: Float64Array, width: number): Float64Array {
  if (width === 1) return samples;
  const count = Math.floor(samples.length / width);
  const out = new Float64Array(count);
  for (let b = 0; b < count; b++) {
    let sum = 0;
    for (let i = b * width; i < (b + 1) * width; i++) sum += samples[i];
    out[b] = sum / width;
  }
  return out;
}

/** Swing over the next values in units of the scatter of those before; 0 where either is not there. */
function contrastAt(
  values: Float64Array,
  b: number,
  quiet: number,
  ahead: number,
  floor: number,
  least: number,
): number {
  const from = Math.max(0, b - quiet);
  const { mean: level, deviation, count } = meanAndDeviation(values, from, b);
  if (count < 3) return 0;
  const to = Math.min(values.length, b + ahead);
  let swing = 0;
  for (let k = b; k < to; k++) swing = Math.max(swing, Math.abs(values[k] - level) || 0);
  if (swing < least || swing < 6 * floor) return 0;
  // The first value already on its way: the edge is here, not later.
  if (Math.abs(values[b] - level) < 0.05 * swing && Math.abs(values[b + 1] - level) < 0.1 * swing) return 0;
  return swing / Math.max(deviation, floor);
}

/** Periods of conduction at most that its level is taken from. */
const CALM_WINDOWS = 8;

/** Level of the quiet before, from as much of it as stays alike; sloped only where the slope is sure. */
function calmBefore(
  samples: Float64Array,
  about: number,
  width: number,
  quiet: number,
  noise: number,
  lsb: number | null,
): { level: (i: number) => number; scatter: number } | null {
  const to = Math.max(2, about - width);
  let from = calmStart(samples, to, quiet * width, width, noise);
  const near = meanAndDeviation(samples, from, to);
  if (near.count === 0) return null;
  const scatter = Math.max(near.deviation || 0, noise);
  const like = Math.max((4 * scatter) / Math.sqrt(near.count), 0.5 * (lsb ?? 0));
  for (let k = 1; k < CALM_WINDOWS && from > 0; k++) {
    const earlier = Math.max(0, from - quiet * width);
    const { mean, deviation, count } = meanAndDeviation(samples, earlier, from);
    if (!(Math.abs(mean - near.mean) < like) || deviation > 1.5 * scatter || count < near.count / 2) break;
    from = earlier;
  }
  const line = lineThrough(samples, from, to);
  const whole = meanAndDeviation(samples, from, to);
  if (!line) return { level: () => whole.mean, scatter: Math.max(whole.deviation || 0, noise) };
  const sure = Math.abs(line.slope) > 4 * line.deviation * Math.sqrt(12 / whole.count ** 3);
  const level = sure ? (i: number) => line.level + line.slope * (i - from) : () => whole.mean;
  return { level, scatter: Math.max(sure ? line.deviation : whole.deviation || 0, noise) };
}

/** Standard deviations by which a few samples before the conduction's end stand apart from its later half. */
const APART = 6;

/** Scatter of a conduction, in units of the noise of differences. */
const CALM = 2;

/** A conduction may be shorter than the quiet that is looked for: its later half tells where it began. */
function calmStart(samples: Float64Array, to: number, length: number, width: number, noise: number): number {
  const earliest = Math.max(0, to - length);
  let from = Math.max(earliest, to - Math.ceil(length / 2));
  const { mean, deviation, count } = meanAndDeviation(samples, from, to);
  // A ring's trough is no conduction, however short a stretch of it is looked at.
  if (count < 4 || deviation > CALM * noise) return earliest;
  const limit = APART * Math.max(deviation, noise);
  while (from > earliest) {
    const before = Math.max(earliest, from - width);
    const piece = meanAndDeviation(samples, before, from);
    if (piece.count > 0 && !(Math.abs(piece.mean - mean) < limit / Math.sqrt(piece.count))) break;
    from = before;
  }
  return from;
}

/** Share of its size by which an edge's level may be off just before it. */
const SAME = 0.1;

/** The edge on the raw samples: leaves the quiet level for good, extrapolated back to it. */
function refine(
  samples: Float64Array,
  about: number,
  width: number,
  quiet: number,
  scale: Scale,
  noise: number,
  lsb: number | null,
): Onset | null {
  const calm = calmBefore(samples, about, width, quiet, noise, lsb);
  if (!calm) return null;
  const { level, scatter } = calm;
  const end = Math.min(samples.length, about + Math.ceil(scale.period));
  let swing = 0;
  for (let i = about - width; i < end; i++) {
    const d = samples[i] - level(i);
    if (Math.abs(d) > Math.abs(swing)) swing = d;
  }
  if (swing === 0) return null;
  const first = firstSwing(samples, about - 2 * width, end, level(about), swing);
  const polarity = first >= 0 ? 1 : -1;
  const size = Math.abs(first);
  const least = Math.min(0.4 * size, Math.max(5 * scatter, 1.5 * (lsb ?? 0), 0.02 * size));
  let high = Math.max(0, about - 2 * width);
  while (high < end && !(polarity * (samples[high] - level(high)) >= 0.4 * size)) high++;
  if (high >= end) return null;
  // Back from there to where the trace left the level for good.
  let leave = high;
  while (leave > 0 && polarity * (samples[leave - 1] - level(leave - 1)) > least) leave--;
  high = Math.max(leave, high - 1);
  const at = high > leave + 1 ? crossing(samples, leave, high + 1, level) : between(samples, leave, level);
  const u = high > leave + 1 ? Math.max(0.1, (scatter / size) * (high - leave)) : 0.29;
  const bounded = Math.min(leave, Math.max(leave - Math.max(2, 0.1 * scale.period), at));
  // A small edge ahead of a large one is not to be taken for it, with its own level before.
  const before = medianOf(samples, Math.max(0, Math.floor(bounded) - 3 * width), Math.floor(bounded));
  if (Math.abs(before - level(bounded)) > 3 * scatter + SAME * size) return null;
  return { at: bounded, u, level: level(bounded), scatter, swing: first, polarity };
}

/** First excursion that reaches half the largest: the kick's own sign. */
function firstSwing(samples: Float64Array, from: number, to: number, level: number, swing: number): number {
  let peak = 0;
  for (let i = Math.max(0, from); i < to; i++) {
    const d = samples[i] - level;
    if (
      peak === 0
        ? Math.abs(d) > 0.4 * Math.abs(swing)
        : Math.sign(d) === Math.sign(peak) && Math.abs(d) > Math.abs(peak)
    )
      peak = d;
    else if (peak !== 0 && Math.sign(d) !== Math.sign(peak)) break;
  }
  return peak || swing;
}

/** Straight line through the rise, back to the level. */
function crossing(samples: Float64Array, from: number, to: number, level: (i: number) => number): number {
  const rise = new Float64Array(to - from);
  for (let i = from; i < to; i++) rise[i - from] = samples[i] - level(i);
  const line = lineThrough(rise, 0, rise.length);
  return line && line.slope !== 0 ? from - line.level / line.slope : from;
}

/** Too steep for a line: between the last quiet sample and the first on its way. */
function between(samples: Float64Array, leave: number, level: (i: number) => number): number {
  const first = samples[leave] - level(leave);
  const second = samples[leave + 1] - level(leave + 1);
  const slope = second - first;
  return first * slope > 0 && Math.abs(first / slope) < 1 ? leave - first / slope : leave - 0.5;
}
