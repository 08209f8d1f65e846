/** Lowest and highest of fixed blocks of samples, and of blocks of blocks: any stretch in few steps. */
export interface Pyramid {
  samples: Float64Array;
  levels: { block: number; low: Float64Array; high: Float64Array }[];
}

const smallestBlock = 32;
const growth = 8;

/**
 * Built once for a channel, in time linear in its samples. Samples that are no number count as absent:
 * a block without any has low = +Infinity and high = −Infinity.
 */
export function buildPyramid(samples: Float64Array): Pyramid {
  const levels: Pyramid["levels"] = [];
  let [low, high]: [Float64Array, Float64Array] = [samples, samples];
  for (let block = smallestBlock; block <= samples.length; block *= growth) {
    const each = levels.length === 0 ? smallestBlock : growth;
    [low, high] = [reduce(low, each, Math.min, Infinity), reduce(high, each, Math.max, -Infinity)];
    levels.push({ block, low, high });
  }
  return { samples, levels };
}

function reduce(from: Float64Array, each: number, pick: (a: number, b: number) => number, none: number) {
  const reduced = new Float64Array(Math.ceil(from.length / each)).fill(none);
  for (let i = 0, block = 0; i < from.length; block++)
    for (const end = Math.min(from.length, i + each); i < end; i++)
      if (!Number.isNaN(from[i])) reduced[block] = pick(reduced[block], from[i]);
  return reduced;
}

/** Lowest and highest of samples [from, to), exactly; null where none of them is a number. */
export function extremes(pyramid: Pyramid, from: number, to: number): { low: number; high: number } | null {
  let [low, high] = [Infinity, -Infinity];
  const take = (l: number, h: number) => {
    if (l < low) low = l;
    if (h > high) high = h;
  };
  /** Whole blocks of this level, the ragged ends by the level below; level −1 is the samples. */
  const cover = (level: number, start: number, end: number) => {
    if (start >= end) return;
    if (level < 0) {
      for (let i = start; i < end; i++) take(pyramid.samples[i], pyramid.samples[i]);
      return;
    }
    const { block, low: lows, high: highs } = pyramid.levels[level];
    const [first, last] = [Math.ceil(start / block), Math.floor(end / block)];
    if (first >= last) return cover(level - 1, start, end);
    for (let i = first; i < last; i++) take(lows[i], highs[i]);
    cover(level - 1, start, first * block);
    cover(level - 1, last * block, end);
  };
  cover(pyramid.levels.length - 1, from, to);
  return low <= high ? { low, high } : null;
}
