/**
 * A long record by the lowest and highest number of each stretch: what is looked for at extremes is looked
 * for there, so that a channel is gone through once.
 */
import { overSamples, stepSamples, type Steps } from "../steps.ts";

export interface Outline {
  /** Samples to a stretch. */
  stretch: number;
  /** Lowest and highest number of each stretch in the order in which they stand; NaN where it holds none. */
  extremes: Float64Array;
  /** Of all finite numbers, as the file has them; infinite where there is none. */
  low: number;
  high: number;
  /** How many samples are finite numbers. */
  finite: number;
}

const mostStretches = 50_000;
/** No shorter: a short record is its own outline. */
const shortest = 4;

export function* outlineOf(samples: Float64Array): Steps<Outline> {
  const stretch = Math.max(shortest, Math.ceil(samples.length / mostStretches));
  const count = Math.ceil(samples.length / stretch);
  const outline = {
    stretch,
    extremes: new Float64Array(2 * count),
    low: Infinity,
    high: -Infinity,
    finite: 0,
  };
  const visit = (from: number, to: number) => {
    for (let k = from; k < to; k++) addStretch(outline, samples, k);
  };
  yield* overSamples(count, visit, Math.ceil(stepSamples / stretch));
  return outline;
}

function addStretch(outline: Outline, samples: Float64Array, k: number): void {
  const from = k * outline.stretch;
  const to = Math.min(samples.length, from + outline.stretch);
  let [low, high, lowAt, highAt, odd] = [Infinity, -Infinity, from, from, 0];
  for (let i = from; i < to; i++) {
    const value = samples[i];
    // Zero for a number, else none.
    odd += value - value;
    if (value < low) {
      low = value;
      lowAt = i;
    }
    if (value > high) {
      high = value;
      highAt = i;
    }
  }
  if (odd !== 0) return addFiniteOnly(outline, samples, k);
  outline.finite += to - from;
  keep(outline, k, low, high, lowAt < highAt);
}

function addFiniteOnly(outline: Outline, samples: Float64Array, k: number): void {
  const from = k * outline.stretch;
  const to = Math.min(samples.length, from + outline.stretch);
  let [lowAt, highAt] = [-1, -1];
  for (let i = from; i < to; i++) {
    if (!Number.isFinite(samples[i])) continue;
    outline.finite++;
    if (lowAt < 0 || samples[i] < samples[lowAt]) lowAt = i;
    if (highAt < 0 || samples[i] > samples[highAt]) highAt = i;
  }
  if (lowAt < 0) outline.extremes[2 * k] = outline.extremes[2 * k + 1] = NaN;
  else keep(outline, k, samples[lowAt], samples[highAt], lowAt < highAt);
}

function keep(outline: Outline, k: number, low: number, high: number, rising: boolean): void {
  outline.extremes[2 * k] = rising ? low : high;
  outline.extremes[2 * k + 1] = rising ? high : low;
  if (low < outline.low) outline.low = low;
  if (high > outline.high) outline.high = high;
}
