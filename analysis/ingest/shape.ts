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
  /** Longest rise in even steps as a share of the range: near 1 for a ramp. */
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
    rampShare: longestRamp(samples, low, high),
  };
}

function restLevel(samples: Float64Array, low: number, high: number): number {
  const counts = new Int32Array(bins);
  for (const value of samples)
    if (value === value) counts[Math.min(bins - 1, Math.floor(((value - low) / (high - low)) * bins))]++;
  const fullest = counts.indexOf(Math.max(...counts));
  return low + ((fullest + 0.5) * (high - low)) / bins;
}

/** In 200 block means: the longest run of steps of one sign, as a share of the range. */
function longestRamp(samples: Float64Array, low: number, high: number): number {
  const blocks = Math.min(200, samples.length >> 1);
  const means: number[] = [];
  for (let b = 0; b < blocks; b++) {
    let sum = 0;
    let count = 0;
    const to = Math.floor(((b + 1) * samples.length) / blocks);
    for (let i = Math.floor((b * samples.length) / blocks); i < to; i++)
      if (samples[i] === samples[i]) {
        sum += samples[i];
        count++;
      }
    means.push(count ? sum / count : NaN);
  }
  let longest = 0;
  let from = 0;
  for (let b = 1; b < means.length; b++) {
    const step = means[b] - means[b - 1];
    const rising = step > 0 && step < 0.25 * (high - low);
    if (!rising) from = b;
    else if (b - from >= 4) longest = Math.max(longest, means[b] - means[from]);
  }
  return longest / (high - low);
}
