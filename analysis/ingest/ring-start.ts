/** The largest kick of a channel, looked at coarsely: how it begins and how densely it is sampled. */

import { medianOf } from "../numeric/robust.ts";
import { overSamples, type Steps } from "../steps.ts";
import type { Outline } from "./outline.ts";

export interface RingStart {
  /** The record begins at full swing: there is no rest and no rise before it. */
  fromFirstSample: boolean;
  /** Samples from a tenth to nine tenths of the kick. */
  riseSamples: number;
  /** From the crossings that follow the kick; null with fewer than four of them. */
  samplesACycle: number | null;
  /** How far the level before the kick sags towards rest, as a share of its own distance from rest. */
  sagShare: number | null;
}

const crossingsLooked = 12;
/** Values that a level or a noise is taken from, however long the stretch. */
const LOOKED = 4096;

export function* ringStart(samples: Float64Array, outline: Outline): Steps<RingStart | null> {
  const rest = tailLevel(samples);
  if (rest === null) return null;
  const peak = farthestFrom(rest, samples, outline);
  const height = samples[peak] - rest;
  if (!(Math.abs(height) > 0)) return null;
  const share = (i: number) => (samples[i] - rest) / height;
  let from = peak;
  while (from > 0 && share(from - 1) > 0.1) from--;
  let to = from;
  while (to < peak && share(to) < 0.9) to++;
  const crossings = yield* zeroCrossings(share, peak, samples.length);
  const cycle =
    crossings.length < 4
      ? null
      : (2 * (crossings[crossings.length - 1] - crossings[0])) / (crossings.length - 1);
  return {
    fromFirstSample: cycle !== null && peak <= cycle && Math.abs(share(0)) > 0.3,
    riseSamples: to - from + 1,
    samplesACycle: cycle,
    sagShare: sagBefore(samples, from, rest),
  };
}

/** The level the record ends on: the middle of its last twentieth. */
function tailLevel(samples: Float64Array): number | null {
  const level = medianOf(samples, Math.floor(0.95 * samples.length), samples.length, LOOKED);
  return Number.isNaN(level) ? null : level;
}

function farthestFrom(rest: number, samples: Float64Array, { extremes, stretch }: Outline): number {
  let [place, farthest] = [0, 0];
  for (let k = 0; k < extremes.length; k++) {
    const distance = Math.abs(extremes[k] - rest);
    if (distance > farthest) [place, farthest] = [k >> 1, distance];
  }
  const from = place * stretch;
  const at = samples.subarray(from, from + stretch).findIndex((value) => Math.abs(value - rest) === farthest);
  return from + Math.max(0, at);
}

/** Places, in fractions of a sample, where the ring passes rest after its peak while it is still large. */
function* zeroCrossings(share: (i: number) => number, peak: number, end: number): Steps<number[]> {
  const crossings: number[] = [];
  let [largest, ended] = [0, false];
  yield* overSamples(end - peak - 1, (first, last) => {
    for (let i = peak + 1 + first; i < peak + 1 + last && !ended; i++) {
      const [before, here] = [share(i - 1), share(i)];
      largest = Math.max(largest, Math.abs(here));
      if (!(before * here < 0)) continue;
      ended = crossings.length > 0 && largest < 0.1;
      if (ended) break;
      crossings.push(i - 1 + before / (before - here));
      largest = 0;
      ended = crossings.length === crossingsLooked;
    }
  });
  return crossings;
}

/**
 * The conduction before the kick holds a level; behind a blocking capacitor it sags towards zero from its
 * first moment on (a current limiter, which lifts the level too, does so at the end). Answers the sag as a
 * share of the step, null where there is no such level or the record does not rest at zero.
 */
function sagBefore(samples: Float64Array, kick: number, rest: number): number | null {
  const end = kick - 1;
  const last = medianOf(samples, Math.max(0, end - 10), end);
  if (!(Math.abs(last - rest) > 0) || end < 60) return null;
  let start = end;
  while (start > 0 && (samples[start - 1] - rest) / (last - rest) > 0.5) start--;
  const length = end - start;
  if (start === 0 || length < 50) return null;
  const third = Math.floor(length / 10);
  const levelAt = (from: number) => medianOf(samples, from, from + third, LOOKED) - rest;
  const [first, middle, final] = [start + 2, start + (length >> 1), end - third].map(levelAt);
  const sag = first - final;
  if (Math.abs(rest) > 0.25 * Math.abs(first) || Math.abs(sag) < noiseOf(samples, start, end)) return null;
  const early = (first - middle) / sag;
  return early > 0.35 && early < 0.85 ? sag / first : null;
}

function noiseOf(samples: Float64Array, from: number, to: number): number {
  const first = Math.max(from + 2, to - LOOKED);
  const steps = samples.subarray(first, to).map((value, i) => Math.abs(value - samples[first - 1 + i]));
  return 2 * medianOf(steps, 0, steps.length, LOOKED) + 1e-12;
}
