/** Noise of a trace without a model, and the colour of residuals. */
import { powerOfTwo, powerSpectrum } from "../numeric/fft.ts";
import { select } from "../numeric/select.ts";

const spectrum = new Float64Array(2 ** 17);

/** Power of residuals by frequency. Reused: valid until the next call. */
export interface Colour {
  /** Bins 0 … half. */
  power: Float64Array;
  half: number;
  count: number;
  mean: number;
}

/** Lags at which coloured residuals resemble themselves; spread so that no period escapes all of them. */
const LAGS = [1, 2, 3, 5, 8, 13, 21, 34];

/** No correlation at any of the lags beyond what chance gives once in some hundred records. */
function isWhite(residual: Float64Array, count: number): boolean {
  const limit = (3 / Math.sqrt(count)) * productAt(residual, count, 0);
  return LAGS.every((lag) => Math.abs(productAt(residual, count, lag)) < limit);
}

/** Σ r_i·r_(i − lag), in four sums that need not wait for each other. */
function productAt(residual: Float64Array, count: number, lag: number): number {
  let a = 0;
  let b = 0;
  let c = 0;
  let d = 0;
  let i = lag;
  for (; i + 3 < count; i += 4) {
    a += residual[i] * residual[i - lag];
    b += residual[i + 1] * residual[i + 1 - lag];
    c += residual[i + 2] * residual[i + 2 - lag];
    d += residual[i + 3] * residual[i + 3 - lag];
  }
  for (; i < count; i++) a += residual[i] * residual[i - lag];
  return a + b + c + d;
}

/** Null where the residuals are white, or too few values to tell a colour. */
export function colourOf(residual: Float64Array, count: number): Colour | null {
  if (count < 64 || isWhite(residual, count)) return null;
  const n = powerOfTwo(count);
  powerSpectrum(residual, count, n, spectrum);
  const half = n / 2;
  let all = 0;
  for (let k = 1; k < half; k++) all += spectrum[k];
  return { power: spectrum, half, count, mean: all / (half - 1) };
}

/**
 * Power density around `omega` (radian a value) over the mean density: 1 where no colour shows. Known from few
 * independent bins, it is raised so that twice the uncertainty holds as it would with many (JCGM 100:2008, G.3:
 * Student's t at 95 % for ν degrees of freedom, 1.96 + 2.37/ν to first order).
 */
export function excessAt(colour: Colour | null, omega: number): number {
  if (!colour || !(colour.mean > 0)) return 1;
  const { half, count, power } = colour;
  const wide = (2 * half) / count;
  const centre = (omega / Math.PI) * half;
  // The bins the fit itself has emptied say nothing.
  const skip = 2 * wide;
  const reach = Math.max(12 * wide, 0.02 * half);
  // So are those that offset and baseline take.
  const low = Math.max(1, Math.ceil(1.5 * wide), Math.floor(centre - reach));
  const high = Math.min(half - 1, Math.ceil(centre + reach));
  let near = 0;
  let bins = 0;
  for (let k = low; k <= high; k++) {
    if (Math.abs(k - centre) < skip) continue;
    near += power[k];
    bins++;
  }
  if (bins === 0) return 1;
  // Each independent bin of a power spectrum is the sum of two squares.
  const freedom = (2 * bins) / wide;
  return (near / bins / colour.mean) * (1 + 2.37 / 1.96 / freedom) ** 2;
}

/** Median of |x| over 0.6745: standard deviation of normal noise. Reorders `values`. */
export function deviationFromMedian(values: Float64Array): number {
  if (values.length === 0) return 0;
  for (let i = 0; i < values.length; i++) values[i] = Math.abs(values[i]);
  return select(values, values.length >> 1) / 0.6745;
}

const none: number[] = [];

/** Differences looked at: the median is then good to 5 %. */
const NOISE_VALUES = 1024;
/** Binomial weights of the sixth difference and their root sum of squares. */
const SIXTH = [1, -6, 15, -20, 15, -6, 1];
const SIXTH_GAIN = Math.sqrt(924);

/**
 * Noise per sample from sixth differences, which a ring of 6 samples a cycle leaves through by 3 % only
 * (of 12: 0.06 %); at least the quantisation's LSB/√12. Noise of a narrower band than the sampling is
 * underestimated: where a quiet stretch is to be had, its scatter counts as well. `unusable`: sorted pairs
 * [from, to) of sample numbers.
 */
export function differenceNoise(
  samples: Float64Array,
  from: number,
  to: number,
  lsb: number | null,
  unusable: ArrayLike<number> = none,
): number {
  const stride = Math.max(1, Math.floor((to - from) / NOISE_VALUES));
  const differences = new Float64Array(Math.ceil(Math.max(0, to - from - 6) / stride));
  let count = 0;
  let gap = 0;
  for (let i = from; i + 6 < to; i += stride) {
    // Samples pinned at the screen's edge are alike, and would pass for a trace without noise.
    while (gap < unusable.length && unusable[gap + 1] <= i) gap += 2;
    if (gap < unusable.length && unusable[gap] < i + 7) continue;
    let d = 0;
    for (let k = 0; k < 7; k++) d += SIXTH[k] * samples[i + k];
    if (Number.isFinite(d)) differences[count++] = d;
  }
  const fromDifferences = deviationFromMedian(differences.subarray(0, count)) / SIXTH_GAIN;
  return Math.max(fromDifferences, (lsb ?? 0) / Math.sqrt(12));
}
