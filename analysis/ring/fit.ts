/** The ring on a given window: modes, baseline, covariance. */
import { makeBlocks, pinnedValues, type Blocks } from "./blocks.ts";
import { toModes, unitCovariance } from "./covariance.ts";
import { residualBlocks } from "./evaluate.ts";
import type { RingFit } from "./fit-format.ts";
import type { Mode } from "./gram.ts";
import { colourOf, differenceNoise, excessAt } from "./noise.ts";
import { residualBuffer, searchModes, variance } from "./search.ts";
import { separatePickup } from "./pickup.ts";
import { residualProfile, wavesOf } from "./residuals.ts";
import { solve, type Solution } from "./solve.ts";
import { scaled } from "./start.ts";

export interface FitOptions {
  /** Sorted pairs [from, to) of sample numbers without measurement. */
  unusable?: ArrayLike<number>;
  lsb?: number | null;
  /** Modes to look for, 2 when absent. */
  mostModes?: number;
  /** Modes known beforehand (another window of the same ring): no search, refined as they are. */
  start?: { frequency_Hz: number; decay_per_s: number }[];
  /** The same ring on another window: its modes, baseline and colour of noise are taken over, and refined. */
  like?: RingFit;
  /** One period of the ring in samples, rough: lets the search average down what is sampled far finer. */
  period?: number;
  /** The end of the ring may be left out, where the slowest mode is gone long before the window is over. */
  trimmed?: boolean;
  /** Noise per sample where it is known; else from the window's differences. */
  noise?: number;
}

/** Values the search looks at; longer windows are averaged down first. */
const SEARCH_VALUES = 4096;
/** Enough to see modes up to some 15 times faster than the ring. */
const SEARCH_PER_CYCLE = 40;
/** Values a cycle of the fastest mode the last pass keeps: block means lose 1 − sinc² = 0.3 %. */
const FINE_PER_CYCLE = 32;
/** e-foldings after which a ring says nothing more about itself (0.3 % of the information is left). */
const FOLDINGS = 5;
const none = new Int32Array(0);

/**
 * Fits one or two damped modes and a baseline to samples[from … to). Null where no oscillation stands
 * out of the noise or the window is too short for the parameters.
 */
export function fitRing(
  samples: Float64Array,
  from: number,
  windowEnd: number,
  step_s: number,
  options: FitOptions = {},
): RingFit | null {
  const unusable = options.unusable ?? none;
  const length = windowEnd - from;
  if (length < 8) return null;
  let start: Mode[];
  const known = options.like ? wavesOf(options.like) : options.start;
  if (known) start = known.map((mode) => perSample(mode, step_s));
  else {
    const fine = Math.floor((options.period ?? 0) / SEARCH_PER_CYCLE);
    const by = Math.max(1, Math.ceil(length / SEARCH_VALUES), fine);
    const blocks = makeBlocks(samples, from, windowEnd, unusable, by);
    const found = searchModes(blocks, pinnedValues(samples, from, blocks), options.mostModes ?? 2);
    if (!found) return null;
    start = scaled(found.modes, 1 / by);
  }
  const to = options.trimmed ? endOfRing(start, from, windowEnd, options.period ?? 0) : windowEnd;
  const fastest = Math.max(...start.map((mode) => mode.omega));
  const decimation = Math.max(1, Math.floor((2 * Math.PI) / fastest / FINE_PER_CYCLE));
  const blocks = makeBlocks(samples, from, to, unusable, decimation);
  if (blocks.used < 4 * start.length + 2) return null;
  const degree = (options.like?.baseline.length ?? 1) - 1;
  const plain = solve(blocks, scaled(start, decimation), degree);
  const solution = options.like ? plain : withBaseline(blocks, plain);
  return describe(samples, from, to, step_s, blocks, inOrder(solution), options);
}

/** Where the slowest mode is gone, if that is long before `to`; modes per sample. */
function endOfRing(modes: Mode[], from: number, to: number, period: number): number {
  const slowest = Math.min(...modes.map((mode) => mode.decay));
  const end = Math.ceil(from + Math.max(FOLDINGS / slowest, 3 * period));
  return slowest > 0 && end < from + 0.9 * (to - from) ? end : to;
}

const perSample = (mode: { frequency_Hz: number; decay_per_s: number }, step_s: number): Mode => ({
  omega: 2 * Math.PI * mode.frequency_Hz * step_s,
  decay: mode.decay_per_s * step_s,
});

/** A slow baseline where the offset leaves one behind: slope, then up to cubic. */
function withBaseline(blocks: Blocks, plain: Solution): Solution {
  let best = plain;
  if (slowRest(blocks, plain) < 16) return plain;
  for (let degree = 1; degree <= 3; degree++) {
    const curved = solve(blocks, best.modes, degree);
    if (curved.stopped === "singular") break;
    if (best.cost - curved.cost > (8 + Math.log(blocks.used)) * variance(blocks, curved)) best = curved;
  }
  return best;
}

