/** When the spark struck and when it went out: where the trace leaves the expected one, and joins its own ring again. */
import type { Expected } from "./expected.ts";
import type { Traits } from "./traits.ts";
import type { SparkWindow } from "./window.ts";

export interface SparkTimes {
  /** On the file's time axis. */
  onset_s: number | null;
  onsetUncertainty_s: number | null;
  extinction_s: number | null;
  /** Block of the onset, for the places of other evidence. */
  block: number | null;
}

/** Departures this many σ large are no noise, three in a row. */
const CLEAR = 5;

export function timesOf(window: SparkWindow, traits: Traits, expected: Expected | null): SparkTimes {
  const onset = (expected && departure(window, traits, expected)) ?? kink(window, traits);
  const file_s = (block: number) => window.zero_s + window.first_s + block * window.step_s;
  const out = traits.ringAfter ? rejoining(window, traits, onset ?? traits.a) : null;
  return {
    onset_s: onset === null ? null : file_s(onset),
    onsetUncertainty_s: onset === null ? null : window.step_s,
    extinction_s: out === null ? null : file_s(out),
    block: onset,
  };
}

/** First block from which the trace stays away from the expected one, carried back to where it parted. */
function departure(window: SparkWindow, traits: Traits, { values, from, slack }: Expected): number | null {
  const y = window.blocks.values;
  const sigma = Math.sqrt(traits.split.variance);
  const shift = slack > 0 ? shiftOf(y, values, window.period, from) : 0;
  const value = (i: number) => (shift === 0 ? values[i] : between(values, i - shift));
  // A block off the screen tells nothing: it agrees with whatever is expected.
  const seen = measuredBlocks(window.blocks);
  const away = (i: number) => (seen[i] ? Math.abs(y[i] - value(i)) : 0);
  const limit = (i: number) =>
    CLEAR * sigma + slack * (Math.abs(value(i)) + 10 * Math.abs(value(i + 1) - value(i)));
  const last = Math.min(window.blocks.count - 3, traits.b + Math.round(window.period));
  for (let i = slack > 0 ? from + 3 : from; i < last; i++) {
    if (away(i) < limit(i) || away(i + 1) < limit(i + 1) || away(i + 2) < limit(i + 2)) continue;
    return partedAt(i, away, limit, from);
  }
  return null;
}

/**
 * Blocks by which another pulse's trace must be moved to lie on this one's first rise: two switch-offs are
 * known to a sample or two only.
 */
function shiftOf(y: Float64Array, values: Float64Array, period: number, from: number): number {
  const rise = Math.max(4, Math.round(0.04 * period));
  let [best, least] = [0, Number.POSITIVE_INFINITY];
  for (let shift = -MOST_SHIFT; shift <= MOST_SHIFT; shift += 0.125) {
    let sum = 0;
    let count = 0;
    for (let i = from; i < Math.min(from + rise, y.length); i++) {
      if (i - shift < from) continue;
      sum += (y[i] - between(values, i - shift)) ** 2;
      count++;
    }
    if (count >= 2 && sum / count < least) [best, least] = [shift, sum / count];
  }
  return best;
}

const MOST_SHIFT = 3;

function between(values: Float64Array, at: number): number {
  const left = Math.min(values.length - 2, Math.max(0, Math.floor(at)));
  return values[left] + (at - left) * (values[left + 1] - values[left]);
}

/**
 * With nothing to compare with: an arc turns the first rise back by its leakage inductance, far more sharply
 * than the ring itself bends. The first such bend before the ring after;
 * with none, where the ring before ends.
 */
function kink(window: SparkWindow, traits: Traits): number | null {
  const y = window.blocks.values;
  const sigma = Math.sqrt(traits.split.variance);
  const last = Math.min(Math.max(traits.b, 4), window.blocks.count - 3);
  // The ring before, short as it was, holds up to `a`.
  const seen = measuredBlocks(window.blocks);
  const first = Math.max(2, Math.round(traits.a - window.period / 8));
  let sharpest = 0;
  for (let i = first; i < last; i++)
    if (seen[i - 2] && seen[i] && seen[i + 2]) sharpest = Math.max(sharpest, -curve(y, i));
  const limit = Math.max(0.35 * sharpest, CLEAR * 2.5 * sigma);
  for (let i = first; i < last; i++)
    if (seen[i - 2] && seen[i] && seen[i + 2] && -curve(y, i) > limit) return i - 1;
  return traits.a > 0 ? traits.a : null;
}

/** Second difference over two blocks to each side. */
const curve = (y: Float64Array, i: number) => y[i - 2] - 2 * y[i] + y[i + 2];

/**
 * The trace parts from the expected one like (t − t0)²: its current has jumped, not its voltage. The root
 * of the distance is a straight line; its foot is t0, but not earlier than what was clearly still together.
 */
function partedAt(
  first: number,
  away: (i: number) => number,
  limit: (i: number) => number,
  from: number,
): number {
  let together = first;
  while (together > from && away(together) > limit(together) / 2.5) together--;
  const [r0, r1] = [Math.sqrt(away(first)), Math.sqrt(away(first + 1))];
  const r2 = Math.sqrt(away(first + 2));
  const slope = Math.max(r1 - r0, (r2 - r0) / 2);
  const foot = slope > 0 ? first - r0 / slope : first;
  return Math.min(first, Math.max(foot, together - 1));
}

/** Going back from the ring after: the last block that does not lie on it. */
function rejoining(window: SparkWindow, traits: Traits, onset: number): number | null {
  const { coefficients } = traits.split.after;
  const y = window.blocks.values;
  const limit = CLEAR * Math.sqrt(traits.split.variance);
  const away = (i: number) => Math.abs(y[i] - traits.sums.value(coefficients, i));
  const start = Math.min(window.blocks.count - 1, traits.b + Math.round(window.period / 2));
  for (let i = start; i > onset; i--) if (away(i) > limit && away(i - 1) > limit) return i + 1;
  return null;
}

function measuredBlocks({ count, segments }: SparkWindow["blocks"]): Uint8Array {
  const seen = new Uint8Array(count);
  for (let s = 0; s < segments.length; s += 2) seen.fill(1, segments[s], segments[s + 1]);
  return seen;
}
