/**
 * The plateau of the reflected burn voltage: the kick breaks down within a small part of a period and the trace
 * then stands a little above the level that the ring settles to, for far longer than a free ring takes to pass
 * through. A quiet ring crosses that band in a twentieth of its period, a clamp holds near the kick itself, a
 * contact's bounce and a diode hold below the settled level (the usual primary waveform of an ignition coil;
 * common practice, no source).
 */
import { median } from "../numeric/median.ts";
import { largest } from "./traits.ts";
import type { SparkWindow } from "./window.ts";

export interface BurnLine {
  /** Above the level the ring settles to, in the channel's unit. */
  height: number;
  length_s: number;
  /** Block where it begins. */
  from: number;
}

/** Shares of the kick: the fall begins above the first, the plateau lies below the second. */
const FALL = { above: 0.6, below: 0.3 };
/** The plateau lies above the settled level by at least this share of the kick. */
const LEAST_HEIGHT = 0.004;
/** In periods: what the fall takes at most, the plateau at least; means are taken over `mean`. */
const WITHIN = 0.06;
const LENGTH = 0.3;
const MEAN = 0.15;

/** Null where none is seen. */
export function burnLine(window: SparkWindow): BurnLine | null {
  const { blocks, period, noise, step_s } = window;
  const { values, count } = blocks;
  const settled = median(values.subarray(Math.floor((2 * count) / 3), count));
  const peak = largest(window, 0, Math.min(count, Math.ceil(period / 2))).block;
  const kick = values[peak] - settled;
  if (!(kick > 0)) return null;
  const height = (i: number) => (values[i] - settled) / kick;
  let low = peak;
  while (low < count && height(low) > FALL.below) low++;
  let high = low;
  while (high > peak && height(high) < FALL.above) high--;
  if (low - high > Math.max(2, WITHIN * period)) return null;
  const width = Math.max(2, Math.round(MEAN * period));
  const least = Math.max(LEAST_HEIGHT, (4 * noise) / Math.sqrt(width) / kick);
  const end = plateauEnd(height, low + width, count, width, least);
  if (end - low < LENGTH * period) return null;
  const middle = median(values.subarray(low + width, end)) - settled;
  return { height: middle, length_s: (end - low) * step_s, from: low };
}

/** Where the mean over `width` blocks leaves the plateau's band. */
function plateauEnd(
  height: (i: number) => number,
  from: number,
  count: number,
  width: number,
  least: number,
): number {
  let end = from;
  for (; end + width <= count; end++) {
    let mean = 0;
    for (let i = end; i < end + width; i++) mean += height(i) / width;
    if (mean < least || mean > FALL.below) break;
  }
  return end;
}
