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
  for (let i = at; i > at - width && i > back; i--)
    if (Math.abs(samples[i] - expected) > 2 * tolerance) return i + 0.5;
  return at;
}