/** Energy of slope, bow and S (Legendre polynomials) in the residual over its variance. */
function slowRest(blocks: Blocks, solution: Solution): number {
  const residual = residualBuffer(blocks.count);
  residualBlocks(blocks, solution, residual);
  const n = blocks.count;
  let slope = 0;
  let bow = 0;
  let s = 0;
  for (let i = 0; i < n; i++) {
    const x = (2 * i + 1) / n - 1;
    const r = residual[i];
    slope += r * x;
    bow += r * (1.5 * x * x - 0.5);
    s += r * (2.5 * x * x - 1.5) * x;
  }
  return (3 * slope * slope + 5 * bow * bow + 7 * s * s) / n / Math.max(1e-300, variance(blocks, solution));
}

function inOrder(solution: Solution): Solution {
  const order = solution.modes
    .map((_, m) => m)
    .toSorted((a, b) => solution.modes[a].omega - solution.modes[b].omega);
  const linear = solution.linear.slice();
  order.forEach((m, at) => {
    linear[2 * at] = solution.linear[2 * m];
    linear[2 * at + 1] = solution.linear[2 * m + 1];
  });
  return { ...solution, modes: order.map((m) => solution.modes[m]), linear };
}

function describe(
  samples: Float64Array,
  from: number,
  to: number,
  step_s: number,
  blocks: Blocks,
  solution: Solution,
  options: FitOptions,
): RingFit | null {
  const modes = toModes(blocks, solution, step_s);
  const unit = unitCovariance(blocks, solution, modes, step_s);
  if (!unit || solution.stopped === "singular") return null;
  const residual = residualBuffer(blocks.count);
  residualBlocks(blocks, solution, residual);
  const noise =
    options.noise ?? differenceNoise(samples, from, to, options.lsb ?? null, options.unusable ?? none);
  const quantisation = (options.lsb ?? 0) ** 2 / 12 / blocks.decimation;
  const perBlock = Math.max(variance(blocks, solution), quantisation);
  const excess = options.like ? excessLike(options.like) : excessOf(residual, blocks, solution);
  const colours = excess.map((ratio) => Math.sqrt(ratio));
  const size = 4 * modes.length;
  const covariance = unit.map(
    (value, k) => value * perBlock * colours[Math.floor(k / size) >> 2] * colours[(k % size) >> 2],
  );
  const fit: RingFit = {
    from,
    to,
    step_s,
    modes,
    pickup: [],
    baseline: baselineOf(blocks, solution, to - from),
    covariance,
    residual: Math.sqrt(perBlock * blocks.decimation),
    noise,
    excess,
    decimation: blocks.decimation,
    iterations: solution.iterations,
    stopped: solution.stopped,
  };
  separatePickup(fit);
  // Errors alike within a block (quantisation, slow noise) are smaller per sample than white ones would be.
  if (blocks.decimation > 1 && fit.residual > 1.2 * noise)
    [fit.residual] = residualProfile(samples, fit, from, to, to - from, options.unusable ?? none).rms;
  return fit;
}

/** Of the other window's fit, in the order of frequency. */
const excessLike = (like: RingFit): number[] =>
  wavesOf(like)
    .map(({ frequency_Hz }, m) => ({ frequency_Hz, ratio: like.excess[m] ?? 1 }))
    .toSorted((a, b) => a.frequency_Hz - b.frequency_Hz)
    .map(({ ratio }) => ratio);

function excessOf(residual: Float64Array, blocks: Blocks, solution: Solution): number[] {
  const colour = colourOf(residual, blocks.count);
  return solution.modes.map(({ omega }) => excessAt(colour, omega));
}

/** From powers of the block number to powers of t/(window length); block b's centre is at (b + ½ − 1/(2D))·D. */
function baselineOf(blocks: Blocks, solution: Solution, length: number): number[] {
  const base = 2 * solution.modes.length;
  const centre = (1 - 1 / blocks.decimation) / 2;
  const perBlock = length / blocks.decimation;
  // i = x·perBlock − centre: expand by Horner in polynomials of x.
  let out = [0];
  for (let k = solution.degree; k >= 0; k--) {
    const next = Array.from({ length: out.length + 1 }, () => 0);
    out.forEach((value, j) => {
      next[j] -= value * centre;
      next[j + 1] += value * perBlock;
    });
    next[0] += solution.linear[base + k];
    out = next;
  }
  out.length = solution.degree + 1;
  out[0] += blocks.level;
  return out;
}
