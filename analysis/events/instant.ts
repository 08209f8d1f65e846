/** The switch-off's instant, sharpened: where the fitted ring, run backwards, meets the conduction level. */
import { lineThrough } from "../numeric/robust.ts";
import type { RingFit } from "../ring/fit-format.ts";
import { modelValues } from "../ring/residuals.ts";

/** Steps the model is looked at in a sample. */
const FINE = 8;

/**
 * Crossing of the model through `level` in the kick's direction nearest to `at`, within `reach`
 * samples; null where the model does not cross there.
 */
export function modelCrossing(
  fit: RingFit,
  at: number,
  reach: number,
  level: number,
  polarity: 1 | -1,
): { at: number; slope: number } | null {
  const fine: RingFit = { ...fit, step_s: fit.step_s / FINE, from: 0, to: (fit.to - fit.from) * FINE };
  const first = Math.floor((at - reach - fit.from) * FINE);
  const count = Math.ceil(2 * reach * FINE) + 2;
  const values = modelValues(fine, first, count);
  let best: { at: number; slope: number } | null = null;
  for (let k = 1; k < count; k++) {
    const before = polarity * (values[k - 1] - level);
    const after = polarity * (values[k] - level);
    if (!(before <= 0 && after > 0)) continue;
    const crossing = fit.from + (first + k - 1 + before / (before - after)) / FINE;
    if (!best || Math.abs(crossing - at) < Math.abs(best.at - at))
      best = { at: crossing, slope: (after - before) * FINE };
  }
  return best;
}

/**
 * The same for a coil current: it goes on smoothly, so the instant is where the model, run backwards,
 * has the slope the ramp ended with (the capacitor holds the coil's voltage for that moment). `at`: rough.
 */
export function slopeMatch(fit: RingFit, samples: Float64Array, at: number, period: number): number | null {
  const ramp = lineThrough(
    samples,
    Math.max(0, Math.floor(at - 0.5 * period)),
    Math.floor(at - 0.06 * period),
  );
  if (!ramp) return null;
  const reach = 0.2 * period;
  const fine: RingFit = { ...fit, step_s: fit.step_s / FINE, from: 0, to: (fit.to - fit.from) * FINE };
  const first = Math.floor((at - reach - fit.from) * FINE);
  const values = modelValues(fine, first, Math.ceil(2 * reach * FINE) + 2);
  let best: number | null = null;
  for (let k = 2; k < 2 * reach * FINE; k++) {
    const before = (values[k - 1] - values[k - 2]) * FINE - ramp.slope;
    const after = (values[k] - values[k - 1]) * FINE - ramp.slope;
    if (before * after > 0 || Math.sign(before) !== Math.sign(ramp.slope)) continue;
    const crossing = fit.from + (first + k - 1.5 + before / (before - after)) / FINE;
    if (best === null || Math.abs(crossing - at) < Math.abs(best - at)) best = crossing;
  }
  return best;
}
