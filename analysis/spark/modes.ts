/** Which modes the coil rings with: agreed on by the run's quiet pulses, else searched in the pulse itself. */
import { ringModes } from "./ring-modes.ts";
import { median } from "../numeric/median.ts";
import { fitRing } from "../ring/fit.ts";
import type { KnownMode } from "./ring-sums.ts";
import { traitsOf, type Traits } from "./traits.ts";
import type { SparkWindow } from "./window.ts";

/** Low modes of one coil with one capacitor agree at least this well. */
const SAME = 0.02;

/**
 * Mode sets the quiet pulses agree on, one for each coil-and-capacitor in the run. A second mode counts
 * when half of a set's pulses have one near the same frequency.
 */
export function agreedModes(quiet: KnownMode[][]): KnownMode[][] {
  const sorted = quiet
    .filter((modes) => modes.length > 0)
    .toSorted((p, q) => p[0].frequency_Hz - q[0].frequency_Hz);
  const sets: KnownMode[][][] = [];
  for (const modes of sorted) {
    const set = sets[sets.length - 1];
    if (set && modes[0].frequency_Hz < set[0][0].frequency_Hz * (1 + SAME)) set.push(modes);
    else sets.push([modes]);
  }
  // One stray pulse among many that agree is no coil of its own.
  const largest = Math.max(...sets.map((set) => set.length));
  const sound = sets.filter((set) => set.length * 4 > largest);
  return sound.map((set) => [typical(set.map(([low]) => low)), ...secondMode(set)]);
}

function secondMode(set: KnownMode[][]): KnownMode[] {
  const seconds = set.flatMap((modes) => modes.slice(1, 2));
  const centre = median(seconds.map((mode) => mode.frequency_Hz));
  const near = seconds.filter((mode) => Math.abs(mode.frequency_Hz / centre - 1) < 0.1);
  return near.length * 2 >= set.length && near.length > 0 ? [typical(near)] : [];
}

const typical = (modes: KnownMode[]): KnownMode => ({
  frequency_Hz: median(modes.map((mode) => mode.frequency_Hz)),
  decay_per_s: median(modes.map((mode) => mode.decay_per_s)),
});

/** The set under which this pulse's two-sided ring explains most. */
export function bestTraits(window: SparkWindow, sets: KnownMode[][], ceiling?: number): Traits {
  return sets
    .map((modes) => traitsOf(window, modes, ceiling))
    .reduce((best, other) => (explained(other) < explained(best) ? other : best));
}

/** Cost of the two-sided description in the noise the samples themselves show. */
const explained = ({ split }: Traits) => split.whole.cost - split.gain * split.variance;

/**
 * With no quiet pulse to go by: modes fitted to the beginning, the end and the middle of the pulse; one of
 * them lies outside the disturbance.
 */
export function ownModes(window: SparkWindow, fitted: KnownMode[]): KnownMode[][] {
  const { blocks, period, step_s } = window;
  const stretches = [
    [0, 3],
    [0, 6],
    [1, 5],
    [3, 12],
    [6, 20],
  ].map(([from, to]) => [Math.round(from * period), Math.min(blocks.count, Math.round(to * period))]);
  const sets = stretches.flatMap(([from, to]) => {
    if (to - from < 1.5 * period) return [];
    const fit = fitRing(blocks.values, from, to, step_s, { unusable: gaps(window), noise: window.noise });
    return fit && fit.modes.length > 0 ? [ringModes(fit.modes)] : [];
  });
  // A ring decays; what grows or dies within a third of a period is no mode of the coil.
  const sound = [...sets, fitted].map((modes) =>
    modes.filter(
      ({ frequency_Hz, decay_per_s }) =>
        decay_per_s > -0.02 * frequency_Hz &&
        decay_per_s < 6 * frequency_Hz &&
        frequency_Hz * period * step_s > 0.5,
    ),
  );
  return sound.filter((modes) => modes.length > 0);
}

function gaps({ blocks }: SparkWindow): number[] {
  const pairs: number[] = [];
  let from = 0;
  for (let s = 0; s < blocks.segments.length; s += 2) {
    if (blocks.segments[s] > from) pairs.push(from, blocks.segments[s]);
    from = blocks.segments[s + 1];
  }
  if (from < blocks.count) pairs.push(from, blocks.count);
  return pairs;
}
