/** Middle value; the mean of the middle two for an even number; NaN for none. */
export function median(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).toSorted();
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

/** Median absolute deviation scaled to a normal distribution's standard deviation (Hampel, JASA 69, 1974). */
export function robustSpread(values: ArrayLike<number>): number {
  const centre = median(values);
  return 1.4826 * median(Float64Array.from(values, (value) => Math.abs(value - centre)));
}
