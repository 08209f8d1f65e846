/** Value sets read end to end: relative errors and how many of them lie within two standard uncertainties. */
import { readCapture } from "../../analysis/reading.ts";
import type { Figure } from "../../analysis/reading-format.ts";
import { rampBound } from "./ramp-bound.ts";
import { rampTrial, troubledRing } from "./value-set.ts";

export interface Errors {
  /** |error|/truth, sorted; a missing figure counts as a whole. */
  relative: number[];
  within2u: number;
  missing: number;
}

const collect = () => {
  const relative: number[] = [];
  let held = 0;
  let missing = 0;
  return {
    add(figure: Figure | undefined, truth: number) {
      if (!figure) {
        missing++;
        relative.push(1);
        return;
      }
      relative.push(Math.abs(figure.value / truth - 1));
      if (Math.abs(figure.value - truth) <= 2 * figure.u) held++;
    },
    score: (): Errors => ({
      relative: relative.toSorted((a, b) => a - b),
      within2u: held / Math.max(1, relative.length - missing),
      missing,
    }),
  };
};

export function scoreTroubledRings(count: number, first: number) {
  const inductance = collect();
  let missed = 0;
  let invented = 0;
  for (let seed = first; seed < first + count; seed++) {
    const { capture, setup, inductance_H } = troubledRing(seed);
    const { pulses } = readCapture(capture, setup).reading;
    if (pulses.length === 0) missed++;
    invented += Math.max(0, pulses.length - 1);
    inductance.add(pulses[0]?.inductance_H, inductance_H);
  }
  return { ...inductance.score(), missed, invented };
}

const rootMeanSquare = (values: number[]) =>
  Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length);

export function scoreRamps(count: number, first: number) {
  const [inductance, resistance, saturation] = [collect(), collect(), collect()];
  const overBound: number[] = [];
  let largestBound = 0;
  for (let seed = first; seed < first + count; seed++) {
    const trial = rampTrial(seed);
    const ramp = readCapture(trial.capture, trial.setup).reading.pulses[0]?.ramp;
    inductance.add(ramp?.inductance_H, trial.inductance_H);
    const bound = rampBound(trial.ramp).inductance;
    largestBound = Math.max(largestBound, bound);
    overBound.push(((ramp?.inductance_H?.value ?? 0) / trial.inductance_H - 1) / bound);
    resistance.add(ramp?.resistance_ohm, trial.resistance_ohm);
    if (trial.saturation_A !== null) saturation.add(ramp?.saturationCurrent_A, trial.saturation_A);
  }
  return {
    inductance: inductance.score(),
    resistance: resistance.score(),
    saturation: saturation.score(),
    /** Errors of L over each ramp's own Cramér–Rao bound, and the largest bound as a share of L. */
    bound: {
      rms: rootMeanSquare(overBound),
      worst: Math.max(...overBound.map(Math.abs)),
      largest: largestBound,
    },
  };
}
