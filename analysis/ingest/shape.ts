/** What a waveform looks like, in the few respects that tell a switch node from a gate or a current. */

import type { Outline } from "./outline.ts";

export interface Shape {
  low: number;
  high: number;
  /** Level it rests at most: the fullest bin of a histogram (state level by mode, IEEE Std 181). */
  rest: number;
  /** Share of samples within 8 % of the range of either extreme. */
  atExtremes: number;
  /** Largest distance from rest, up and down. */
  above: number;
  below: number;
  /** Share of samples more than a quarter of the way from rest to the peak. */
  busy: number;
  /** How often it swings past rest by more than a tenth of the range, in turn to either side. */
  swings: number;
  /** Largest slow rise from the rest level as a share of the height above it: near 1 for a ramp. */
  rampShare: number;
}

const bins = 256;

/** Of a longer record the outline tells all that a shape needs. */
const looked = 200_000;

/** null without two different values. */
export function shapeOf(record: Float64Array, outline: Outline): Shape | null {
  const samples = record.length <= looked ? record : outline.extremes;
  let [low, high] = [Infinity, -Infinity];
  for (const value of samples) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (!(high > low)) return null;
  const rest = restLevel(samples, low, high);
  const { swings, spacing } = countSwings(samples, rest, 0.1 * (high - low));
  const near = 0.08 * (high - low);
  const reach = 0.25 * Math.max(high - rest, rest - low);
  let extremes = 0;
  let busy = 0;
  let count = 0;
  for (let i = 0; i < samples.length; i++) {
    const value = samples[i];
    if (value !== value) continue;
    count++;
    const distance = Math.abs(value - rest);
    if (value < low + near || value > high - near) extremes++;
    if (distance > reach) busy++;
  }
  return {
    low,
    high,
    rest,
    atExtremes: extremes / count,
    above: high - rest,
    below: rest - low,
    busy: busy / count,
    swings,
    rampShare: longestRise(samples, { low, high, rest }, spacing),
  };
}

function restLevel(samples: Float64Array, low: number, high: number): number {
  const counts = new Int32Array(bins);
  for (const value of samples)
    if (value === value) counts[Math.min(bins - 1, Math.floor(((value - low) / (high - low)) * bins))]++;
  const fullest = counts.indexOf(Math.max(...counts));
  return low + ((fullest + 0.5) * (high - low)) / bins;
}

/**
 * In 200 block means: the largest rise that starts at rest, keeps rising (noise of 3 % apart), is half
 * way up about half way through and lasts longer than the ring's swings do, as a share of the height above rest.
 */
function longestRise(
  samples: Float64Array,
  { low, high, rest }: { low: number; high: number; rest: number },
  swing: number,
): number {
  const range = high - low;
  const means = blockMeans(samples, Math.min(200, samples.length >> 1));
  const shortest = Math.max(4, (2 * swing * means.length) / samples.length);
  let largest = 0;
  for (let from = 0; from < means.length; from++) {
    if (!(Math.abs(means[from] - rest) < 0.1 * range)) continue;
    let top = from;
    for (let b = from + 1; b < means.length && means[b] > means[top] - 0.03 * range; b++)
      if (means[b] > means[top]) top = b;
    const rise = means[top] - means[from];
    const half = means.findIndex((mean, b) => b >= from && mean - means[from] >= rise / 2);
    const steady = half - from > 0.2 * (top - from) && half - from < 0.8 * (top - from);
    if (top - from >= shortest && steady) largest = Math.max(largest, rise);
  }
  return largest / (high - rest);
}

/** Swings past rest by more than `reach`, in turn to either side; the median time between them, in samples. */
function countSwings(
  samples: Float64Array,
  rest: number,
  reach: number,
): { swings: number; spacing: number } {
  let side = 0;
  const at: number[] = [];
  for (let i = 0; i < samples.length; i++) {
    const value = samples[i];
    const now = value > rest + reach ? 1 : value < rest - reach ? -1 : side;
    if (now !== side) at.push(i);
    side = now;
  }
  const spacings = at
    .slice(1)
    .map((place, i) => place - at[i])
    .toSorted((a, b) => a - b);
  return { swings: at.length, spacing: spacings[spacings.length >> 1] ?? 0 };
}

function blockMeans(samples: Float64Array, blocks: number): number[] {
  return Array.from({ length: blocks }, (_, b) => {
    let sum = 0;
    let count = 0;
    const to = Math.floor(((b + 1) * samples.length) / blocks);
    for (let i = Math.floor((b * samples.length) / blocks); i < to; i++) {
      if (samples[i] !== samples[i]) continue;
      sum += samples[i];
      count++;
    }
    return count ? sum / count : NaN;
  });
}
