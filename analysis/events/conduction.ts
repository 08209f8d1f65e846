/** The conduction before a switch-off: how far back the trace stays at the level it had when it ended. */
import { meanAndDeviation } from "../numeric/robust.ts";

/**
 * Start of the stretch of samples [back, off) that stays about `level`, walking back from `off` in
 * steps of `width`; `back` when it reaches that far. Null when the stretch is no longer than a step.
 */
export function conductionStart(
  samples: Float64Array,
  off: number,
  back: number,
  level: number,
  tolerance: number,
  width: number,
): number | null {
  let at = Math.floor(off);
  // The drop across the switch follows the current: each step back is compared with the one after it.
  let expected = level;
  while (at > back) {
    const from = Math.max(back, at - width);
    const { mean, count } = meanAndDeviation(samples, from, at);
    if (count > 0 && Math.abs(mean - expected) > tolerance) break;
    if (count > 0) expected = mean;
    at = from;
  }
  if (at <= back) return back;
  if (off - at < width) return null;
  const from = Math.max(back, at - 2 * width);
  const to = Math.min(Math.floor(off), at + 3 * width);
  return firstStray(samples, from, to, width, tolerance) ?? stepWithin(samples, from, to);
}

/** Walking back from `to`: just after the first sample that is far off the last ones; null where none is. */
function firstStray(
  samples: Float64Array,
  from: number,
  to: number,
  width: number,
  tolerance: number,
): number | null {
  const calm = meanAndDeviation(samples, to - width, to);
  const limit = Math.max(6 * calm.deviation, 2 * tolerance);
  for (let i = to - 1; i >= from; i--) if (Math.abs(samples[i] - calm.mean) > limit) return i + 0.5;
  return null;
}

/** Where between two samples a step divides [from, to) best into two levels (least squares). */
function stepWithin(samples: Float64Array, from: number, to: number): number {
  const all = meanAndDeviation(samples, from, to);
  let best = from;
  let bestGain = -1;
  let sum = 0;
  let count = 0;
  for (let i = from; i < to - 1; i++) {
    if (Number.isFinite(samples[i])) {
      sum += samples[i] - all.mean;
      count++;
    }
    const gain = count > 0 && count < all.count ? (sum * sum) / (count * (1 - count / all.count)) : 0;
    if (gain > bestGain) {
      bestGain = gain;
      best = i;
    }
  }
  return best + 0.5;
}
