/** What one pulse shows against "a free ring of these modes from switch-off on". */
import { LOW, RingSums, type KnownMode } from "./ring-sums.ts";
import { bestSplit, sizeAt, type Split } from "./split.ts";
import type { SparkWindow } from "./window.ts";

export interface Traits {
  sums: RingSums;
  split: Split;
  modes: KnownMode[];
  ceiling: number;
  /** √ of what one ring leaves over, in σ: the strength a disturbance has in this record. */
  misfit: number;
  /** Block where the ring before ends, and where the ring after begins. */
  a: number;
  b: number;
  /** A ring was seen before the disturbance for long enough to be known. */
  ringBefore: boolean;
  /** A ring was seen after it. */
  ringAfter: boolean;
  /** At the disturbance the ring before had already sunk into the noise: too little for a spark. */
  spent: boolean;
  /** Share of its amplitude that a quiet ring still has at the disturbance, over the noise of a block. */
  kept: number;
  /** The free ring after begins later than half a period. */
  late: boolean;
  /** Phase of the low mode from switch-off to where the ring after begins, in radians. */
  passed: number;
  /** One free ring explains the whole pulse to the noise. */
  oneRing: boolean;
  /** The disturbance begins in the last stretch of the window. */
  tail: boolean;
  /** Low mode of the ring after (cosine, sine), carried back to switch-off; null without a ring after. */
  rest: [cosine: number, sine: number] | null;
  /** The same of a ring before that lasted for long enough: what a spark late in the pulse leaves of a quiet one. */
  restBefore: [cosine: number, sine: number] | null;
  /** Low mode of the ring before at the disturbance, and of the ring after: how far apart, over the former. */
  jump: number | null;
  /** Largest excursion in the first period and its block. */
  kick: number;
  kickBlock: number;
  /** Blocks of the first period are missing: the kick may be larger than it looks. */
  clipped: boolean;
  startsInRing: boolean;
  /** Share of the amplitude that is missing after the disturbance, by the pulse's own evidence; null: unknown. */
  loss: number | null;
}

/** Strength below which a disturbance is noise: √χ² of a few hundred blocks strays by about 7. */
export const NOISE = 12;
/** Amplitude in σ of a block below which a ring has sunk into the noise. */
export const SPENT = 4;
/** Shorter stretches say nothing certain of a ring, in periods; and of its whole course. */
const LEAST_RING = 0.7;
const LONG_RING = 1.5;

/** Traits of a window held from the last time the run was judged: growing by a pulse hardly moves its modes. */
const held = new WeakMap<SparkWindow, Traits[]>();

const agrees = (a: number, b: number, within: number) => Math.abs(a - b) <= within * Math.abs(b);

const sameModes = (a: KnownMode[], b: KnownMode[]) =>
  a.length === b.length &&
  a.every(
    (mode, m) =>
      agrees(mode.frequency_Hz, b[m].frequency_Hz, 2e-4) && agrees(mode.decay_per_s, b[m].decay_per_s, 0.01),
  );

/** `ceiling`: variance a block at most has where the ring is free, as the run's quiet pulses show it. */
export function traitsOf(window: SparkWindow, modes: KnownMode[], ceiling = 16 * window.noise ** 2): Traits {
  const earlier = held.get(window) ?? [];
  const same = earlier.find(
    (traits) => sameModes(traits.modes, modes) && agrees(traits.ceiling, ceiling, 0.1),
  );
  if (same) return same.modes === modes ? same : { ...same, modes };
  const traits = { ...freshTraits(window, modes, ceiling), ceiling };
  held.set(window, [...earlier.slice(-MOST_HELD + 1), traits]);
  return traits;
}

const MOST_HELD = 4;

function freshTraits(window: SparkWindow, modes: KnownMode[], ceiling: number): Omit<Traits, "ceiling"> {
  const { blocks, period } = window;
  const amplitude = largest(window, 0, blocks.count).size;
  const stride = Math.max(1, Math.round(period / 8));
  const sums = new RingSums(blocks, modes, window, stride, amplitude, window.noise);
  const split = bestSplit(sums, window.noise, ceiling);
  const a = sums.boundaries[split.a];
  const b = sums.boundaries[split.b];
  const first = largest(window, 0, Math.min(blocks.count, Math.ceil(period)));
  const ringBefore = a >= LEAST_RING * period && fits(split, "before", sums.columns);
  const ringAfter = blocks.count - b >= LEAST_RING * period && split.after.blocks > 2 * sums.columns;
  const tail = ringBefore && blocks.count - a < LEAST_RING * period;
  const clipped = !measured(window, 0, Math.ceil(period));
  const oneRing = split.misfit < NOISE * NOISE && split.gain < NOISE * NOISE;
  const rest = oneRing
    ? carriedBack(sums, split.whole.coefficients, 0, window, modes[0])
    : ringAfter
      ? carriedBack(sums, split.after.coefficients, b, window, modes[0])
      : null;
  const trusted = (carried: [number, number] | null, from: number) =>
    carried && isKnown(carried, first.size * (clipped ? 2 : 1), from, split, window, modes[0])
      ? carried
      : null;
  const kick = { kick: first.size, kickBlock: first.block, clipped, startsInRing: window.startsInRing };
  const early = ringBefore && a >= LONG_RING * period && !oneRing && !window.startsInRing;
  const start = a - Math.round(period);
  const restBefore = early ? carriedBack(sums, split.before.coefficients, start, window, modes[0]) : null;
  const jump = ringBefore && ringAfter ? jumpOf(sums, split, a, b, modes[0], window) : null;
  const traits = {
    sums,
    split,
    modes,
    a,
    b,
    ringBefore,
    ringAfter,
    tail,
    spent: ringBefore && leftAt(sums, split, a, window, modes[0]) < SPENT * Math.sqrt(split.variance),
    kept: Math.exp(-modes[0].decay_per_s * (window.first_s + a * window.step_s)) / Math.sqrt(split.variance),
    late: b > 0.5 * period,
    passed: 2 * Math.PI * modes[0].frequency_Hz * (window.first_s + b * window.step_s),
    oneRing,
    rest: trusted(rest, oneRing ? 0 : b),
    restBefore: trusted(restBefore, start),
    jump,
    ...kick,
  };
  return { ...traits, misfit: Math.sqrt(Math.max(0, split.misfit)), loss: lossOf(traits, window) };
}

