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
  slope: number,
  tolerance: number,
  width: number,
): number | null {
  let at = Math.floor(off);
  while (at > back) {
    const from = Math.max(back, at - width);
    const { mean, count } = meanAndDeviation(samples, from, at);
    const expected = level - slope * (off - (from + at) / 2);
    // A straight line is trusted a little way only: beyond that either the line or the level will do.
    const near = Math.abs(mean - expected) < tolerance || Math.abs(mean - level) < tolerance;
    if (count > 0 && !near) break;
    at = from;
  }
  if (at <= back) return back;
  if (off - at < width) return null;
  for (let i = at; i > at - width && i > back; i--)
    if (Math.abs(samples[i] - level) > 2 * tolerance) return i + 0.5;
  return at;
}
