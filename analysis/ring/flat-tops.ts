/**
 * Half-waves that are cut: a body diode holds the node at one drop below ground, a clamp holds it at
 * its voltage. While that lasts the ring is not free.
 */

/** A sinusoid stays within 4 % of its peak for 18 % of the half-wave; a cut one far longer. */
const NEAR_PEAK = 0.04;
const FLAT_SHARE = 0.42;
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
  for (let i = from; i < to; i++) peak = Math.max(peak, Math.abs(samples[i] - level) || 0);
  if (peak < least) return false;
  const band = Math.max(NEAR_PEAK * peak, 0) + 2.5 * noise;
  if (band > 0.25 * peak) return false;
  let near = 0;
  for (let i = from; i < to; i++) if (Math.abs(samples[i] - level) > peak - band) near++;
  // What a clean half-sine would have in that band.
  const clean = (2 / Math.PI) * Math.acos(1 - band / peak);
  // Two samples more than the share: few samples fall in the band by chance.
  return near - 2 > (to - from) * Math.max(FLAT_SHARE, clean + 0.15);
}