function fits(split: Split, side: "before" | "after", columns: number): boolean {
  const { cost, blocks } = split[side];
  return cost / split.variance < 2 * Math.max(1, blocks - columns) + 12 * Math.sqrt(blocks);
}

/** Where in a stretch of ring its own lean is best known: half a period inside. */
const inside = (window: SparkWindow, block: number, direction: 1 | -1) =>
  Math.min(window.blocks.count - 1, Math.max(0, block + Math.round((direction * window.period) / 2)));

function carriedBack(
  sums: RingSums,
  coefficients: Float64Array,
  b: number,
  window: SparkWindow,
  mode: KnownMode,
): [number, number] {
  const block = inside(window, b, 1);
  const [c, s] = sums.amplitudeAt(coefficients, LOW, block);
  const grown = Math.exp(mode.decay_per_s * (window.first_s + block * window.step_s));
  return [c * grown, s * grown];
}

/** Carried back from far, noise grows with it; and no mode is larger than about the kick. */
function isKnown(
  rest: [number, number],
  kick: number,
  b: number,
  split: Split,
  window: SparkWindow,
  mode: KnownMode,
): boolean {
  const grown = Math.exp(mode.decay_per_s * (window.first_s + inside(window, b, 1) * window.step_s));
  const u = Math.sqrt((2 * split.variance) / window.period) * grown;
  return u < 0.03 * kick && Math.hypot(...rest) < 1.7 * kick;
}

function jumpOf(
  sums: RingSums,
  split: Split,
  a: number,
  b: number,
  mode: KnownMode,
  window: SparkWindow,
): number {
  const [from, to] = [inside(window, a, -1), inside(window, b, 1)];
  const [c1, s1] = sums.amplitudeAt(split.before.coefficients, LOW, from);
  const [c2, s2] = sums.amplitudeAt(split.after.coefficients, LOW, to);
  const decayed = Math.exp(-mode.decay_per_s * (to - from) * window.step_s);
  return Math.hypot(c2 / decayed - c1, s2 / decayed - s1) / Math.hypot(c1, s1);
}

/** Amplitude of the ring before, a period earlier, decayed to the disturbance: its end alone is poorly known. */
function leftAt(sums: RingSums, split: Split, a: number, window: SparkWindow, mode: KnownMode): number {
  const earlier = Math.max(0, a - Math.round(window.period));
  const decayed = Math.exp(-mode.decay_per_s * (a - earlier) * window.step_s);
  return sizeAt(sums, split.before, earlier) * decayed;
}

function lossOf(traits: Omit<Traits, "misfit" | "loss" | "ceiling">, window: SparkWindow): number | null {
  const { sums, split, a, b, modes } = traits;
  const decay = modes[0].decay_per_s * window.step_s;
  const after = traits.ringAfter ? sizeAt(sums, split.after, b) : 0;
  if (traits.ringBefore) return 1 - after / (sizeAt(sums, split.before, a) * Math.exp(-decay * (b - a)));
  if (b <= traits.kickBlock) return 0;
  return 1 - after / (traits.kick * Math.exp(-decay * (b - traits.kickBlock)));
}

/** Largest distance from the window's settled level among the measured blocks. */
export function largest(window: SparkWindow, from: number, to: number): { size: number; block: number } {
  const { values, segments } = window.blocks;
  let [size, block] = [0, from];
  for (let s = 0; s < segments.length; s += 2)
    for (let i = Math.max(from, segments[s]); i < Math.min(to, segments[s + 1]); i++)
      if (Math.abs(values[i]) > size) [size, block] = [Math.abs(values[i]), i];
  return { size, block };
}

/** Whether every block of [from, to) holds a measurement. */
function measured({ blocks }: SparkWindow, from: number, to: number): boolean {
  const { segments } = blocks;
  for (let s = 0; s < segments.length; s += 2)
    if (segments[s] <= from && segments[s + 1] >= Math.min(to, blocks.count)) return true;
  return false;
}
