/**
 * Conductions from a current trace alone: a slow rise that ends in a fall much faster than it. A ring's
 * later half-waves fall as slowly as they rise, a triangle and a sine do so too; a square wave rises as
 * fast as it falls.
 */
import type { Channel } from "../capture.ts";
import { differenceNoise } from "../ring/noise.ts";
import type { Conduction } from "./gate.ts";

/** The fall must be this much faster than the rise. */
const ASYMMETRY = 0.3;
const LEAST_SHARE = 0.2;

export interface CurrentPulse extends Conduction {
  peak: number;
  polarity: 1 | -1;
}

export function currentConductions({ samples, lsb, unusable }: Channel): CurrentPulse[] {
  let low = Infinity;
  let high = -Infinity;
  for (const y of samples) {
    if (y < low && y > -Infinity) low = y;
    if (y > high && y < Infinity) high = y;
  }
  if (!(high > low)) return [];
  const zero = Math.min(Math.max(0, low), high);
  const top = Math.max(high - zero, zero - low);
  const noise = differenceNoise(samples, 0, samples.length, lsb, unusable);
  if (top < 8 * noise) return [];
  // A ring swings as far the other way: the ramp's own direction is the one that makes conductions.
  const up = excursions(samples, zero, 1, top, noise);
  const down = excursions(samples, zero, -1, top, noise);
  return down.length > up.length ? down : up;
}

/** Stretches above a fifth of the largest current, judged by the times from and to 15 % and 85 % of their peak. */
function excursions(
  samples: Float64Array,
  zero: number,
  sign: 1 | -1,
  top: number,
  noise: number,
): CurrentPulse[] {
  const found: CurrentPulse[] = [];
  const value = (i: number) => sign * (samples[i] - zero);
  let i = 0;
  let floor = 0;
  while (i < samples.length) {
    if (!(value(i) > LEAST_SHARE * top)) {
      i++;
      continue;
    }
    let peakAt = i;
    let end = i;
    while (end < samples.length && !(value(end) < 0.5 * LEAST_SHARE * top)) {
      if (value(end) >= value(peakAt)) peakAt = end;
      end++;
    }
    const peak = value(peakAt);
    const back = (share: number) => {
      let k = peakAt;
      while (k > floor && !(value(k) < share * peak)) k--;
      return k;
    };
    const on = (share: number) => {
      let k = peakAt;
      while (k < samples.length && !(value(k) < share * peak)) k++;
      return k;
    };
    const rise = back(0.8) - back(0.2);
    const fall = on(0.2) - on(0.8);
    if (end < samples.length && fall < ASYMMETRY * rise) {
      const last = lastHigh(samples, peakAt, on(0.5), sign, zero, peak, noise);
      found.push({
        on: startOfRise(value, back(0.2), floor, peak, noise),
        off: last,
        peak: sign * peak + zero,
        polarity: sign,
      });
    }
    floor = end;
    i = end + 1;
  }
  return found;
}

/** The peak of a noisy ramp is early or late: the instant is where the fall, extrapolated, meets the ramp. */
function lastHigh(
  samples: Float64Array,
  peakAt: number,
  half: number,
  sign: number,
  zero: number,
  peak: number,
  noise: number,
): number {
  let k = half;
  const least = peak - Math.max(5 * noise, 0.03 * peak);
  while (k > peakAt && sign * (samples[k - 1] - zero) < least) k--;
  return Math.max(peakAt, k - 0.5);
}

function startOfRise(
  value: (i: number) => number,
  from: number,
  floor: number,
  peak: number,
  noise: number,
): number | null {
  let k = from;
  while (k > floor && value(k) > Math.max(4 * noise, 0.02 * peak)) k--;
  return k > floor ? k + 0.5 : null;
}
