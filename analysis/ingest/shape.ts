/** What a waveform looks like, in the few respects that tell a switch node from a gate or a current. */

export interface Shape {
  low: number;
  high: number;
  /** Level it rests at most: the fullest bin of a histogram (state level by mode, IEEE Std 181). */
  rest: number;
  /** Share of samples within 8 % of the range of either extreme. */
  atExtremes: number;
  /** Largest distance from rest, up and down. */
  above: number;
  below: number;
  /** Where the largest distance from rest lies, in samples. */
  peakAt: number;
  /** Share of samples more than a quarter of the way from rest to the peak. */
  busy: number;
  /** How often it swings past rest by more than a tenth of the range, in turn to either side. */
  swings: number;
  /** Largest straight rise from the rest level as a share of the height above it: near 1 for a ramp. */
  rampShare: number;
}

const bins = 256;

/** null without two different values. */
export function shapeOf(samples: Float64Array): Shape | null {
  let [low, high] = [Infinity, -Infinity];
  for (const value of samples) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (!(high > low)) return null;
  const rest = restLevel(samples, low, high);
  const near = 0.08 * (high - low);
  const reach = 0.25 * Math.max(high - rest, rest - low);
  let extremes = 0;
  let busy = 0;
  let count = 0;
  let peakAt = 0;
  let farthest = -1;
  for (let i = 0; i < samples.length; i++) {
    const value = samples[i];
    if (value !== value) continue;
    count++;
    const distance = Math.abs(value - rest);
    if (value < low + near || value > high - near) extremes++;
    if (distance > reach) busy++;
    if (distance > farthest) [farthest, peakAt] = [distance, i];
  }
  return {
    low,
    high,
    rest,
    atExtremes: extremes / count,
    above: high - rest,
    below: rest - low,
    peakAt,
    busy: busy / count,
    swings: countSwings(samples, rest, 0.1 * (high - low)),
    rampShare: straightRise(samples, low, high, rest),
  };
}

function restLevel(samples: Float64Array, low: number, high: number): number {
  const counts = new Int32Array(bins);
  for (const value of samples)
    if (value === value) counts[Math.min(bins - 1, Math.floor(((value - low) / (high - low)) * bins))]++;
  const fullest = counts.indexOf(Math.max(...counts));
  return low + ((fullest + 0.5) * (high - low)) / bins;
}

/**
 * In 200 block means: the largest rise that starts at rest and stays within 8 % of its chord (a quarter
 * of a sine strays by 21 %, a half by 10 %), as a share of the height above rest.
 */
function straightRise(samples: Float64Array, low: number, high: number, rest: number): number {
  const means = blockMeans(samples, Math.min(200, samples.length >> 1));
  let largest = 0;
  let from = 0;
  for (let b = 1; b <= means.length; b++) {
    if (means[b] > means[b - 1]) continue;
    const rise = means[b - 1] - means[from];
    const fromRest = Math.abs(means[from] - rest) < 0.15 * (high - low);
    if (b - from >= 5 && fromRest && isChord(means.slice(from, b), rise)) largest = Math.max(largest, rise);
    from = b;
  }
  return largest / (high - rest);
}

function countSwings(samples: Float64Array, rest: number, reach: number): number {
  let side = 0;
  let swings = 0;
  for (const value of samples) {
    const now = value > rest + reach ? 1 : value < rest - reach ? -1 : side;
    if (now !== side) swings++;
    side = now;
  }
  return swings;
}

const isChord = (means: number[], rise: number) =>
  means.every((mean, i) => Math.abs(mean - means[0] - (rise * i) / (means.length - 1)) <= 0.08 * rise);

function blockMeans(samples: Float64Array, blocks: number): number[] {
  return Array.from({ length: blocks }, (_, b) => {
    let sum = 0;
    let count = 0;
    const to = Math.floor(((b + 1) * samples.length) / blocks);
    for (let i = Math.floor((b * samples.length) / blocks); i < to; i++) {
      if (samples[i] !== samples[i]) continue;
      sum += samples[i];
      count++;
    }
    return count ? sum / count : NaN;
  });
}
