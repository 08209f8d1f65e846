/** Residuals of a fit on raw samples, in short stretches: where one ring explains the data and where not. */
import { addModes, baselineInto } from "./evaluate.ts";
import type { FittedMode, RingFit } from "./fit-format.ts";

let scratch = new Float64Array(0);

/** Modes and what they stand on. */
export const wavesOf = ({ modes, pickup }: RingFit): FittedMode[] => [...modes, ...pickup];

/** model(i) for samples first … first + count, continued outside the fit's window. Valid until the next call. */
export function modelValues(fit: RingFit, first: number, count: number): Float64Array {
  if (scratch.length < count) scratch = new Float64Array(count);
  baselineInto(fit.baseline, fit.to - fit.from, first - fit.from, count, scratch);
  addModes(wavesOf(fit), fit.step_s, first - fit.from, count, scratch);
  return scratch;
}

export interface Profile {
  from: number;
  /** Samples a stretch. */
  length: number;
  /** Root mean square residual of each stretch; NaN where it holds nothing usable. */
  rms: Float64Array;
}

/** Over [from, to) in stretches of `length`; unusable samples left out. */
export function residualProfile(
  samples: Float64Array,
  fit: RingFit,
  from: number,
  to: number,
  length: number,
  unusable: ArrayLike<number>,
): Profile {
  const model = modelValues(fit, from, to - from);
  const count = Math.max(1, Math.floor((to - from) / length));
  const rms = new Float64Array(count);
  let gap = 0;
  for (let s = 0; s < count; s++) {
    const end = s === count - 1 ? to : from + (s + 1) * length;
    let sum = 0;
    let used = 0;
    for (let i = from + s * length; i < end; i++) {
      while (gap < unusable.length && unusable[gap + 1] <= i) gap += 2;
      if (gap < unusable.length && i >= unusable[gap]) continue;
      sum += (samples[i] - model[i - from]) ** 2;
      used++;
    }
    rms[s] = used > 0 ? Math.sqrt(sum / used) : NaN;
  }
  return { from, length, rms };
}

/** What a stretch of n samples of plain noise stays below in all but a few of ten thousand cases. */
export const noiseLimit = (noise: number, n: number): number => noise * (1 + 2.9 / Math.sqrt(Math.max(1, n)));
