/** When the spark struck and when it went out: where the trace leaves the expected one, and joins its own ring again. */
import type { Expectations, Expected } from "./expected.ts";
import type { Traits } from "./traits.ts";
import type { SparkWindow } from "./window.ts";

export interface SparkTimes {
  /** On the file's time axis. */
  onset_s: number | null;
  onsetUncertainty_s: number | null;
  extinction_s: number | null;
  /** Block of the onset, for the places of other evidence. */
  block: number | null;
  /** Known to a fraction of a block, by how the trace parts from the expected one. */
  sharp: boolean;
}

/** Departures this many σ large are no noise, three in a row. */
const CLEAR = 5;

export function timesOf(
  window: SparkWindow,
  traits: Traits,
  { course, rise, peers }: Expectations,
): SparkTimes {
  const parted =
    leaves(window, traits, course) ??
    (rise && departure(window, traits, rise)) ??
    lastParting(window, traits, peers);
  const onset = parted?.at ?? kink(window, traits);
  const file_s = (block: number) => window.zero_s + window.first_s + block * window.step_s;
  const out = traits.ringAfter ? rejoining(window, traits, onset ?? traits.a) : null;
  return {
    onset_s: onset === null ? null : file_s(onset),
    onsetUncertainty_s: onset === null ? null : window.step_s * (parted?.u ?? 1),
    extinction_s: out === null ? null : file_s(out),
    block: onset,
    sharp: parted !== null,
  };
}

/** A slow leak lets what follows it pass for a ring of its own: an expectation that speaks from earlier on wins. */
function leaves(window: SparkWindow, traits: Traits, course: Expected[]): Parting | null {
  const found = course.flatMap((expected) => departure(window, traits, expected) ?? []);
  if (found.length === 0) return null;
  const earliest = Math.min(...found.map(({ at }) => at));
  return found.find(({ at }) => at - earliest < 0.1 * window.period) ?? null;
}

/**
 * Parting from another pulse tells that one of the two has struck; from the one that held out longest, that this one
 * has. Null without any.
 */
function lastParting(window: SparkWindow, traits: Traits, peers: Expected[]): Parting | null {
  const partings = peers.flatMap((peer) => departure(window, traits, peer) ?? []);
  if (partings.length === 0) return null;
  return partings.reduce((a, b) => (b.at > a.at ? b : a));
}

/** In blocks. */
interface Parting {
  at: number;
  u: number;
}

/** First block from which the trace stays away from the expected one, carried back to where it parted. */
function departure(
  window: SparkWindow,
  traits: Traits,
  { values, from, slack, spread, to }: Expected,
): Parting | null {
  const y = window.blocks.values;
  const sigma = Math.sqrt(traits.split.variance);
  // A block off the screen tells nothing: it agrees with whatever is expected.
  const seen = measuredBlocks(window.blocks);
  const off = (i: number) => (seen[i] ? y[i] - values[i] : 0);
  const doubt = (i: number) =>
    slack * (Math.abs(values[i]) + 10 * Math.abs(values[i + 1] - values[i])) + 3 * (spread?.[i] ?? 0);
  const beyond = (i: number) => Math.abs(off(i)) > CLEAR * sigma + doubt(i);
  const last = Math.min(window.blocks.count - 3, to - 2, traits.b + Math.round(window.period));
  for (let i = slack > 0 ? from + 3 : from; i < last; i++) {
    if (!beyond(i) || !beyond(i + 1) || !beyond(i + 2)) continue;
    const earliest = Math.max(from, i - Math.round(0.5 * window.period));
    return partedAt(off, (k) => Math.hypot(sigma, doubt(k) / 2), earliest, i);
  }
  return null;
}

/**
 * With nothing to compare with: an arc turns the first rise back by its leakage inductance, far more sharply
 * than the ring itself bends. The first such bend before the ring after;
 * with none, where the ring before ends.
 */
function kink(window: SparkWindow, traits: Traits): number | null {
  const y = window.blocks.values;
  const sigma = Math.sqrt(traits.split.variance);
  const last = Math.min(Math.max(traits.b, 4), window.blocks.count - 3);
  // The ring before, short as it was, holds up to `a`.
  const seen = measuredBlocks(window.blocks);
  const first = Math.max(2, Math.round(traits.a - window.period / 8));
  let sharpest = 0;
  for (let i = first; i < last; i++)
    if (seen[i - 2] && seen[i] && seen[i + 2]) sharpest = Math.max(sharpest, -curve(y, i));
  const limit = Math.max(0.35 * sharpest, CLEAR * 2.5 * sigma);
  for (let i = first; i < last; i++)
    if (seen[i - 2] && seen[i] && seen[i + 2] && -curve(y, i) > limit) return i - 1;
  return traits.a > 0 ? traits.a : null;
}

/** Second difference over two blocks to each side. */
const curve = (y: Float64Array, i: number) => y[i - 2] - 2 * y[i] + y[i + 2];

/**
 * An arc makes the trace part from the expected one like (t − t0)², for its current's slope has jumped; a glow,
 * which only begins to leak, like (t − t0)³. t0 by least squares over both, from `from` to just after the
 * first clear block.
 */
function partedAt(
  off: (i: number) => number,
  doubt: (i: number) => number,
  from: number,
  first: number,
): Parting {
  let [best, least] = [first, Number.POSITIVE_INFINITY];
  const costs: [t0: number, cost: number][] = [];
  const weights = Float64Array.from({ length: first + 2 - from }, (_, k) => 1 / doubt(from + k) ** 2);
  const offs = weights.map((_, k) => off(from + k));
  const rest = offs.reduce((sum, value, k) => sum + weights[k] * value * value, 0);
  for (const power of [2, 3])
    for (let t0 = from; t0 <= first; t0 += 0.125) {
      let cross = 0;
      let square = 0;
      for (let i = Math.max(from, Math.ceil(t0)); i <= first + 1; i++) {
        const t = i - t0;
        const grown = power === 2 ? t * t : t * t * t;
        cross += weights[i - from] * offs[i - from] * grown;
        square += weights[i - from] * grown * grown;
      }
      const cost = rest - (cross * cross) / square + (power === 3 ? GLOW_PROOF : 0);
      costs.push([t0, cost]);
      if (cost < least) [best, least] = [t0, cost];
    }
  // One σ: where χ² has grown by one; what the grid and the power law are good for at least.
  const within = costs.flatMap(([t0, cost]) => (cost < least + 1 ? [Math.abs(t0 - best)] : []));
  return { at: best, u: Math.max(LEAST_DOUBT, ...within) };
}

const LEAST_DOUBT = 0.2;

/** So much better must the slow parting explain the trace (χ²): arcs are the usual case. */
const GLOW_PROOF = 9;

/** Going back from the ring after: the last block that does not lie on it. */
function rejoining(window: SparkWindow, traits: Traits, onset: number): number | null {
  const { coefficients } = traits.split.after;
  const y = window.blocks.values;
  const limit = CLEAR * Math.sqrt(traits.split.variance);
  const away = (i: number) => Math.abs(y[i] - traits.sums.value(coefficients, i));
  const start = Math.min(window.blocks.count - 1, traits.b + Math.round(window.period / 2));
  for (let i = start; i > onset; i--) if (away(i) > limit && away(i - 1) > limit) return i + 1;
  return null;
}

function measuredBlocks({ count, segments }: SparkWindow["blocks"]): Uint8Array {
  const seen = new Uint8Array(count);
  for (let s = 0; s < segments.length; s += 2) seen.fill(1, segments[s], segments[s + 1]);
  return seen;
}
