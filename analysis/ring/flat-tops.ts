/**
 * Half-waves that are cut: a body diode holds the node at one drop below ground, a clamp holds it at
 * its voltage. While that lasts the ring is not free.
 */

/** Mean over peak of a half-wave: 2/π for a sinusoid, near 1 for a cut one. */
const FLAT_RATIO = 0.76;
const LEAST_SAMPLES = 6;

/**
 * First sample after the last cut half-wave of samples[from … to), `from` when none is cut. `level` is
 * where the ring settles; `noise` widens what counts as flat; half-waves below `least` are not judged.
 */
export function afterFlatTops(
  samples: Float64Array,
  from: number,
  to: number,
  level: number,
  noise: number,
  least: number,
): number {
  let start = from;
  let begin = from;
  let sign = Math.sign(samples[from] - level);
  for (let i = from + 1; i < to; i++) {
    const side = Math.sign(samples[i] - level);
    if (side === sign || side === 0 || !Number.isFinite(samples[i])) continue;
    if (i - begin >= LEAST_SAMPLES && isFlat(samples, begin, i, level, noise, least)) start = i;
    begin = i;
    sign = side;
  }
  return start;
}

function isFlat(
  samples: Float64Array,
  from: number,
  to: number,
  level: number,
  noise: number,
  least: number,
): boolean {
  let peak = 0;
  let sum = 0;
  let count = 0;
  for (let i = from; i < to; i++) {
    const y = Math.abs(samples[i] - level);
    if (!Number.isFinite(y)) continue;
    peak = Math.max(peak, y);
    sum += y;
    count++;
  }
  // The largest of many noisy samples stands about two deviations too high.
  return peak > least && sum / count > FLAT_RATIO * (peak - 2 * noise) && peak > 12 * noise;
}
