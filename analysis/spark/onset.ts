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
  const onset = expected ? departure(window, traits, expected) : null;
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
  const away = (i: number) => Math.abs(y[i] - values[i]);
  const limit = (i: number) => CLEAR * sigma + slack * Math.abs(values[i]);
  const last = Math.min(window.blocks.count - 3, traits.b + Math.round(window.period));
  for (let i = from; i < last; i++) {
    if (away(i) < limit(i) || away(i + 1) < limit(i + 1) || away(i + 2) < limit(i + 2)) continue;
    return partedAt(i, away, limit, from);
  }
  return null;
}

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
