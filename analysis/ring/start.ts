/**
 * Start values that land in the right valley: the strongest line of the spectrum over the whole window
 * and over its beginnings (a strongly damped ring lives in a beginning only), then the best of a few
 * decays by the full least-squares criterion.
 */
import { powerOfTwo, powerSpectrum } from "../numeric/fft.ts";
import { makeBlocks, type Blocks } from "./blocks.ts";
import type { Mode } from "./gram.ts";
import { costAt } from "./solve.ts";

/** A line found: angular frequency per value and the length of beginning in which it stood out. */
export interface Line {
  omega: number;
  length: number;
  /** Energy a steady wave of that frequency explains over that length. */
  energy: number;
}

const spectrum = new Float64Array(2 ** 17);

/**
 * Strongest lines of values[0 … count), at most `most`, strongest first. Lines of fewer than
 * `leastCycles` cycles in their length are left to the baseline.
 */
export function strongestLines(values: Float64Array, count: number, most: number, leastCycles = 0.8): Line[] {
  const found: Line[] = [];
  for (let length = count; length >= 12; length = length >> 2) {
    const n = powerOfTwo(length < 512 ? 2 * length : length);
    powerSpectrum(values, length, n, spectrum);
    const lowest = Math.max(1, Math.ceil((leastCycles * n) / length));
    peaks(spectrum, lowest, n / 2 - 1, most, (bin, power) => {
      found.push({ omega: (2 * Math.PI * bin) / n, length, energy: (2 * power) / length });
    });
  }
  found.sort((a, b) => b.energy - a.energy);
  return distinct(found).slice(0, most);
}

/** Local maxima of p between two bins, the `most` largest, with the bin interpolated. */
function peaks(
  p: Float64Array,
  low: number,
  high: number,
  most: number,
  take: (bin: number, power: number) => void,
): void {
  const best: number[] = [];
  for (let k = low; k <= high; k++) {
    if (!(p[k] >= p[k - 1] || k === low) || !(p[k] > p[k + 1])) continue;
    let at = best.length;
    while (at > 0 && p[best[at - 1]] < p[k]) at--;
    if (at >= most) continue;
    best.splice(at, 0, k);
    if (best.length > most) best.pop();
  }
  for (const k of best) {
    const a = Math.sqrt(p[k - 1]);
    const b = Math.sqrt(p[k]);
    const c = Math.sqrt(p[k + 1]);
    const curve = a - 2 * b + c;
    const shift = curve < 0 ? Math.max(-0.5, Math.min(0.5, (a - c) / (2 * curve))) : 0;
    take(k + shift, p[k]);
  }
}

function distinct(lines: Line[]): Line[] {
  const kept: Line[] = [];
  for (const line of lines) {
    const near = (other: Line) =>
      Math.abs(other.omega - line.omega) < (2 * Math.PI * 0.7) / Math.max(other.length, line.length);
    if (!kept.some(near)) kept.push(line);
  }
  return kept;
}

/** Decays to try for a line, per value: from steady over its length to gone within a quarter of it. */
const decaysOf = ({ length }: Line) => [0.3 / length, 2 / length, 8 / length];

export interface Start {
  modes: Mode[];
  cost: number;
}

/** The best of the lines, each with the best of a few decays, beside the modes already known. */
export function bestStart(blocks: Blocks, known: Mode[], lines: Line[], degree: number): Start | null {
  let best: Start | null = null;
  for (const line of lines)
    for (const decay of decaysOf(line)) {
      const modes = [...known, { omega: line.omega, decay }];
      const cost = costAt(blocks, modes, degree);
      if (cost < (best?.cost ?? Infinity)) best = { modes, cost };
    }
  return best;
}

/** The blocks averaged once more, so that `omega` keeps about `perCycle` values a cycle. */
export function coarser(blocks: Blocks, omega: number, perCycle: number): { blocks: Blocks; by: number } {
  const by = Math.max(1, Math.floor((2 * Math.PI) / omega / perCycle));
  if (by === 1) return { blocks, by };
  return { blocks: makeBlocks(blocks.values, 0, blocks.count, gaps(blocks), by), by };
}

function gaps({ segments, count }: Blocks): number[] {
  const out: number[] = [];
  let at = 0;
  for (let s = 0; s < segments.length; s += 2) {
    if (segments[s] > at) out.push(at, segments[s]);
    at = segments[s + 1];
  }
  if (count > at) out.push(at, count);
  return out;
}

export const scaled = (modes: Mode[], by: number): Mode[] =>
  modes.map(({ omega, decay }) => ({ omega: omega * by, decay: decay * by }));
