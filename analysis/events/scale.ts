/**
 * The time scale of what happens on a voltage trace: one ring period, roughly, from the spacing of
 * its large half-waves. It sets the windows of the switch-off search, nothing more.
 */
import { medianOf } from "../numeric/robust.ts";

export interface Scale {
  /** Samples of one ring period, or of twice the kick's width where nothing rings. */
  period: number;
  /** Median level of the record. */
  level: number;
  /** Largest excursion from it. */
  reach: number;
}

/** Share of the largest excursion at which a half-wave begins and ends. */
const BEGIN = 0.3;
const END = 0.1;
/** A half-wave's width at half its height; a top so many times narrower than its foot is sharp. */
const HALF = 0.5;
const SHARP = 4;
/** Crossings closer than this many values are noise: smooth first. */
const LEAST_VALUES = 6;
/** Noise does not cross a hysteresis of this many standard deviations. */
const SURE = 7;

/** Null for a trace without excursions (constant, empty). `noise`: per sample. */
export function scaleOf(samples: Float64Array, noise: number): Scale | null {
  const level = medianOf(samples);
  if (!Number.isFinite(level)) return null;
  let found: Scale | null = null;
  const raw = rawExtremes(samples);
  for (let width = 1; width <= samples.length / 16; width *= 2) {
    const [low, high] = width === 1 ? raw : extremes(samples, width, raw);
    const reach = Math.max(high - level, level - low);
    if (!(reach > 0)) return null;
    const sign = high - level >= level - low ? 1 : -1;
    const spacing = typicalSpacing(samples, width, level, sign, reach);
    // Smoothed too much: the scale before was the last to be trusted.
    if (spacing === null || (spacing < LEAST_VALUES && found)) break;
    if (spacing >= LEAST_VALUES) found = { period: spacing * width, level, reach };
    if (found && (BEGIN - END) * reach > (SURE * noise) / Math.sqrt(width)) break;
  }
  return found;
}

/** Mean of `width` samples from i; NaN samples make it NaN. */
function meanFrom(samples: Float64Array, i: number, width: number): number {
  if (width === 1) return samples[i];
  let sum = 0;
  for (let k = i; k < i + width; k++) sum += samples[k];
  return sum / width;
}

/** A glitch of a sample or two is no excursion: the third lowest and third highest sample count. */
const GLITCH = 2;

function rawExtremes(samples: Float64Array): [number, number] {
  const lows = new Float64Array(GLITCH + 1).fill(Infinity);
  const highs = new Float64Array(GLITCH + 1).fill(-Infinity);
  for (const y of samples) {
    if (y < lows[0] && y > -Infinity) insert(lows, y, -1);
    if (y > highs[0] && y < Infinity) insert(highs, y, 1);
  }
  return [lows[0], highs[0]];
}

/** Of means over `width` samples. A kick that a spark cuts short may last for one of them, a glitch is clipped. */
function extremes(samples: Float64Array, width: number, [least, most]: [number, number]): [number, number] {
  let [low, high] = [Infinity, -Infinity];
  for (let i = 0; i + width <= samples.length; i += width) {
    let sum = 0;
    for (let k = i; k < i + width; k++) sum += Math.min(most, Math.max(least, samples[k]));
    const mean = sum / width;
    if (mean < low) low = mean;
    if (mean > high) high = mean;
  }
  return [low, high];
}

/** Replaces the least extreme of the kept values and leaves the next such one in front. */
function insert(kept: Float64Array, value: number, sign: 1 | -1): void {
  kept[0] = value;
  for (let k = 1; k < kept.length && sign * kept[k - 1] > sign * kept[k]; k++)
    [kept[k - 1], kept[k]] = [kept[k], kept[k - 1]];
}

/** Median distance between the beginnings of neighbouring half-waves of one sign, in blocks of `width`. */
function typicalSpacing(
  samples: Float64Array,
  width: number,
  level: number,
  sign: number,
  reach: number,
): number | null {
  const spacings: number[] = [];
  const widths: number[] = [];
  let high = 0;
  let begun = -1;
  let previous = -1;
  let above = false;
  for (let b = 0; (b + 1) * width <= samples.length; b++) {
    const y = sign * (meanFrom(samples, b * width, width) - level);
    if (y > HALF * reach) high++;
    if (!above && y > BEGIN * reach) {
      above = true;
      if (previous >= 0) spacings.push(b - previous);
      begun = previous = b;
    } else if (above && y < END * reach) {
      above = false;
      widths.push(b - begun);
    }
  }
  if (widths.length === 0) return null;
  const wide = medianByLength(widths);
  const ringing = spacings.filter((spacing) => spacing < 6 * wide);
  if (ringing.length > 0) return medianByLength(ringing);
  // A kick that a spark cuts short stands on the arc's long foot: its top tells how fast the coil rings.
  const top = high / widths.length;
  return 2.3 * Math.min(SHARP * top, wide);
}

/** The length in which half of the whole time is reached: many short ones of a noise burst weigh little. */
function medianByLength(lengths: number[]): number {
  const sorted = lengths.toSorted((a, b) => a - b);
  const half = sorted.reduce((sum, length) => sum + length, 0) / 2;
  let sum = 0;
  return sorted.find((length) => (sum += length) >= half)!;
}
