/**
 * How many modes the data hold and where they are. A further mode must earn its place: the fall of
 * the residual sum of squares, in units of the noise around its frequency, against what the best of
 * all noise peaks would reach (an information criterion with the search paid for).
 */
import type { Blocks } from "./blocks.ts";
import { residualBlocks } from "./evaluate.ts";
import type { Mode } from "./gram.ts";
import { colourOf, excessAt } from "./noise.ts";
import { pickupAmong } from "./pickup.ts";
import { solve, type Solution } from "./solve.ts";
import { bestStart, coarser, scaled, strongestLines } from "./start.ts";

/** Values a cycle in the coarse passes; the last pass keeps more. */
const COARSE_PER_CYCLE = 12;
const LINES_TRIED = 3;
const FULL = 0.85;
/** Fall over the window, in e-foldings, below which a wave may be steady. */
const STEADY = 0.7;

const buffer = { residual: new Float64Array(0) };

export function residualBuffer(count: number): Float64Array {
  if (buffer.residual.length < count) buffer.residual = new Float64Array(count);
  return buffer.residual;
}

/** What a wave explains before it counts as one: about 1 in 1000 records of noise reach it. */
const priceOfMode = (used: number) => 18 + 2 * Math.log(used);

/**
 * Modes and baseline degree for these blocks; null when there is no oscillation at all. `pinned`: the
 * same values with the overrange ones kept (see pinnedValues).
 */
export function searchModes(blocks: Blocks, pinned: Float64Array, most: number): Solution | null {
  let best = fitNext(blocks, [], pinned, 0);
  if (!best || blocks.power - best.cost < priceOfMode(blocks.used) * variance(blocks, best)) return null;
  while (best.modes.length < most + Math.min(1, pickups(blocks, best))) {
    const residual = residualBuffer(blocks.count);
    residualBlocks(blocks, best, residual);
    const next: Solution | null = fitNext(blocks, best.modes, residual, variance(blocks, best));
    if (!next || !earned(blocks, best, next)) break;
    best = next;
  }
  return best;
}

/** Slow steady waves under the ring: the first leaves the place of a mode free. */
function pickups({ count }: Blocks, { modes, linear }: Solution): number {
  const waves = modes.map(({ omega, decay }, m) => ({
    frequency: omega / (2 * Math.PI),
    decay,
    amplitude: Math.hypot(linear[2 * m], linear[2 * m + 1]),
  }));
  const steady = modes.map(() => STEADY / count);
  return pickupAmong(waves, count, steady).length;
}

/** Residual variance of a block, degrees of freedom counted. */
export function variance(blocks: Blocks, solution: Solution): number {
  const parameters = 4 * solution.modes.length + solution.degree + 1;
  return solution.cost / Math.max(1, blocks.used - parameters);
}

function fitNext(blocks: Blocks, known: Mode[], values: Float64Array, noise: number): Solution | null {
  if (blocks.used < 4 * known.length + 8) return null;
  // Where much is off screen the harmonics fit the rest as well: only the spectrum of it all tells.
  const tried = known.length === 0 && blocks.used < FULL * blocks.count ? 1 : LINES_TRIED;
  const lines = strongestLines(values, blocks.count, tried).filter((line) => line.energy > 8 * noise);
  if (lines.length === 0) return null;
  const fastest = Math.max(...lines.map((line) => line.omega), ...known.map((mode) => mode.omega));
  const coarse = coarser(blocks, fastest, COARSE_PER_CYCLE);
  const start = bestStart(
    coarse.blocks,
    scaled(known, coarse.by),
    lines.map((line) => ({ ...line, omega: line.omega * coarse.by, length: line.length / coarse.by })),
    0,
  );
  if (!start) return null;
  const rough = solve(coarse.blocks, start.modes, 0);
  // One step at the full rate: the last pass of the fit goes on from there.
  return coarse.by === 1 ? rough : solve(blocks, scaled(rough.modes, 1 / coarse.by), 0, 1);
}

function earned(blocks: Blocks, before: Solution, after: Solution): boolean {
  const added = after.modes.at(-1)!;
  const plausible =
    after.modes.every((mode) => mode.decay > -0.5 / blocks.count) &&
    added.omega > 2 * Math.PI * 0.6 * Math.max(added.decay / 4, 1 / blocks.count);
  const price = priceOfMode(blocks.used) * variance(blocks, after);
  const gain = before.cost - after.cost;
  if (!plausible || gain < price) return false;
  const residual = residualBuffer(blocks.count);
  residualBlocks(blocks, after, residual);
  return gain > price * excessAt(colourOf(residual, blocks.count), added.omega);
}
