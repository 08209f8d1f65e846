/** Location and scatter of the finite values of a stretch of samples; NaN or null where there are too few. */
import { median } from "./median.ts";

/** Median of the finite values of samples[from … to), from at most `most` of them evenly spaced; NaN if none. */
export function medianOf(samples: ArrayLike<number>, from = 0, to = samples.length, most = 512): number {
  const stride = Math.max(1, Math.ceil((to - from) / most));
  const values: number[] = [];
  for (let i = from; i < to; i += stride) if (Number.isFinite(samples[i])) values.push(samples[i]);
  return median(values);
}

/** Mean and standard deviation of the finite values of samples[from … to); NaN where there are too few. */
export function meanAndDeviation(
  samples: ArrayLike<number>,
  from: number,
  to: number,
): { mean: number; deviation: number; count: number } {
  let sum = 0;
  let count = 0;
  for (let i = from; i < to; i++)
    if (Number.isFinite(samples[i])) {
      sum += samples[i];
      count++;
    }
  const mean = count > 0 ? sum / count : NaN;
  let square = 0;
  for (let i = from; i < to; i++) if (Number.isFinite(samples[i])) square += (samples[i] - mean) ** 2;
  return { mean, deviation: count > 1 ? Math.sqrt(square / (count - 1)) : NaN, count };
}

/** Straight line through samples[from … to) against the sample number less `from`; finite samples only. */
export function lineThrough(
  samples: ArrayLike<number>,
  from: number,
  to: number,
): { level: number; slope: number; deviation: number } | null {
  let n = 0;
  let sx = 0;
  let sy = 0;
  for (let i = from; i < to; i++)
    if (Number.isFinite(samples[i])) {
      n++;
      sx += i - from;
      sy += samples[i];
    }
  if (n < 3) return null;
  const mx = sx / n;
  const my = sy / n;
  let sxx = 0;
  let sxy = 0;
  let syy = 0;
  for (let i = from; i < to; i++)
    if (Number.isFinite(samples[i])) {
      const x = i - from - mx;
      const y = samples[i] - my;
      sxx += x * x;
      sxy += x * y;
      syy += y * y;
    }
  const slope = sxx > 0 ? sxy / sxx : 0;
  return { level: my - slope * mx, slope, deviation: Math.sqrt(Math.max(0, syy - slope * sxy) / (n - 2)) };
}
