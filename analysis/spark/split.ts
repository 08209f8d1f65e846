/**
 * "One ring goes on" against "a ring up to a, something else, a ring from b on" (generalised likelihood
 * ratio; Basseville & Nikiforov, Detection of Abrupt Changes, 1993), over all a ≤ b.
 */
import { HIGH, LOW, type RingSums, type StretchCost, type StretchFit } from "./ring-sums.ts";

export interface Split {
  /** Log-likelihood gained over one ring, in units of the noise (twice the logarithm's difference). */
  gain: number;
  /** Misfit of one ring over the whole window, less what noise alone gives, in units of σ²: a strength squared. */
  misfit: number;
  /** Boundaries (numbers, not blocks): the ring before ends, the ring after begins. */
  a: number;
  b: number;
  before: StretchFit;
  after: StretchFit;
  whole: StretchFit;
  variance: number;
}

/** Blocks of disturbance are charged this many σ² each: more than a fitting ring, less than a bad one. */
const PRICE = 3;

export function bestSplit(sums: RingSums, noise: number, ceiling: number): Split {
  const last = sums.boundaries.length - 1;
  const lefts = sums.boundaries.map((_, k) => sums.costUpTo(k));
  const rights = sums.boundaries.map((_, k) => sums.costFrom(k));
  const whole = sums.from(0);
  const variance = Math.max(noise * noise, Math.min(ceiling, floorOf(rights, sums.columns)));
  let [bestA, best, a, b] = [0, Number.POSITIVE_INFINITY, 0, 0];
  let cheapest = Number.POSITIVE_INFINITY;
  for (let k = 0; k <= last; k++) {
    const left = lefts[k].cost / variance - PRICE * lefts[k].blocks;
    if (left < cheapest) [cheapest, bestA] = [left, k];
    const cost = cheapest + rights[k].cost / variance - PRICE * rights[k].blocks;
    if (cost < best) [best, a, b] = [cost, bestA, k];
  }
  const gain = whole.cost / variance - PRICE * whole.blocks - best;
  const misfit = whole.cost / variance - (whole.blocks - sums.columns);
  return { gain, misfit, a, b, before: sums.upTo(a), after: sums.from(b), whole, variance };
}

/**
 * What a free ring leaves in this record at its best: the smallest mean square over the later halves,
 * so that coloured noise and pickup raise the bar and a disturbance does not.
 */
function floorOf(rights: StretchCost[], columns: number): number {
  let least = Number.POSITIVE_INFINITY;
  for (let k = 0; k <= rights.length >> 1; k++) {
    const free = rights[k].blocks - columns;
    if (free > 4 * columns) least = Math.min(least, rights[k].cost / free);
  }
  return Number.isFinite(least) ? least : 0;
}

/** Energy-like size of the fitted ring at a block: both modes' squared amplitudes together. */
export function sizeAt(sums: RingSums, { coefficients }: StretchFit, block: number): number {
  const [c, s] = sums.amplitudeAt(coefficients, LOW, block);
  if (sums.columns <= HIGH) return Math.hypot(c, s);
  const [hc, hs] = sums.amplitudeAt(coefficients, HIGH, block);
  return Math.hypot(c, s, hc, hs);
}
