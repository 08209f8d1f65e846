/** A ring set read end to end and held against its bound: shared by tests and the benchmark. */
import { readCapture } from "../../analysis/reading.ts";
import type { RingMode } from "../../analysis/reading-format.ts";
import { captureOf, channelOf } from "./captures.ts";
import { ringBound, type RingTrial } from "./ring-set.ts";

export interface Score {
  trials: number;
  /** Root mean square and mean of error over bound; shares of |error| ≤ 2u. */
  frequency: { rms: number; bias: number; within2u: number };
  decay: { rms: number; bias: number; within2u: number };
  q: { within2u: number };
  inductance: { within2u: number };
  missed: number;
  invented: number;
  /** Readings with more modes than the truth has. */
  inventedModes: number;
  worstInstant_periods: number;
}

const CAPACITOR_F = 1e-7;

export function scoreRings(trials: Iterable<RingTrial>): Score {
  const f: number[] = [];
  const a: number[] = [];
  const held = { f: 0, a: 0, q: 0, l: 0 };
  const score = { trials: 0, missed: 0, invented: 0, inventedModes: 0, worstInstant_periods: 0 };
  for (const trial of trials) {
    score.trials++;
    const capture = captureOf([channelOf("switch-node", "V", trial.samples, trial.lsb)], trial.step_s);
    const { reading } = readCapture(capture, { capacitor_F: CAPACITOR_F });
    const [pulse] = reading.pulses;
    score.invented += Math.max(0, reading.pulses.length - 1);
    if (!pulse?.ring || pulse.ring.modes.length === 0) {
      score.missed++;
      continue;
    }
    const [truth] = trial.modes;
    if (pulse.ring.modes.length > 1) score.inventedModes++;
    const mode = strongest(pulse.ring.modes);
    const bound = ringBound(trial);
    f.push((mode.frequency_Hz.value - truth.frequency_Hz) / bound.frequency_Hz[0]);
    a.push((mode.decay_per_s.value - truth.decay_per_s) / bound.decay_per_s[0]);
    const natural = Math.hypot(2 * Math.PI * truth.frequency_Hz, truth.decay_per_s);
    const within = (value: { value: number; u: number }, exact: number) =>
      Math.abs(value.value - exact) <= 2 * value.u;
    if (within(mode.frequency_Hz, truth.frequency_Hz)) held.f++;
    if (within(mode.decay_per_s, truth.decay_per_s)) held.a++;
    if (within(mode.q, natural / (2 * truth.decay_per_s))) held.q++;
    if (within(pulse.inductance_H!, 1 / (CAPACITOR_F * natural ** 2))) held.l++;
    const instant = (pulse.switchOffTime_s! / trial.step_s - trial.switchOff) / trial.perCycle;
    score.worstInstant_periods = Math.max(score.worstInstant_periods, Math.abs(instant));
  }
  const rms = (z: number[]) => Math.sqrt(z.reduce((sum, x) => sum + x * x, 0) / z.length);
  const mean = (z: number[]) => z.reduce((sum, x) => sum + x, 0) / z.length;
  return {
    ...score,
    frequency: { rms: rms(f), bias: mean(f), within2u: held.f / f.length },
    decay: { rms: rms(a), bias: mean(a), within2u: held.a / a.length },
    q: { within2u: held.q / f.length },
    inductance: { within2u: held.l / f.length },
  };
}

export const amplitudeOf = (mode: RingMode): number => (mode.amplitude_V ?? mode.amplitude)!.value;

const strongest = (modes: RingMode[]) => modes.reduce((a, b) => (amplitudeOf(b) > amplitudeOf(a) ? b : a));

export function* series<T>(count: number, first: number, make: (seed: number) => T): Generator<T> {
  for (let k = 0; k < count; k++) yield make(first + k);
}
