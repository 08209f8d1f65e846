/**
 * A window of samples made ready for fitting: block means (the anti-alias filter), stretches without
 * measurement left out whole. A block mean of a damped sinusoid is the same damped sinusoid at the
 * block rate times a known factor (`blockGain`), so the filter costs the model nothing.
 */

export interface Blocks {
  /** Tells these blocks from any others; a fit takes their values for fixed. */
  serial: number;
  /** Mean of each block; 0 where the block holds an unusable sample. */
  values: Float64Array;
  count: number;
  /** Pairs [from, to) of block numbers with measurements. */
  segments: number[];
  /** Blocks in the segments. */
  used: number;
  decimation: number;
  /** Subtracted from every block (keeps digits where a small ring rides on a large level). */
  level: number;
  /** Σ value². */
  power: number;
  /** Σ value·i^k over the segments, k = 0 … 3, i the block number. */
  moments: Float64Array;
}

let made = 0;

/**
 * Blocks of `decimation` samples of [from, to). `unusable`: sorted pairs [from, to) of sample numbers.
 */
export function makeBlocks(
  samples: Float64Array,
  from: number,
  to: number,
  unusable: ArrayLike<number>,
  decimation: number,
): Blocks {
  const count = Math.max(0, Math.floor((to - from) / decimation));
  const values = new Float64Array(count);
  const segments = usableSegments(from, count, decimation, unusable);
  let used = 0;
  let sum = 0;
  const scale = 1 / decimation;
  for (let s = 0; s < segments.length; s += 2) {
    for (let b = segments[s]; b < segments[s + 1]; b++) {
      let mean = 0;
      const start = from + b * decimation;
      for (let i = start; i < start + decimation; i++) mean += samples[i];
      values[b] = mean * scale;
      sum += values[b];
    }
    used += segments[s + 1] - segments[s];
  }
  const level = used > 0 ? sum / used : 0;
  const moments = new Float64Array(4);
  let power = 0;
  for (let s = 0; s < segments.length; s += 2)
    for (let b = segments[s]; b < segments[s + 1]; b++) {
      const y = (values[b] -= level);
      power += y * y;
      moments[0] += y;
      moments[1] += y * b;
      moments[2] += y * b * b;
      moments[3] += y * b * b * b;
    }
  return { serial: ++made, values, count, segments, used, decimation, level, power, moments };
}

/**
 * The blocks with overrange samples kept at the screen's edge: too wrong for a fit, but right in time, so
 * the spectrum finds the ring's own frequency where only the steep parts of its waves are on screen.
 */
export function pinnedValues(samples: Float64Array, from: number, blocks: Blocks): Float64Array {
  if (blocks.used === blocks.count) return blocks.values;
  const out = new Float64Array(blocks.count);
  const { decimation } = blocks;
  for (let b = 0; b < blocks.count; b++) {
    let sum = 0;
    for (let i = from + b * decimation; i < from + (b + 1) * decimation; i++)
      sum += samples[i] - blocks.level;
    out[b] = Number.isFinite(sum) ? sum / decimation : 0;
  }
  return out;
}

/** Block ranges of [0, count) that touch no unusable sample. */
function usableSegments(
  from: number,
  count: number,
  decimation: number,
  unusable: ArrayLike<number>,
): number[] {
  const segments: number[] = [];
  let start = 0;
  for (let u = firstAfter(unusable, from); u < unusable.length; u += 2) {
    const first = Math.max(0, Math.floor((unusable[u] - from) / decimation));
    const last = Math.ceil((unusable[u + 1] - from) / decimation);
    if (first >= count) break;
    if (first > start) segments.push(start, first);
    start = Math.max(start, last);
  }
  if (count > start) segments.push(start, count);
  return segments;
}

/** Index of the first pair that ends after `from`. */
function firstAfter(pairs: ArrayLike<number>, from: number): number {
  let low = 0;
  let high = pairs.length >> 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (pairs[2 * middle + 1] > from) high = middle;
    else low = middle + 1;
  }
  return 2 * low;
}

/**
 * Mean of exp(s·i), i = 0 … D−1, with s = re + j·im per sample, and its logarithmic derivative by s:
 * [gain re, gain im, derivative re, derivative im].
 */
export function blockGain(re: number, im: number, decimation: number): [number, number, number, number] {
  let gainRe = 0;
  let gainIm = 0;
  let slopeRe = 0;
  let slopeIm = 0;
  for (let i = 0; i < decimation; i++) {
    const e = Math.exp(re * i);
    const c = e * Math.cos(im * i);
    const s = e * Math.sin(im * i);
    gainRe += c;
    gainIm += s;
    slopeRe += i * c;
    slopeIm += i * s;
  }
  const norm = gainRe * gainRe + gainIm * gainIm;
  return [
    gainRe / decimation,
    gainIm / decimation,
    (slopeRe * gainRe + slopeIm * gainIm) / norm,
    (slopeIm * gainRe - slopeRe * gainIm) / norm,
  ];
}
