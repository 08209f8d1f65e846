/**
 * Rings by formula with their Cramér–Rao bound: a seeded set that spans what the fit must stand. The
 * bound is the inverse of the Fisher matrix J'J/σ² (Kay, Fundamentals of Statistical Signal Processing:
 * Estimation Theory, 1993, ch. 3), J by finite formula over the very samples, inverted by ml-matrix.
 */
import { inverse, Matrix } from "ml-matrix";
import { seeded, type Random } from "./random.ts";

export interface TrueMode {
  frequency_Hz: number;
  decay_per_s: number;
  amplitude: number;
  phase_rad: number;
}

export interface RingTrial {
  seed: number;
  samples: Float64Array;
  step_s: number;
  /** First sample of the free ring; its t is `lag_s` after the switch-off. */
  first: number;
  modes: TrueMode[];
  offset: number;
  sigma: number;
  lsb: number;
  perCycle: number;
  cycles: number;
  snr_dB: number;
  bits: number;
  /** Fractional sample of the switch-off. */
  switchOff: number;
}

export interface RingBound {
  /** Per mode: standard deviations of frequency and decay at the bound. */
  frequency_Hz: number[];
  decay_per_s: number[];
}

export const logBetween = (random: Random, low: number, high: number): number =>
  Math.exp(random.between(Math.log(low), Math.log(high)));

export interface TrialRange {
  snr_dB: [number, number];
  q: [number, number];
  perCycle: [number, number];
  mostSamples: number;
  /** Least noise in LSB. */
  leastNoise_lsb: number;
}

export const wholeRange: TrialRange = {
  snr_dB: [20, 60],
  q: [5, 100],
  perCycle: [12, 2000],
  mostSamples: 12_000,
  leastNoise_lsb: 0.5,
};

/** One single-mode trial: conduction, switch-off at a fraction of a sample, ring to the record's end. */
export function ringTrial(seed: number, range: TrialRange = wholeRange): RingTrial {
  const random = seeded(seed);
  const q = logBetween(random, ...range.q);
  const cycles = logBetween(random, 3, Math.min(100, 2 * q));
  const perCycle = logBetween(
    random,
    range.perCycle[0],
    Math.min(range.perCycle[1], range.mostSamples / cycles),
  );
  const snr_dB = random.between(...range.snr_dB);
  const frequency_Hz = logBetween(random, 500, 200_000);
  const omega = 2 * Math.PI * frequency_Hz;
  // Q = ω0/(2α) with ω0² = ω² + α².
  const decay_per_s = omega / Math.sqrt(4 * q * q - 1);
  const amplitude = logBetween(random, 30, 600);
  const supply = amplitude * random.between(0.02, 0.1);
  const sigma = amplitude / Math.sqrt(2 * 10 ** (snr_dB / 10));
  const screen = 2.4 * (amplitude + supply);
  const bits = [8, 12].find((b) => sigma >= (range.leastNoise_lsb * screen) / 2 ** b) ?? 16;
  const phase_rad = -Math.acos(-supply / amplitude);
  const mode: TrueMode = { frequency_Hz, decay_per_s, amplitude, phase_rad };
  const step_s = 1 / (frequency_Hz * perCycle);
  return digitised(seed, random, [mode], supply, step_s, { cycles, perCycle, snr_dB, sigma, bits, screen });
}

interface Scope {
  cycles: number;
  perCycle: number;
  snr_dB: number;
  sigma: number;
  bits: number;
  screen: number;
}

export function digitised(
  seed: number,
  random: Random,
  modes: TrueMode[],
  offset: number,
  step_s: number,
  scope: Scope,
): RingTrial {
  const { cycles, perCycle, sigma, bits, screen } = scope;
  const before = Math.round(Math.max(2 * perCycle, 40));
  const switchOff = before + random.uniform();
  const count = Math.floor(switchOff + cycles * perCycle);
  const lsb = screen / 2 ** bits;
  const samples = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const t = (i - switchOff) * step_s;
    const clean = t < 0 ? 0 : offset + ringAt(modes, t);
    samples[i] = Math.round((clean + sigma * random.normal()) / lsb) * lsb;
  }
  return { seed, samples, step_s, first: Math.ceil(switchOff), modes, offset, lsb, switchOff, ...scope };
}

export const ringAt = (modes: TrueMode[], t: number): number =>
  modes.reduce(
    (sum, { amplitude, decay_per_s, frequency_Hz, phase_rad }) =>
      sum + amplitude * Math.exp(-decay_per_s * t) * Math.cos(2 * Math.PI * frequency_Hz * t + phase_rad),
    0,
  );

/** Bound with noise σ² + LSB²/12 (Widrow & Kollár), over the samples from the switch-off on. */
export function ringBound(trial: RingTrial): RingBound {
  const { modes, step_s, samples, switchOff, first } = trial;
  const width = 4 * modes.length + 1;
  const information = Matrix.zeros(width, width);
  const row = new Float64Array(width);
  // Frequencies and decays in units of the first mode's, so that the matrix is well scaled.
  const unit = modes[0].decay_per_s;
  for (let i = first; i < samples.length; i++) {
    const t = (i - switchOff) * step_s;
    row[0] = 1;
    modes.forEach(({ amplitude, decay_per_s, frequency_Hz, phase_rad }, m) => {
      const e = Math.exp(-decay_per_s * t);
      const angle = 2 * Math.PI * frequency_Hz * t + phase_rad;
      row[4 * m + 1] = -amplitude * e * Math.sin(angle) * 2 * Math.PI * t * unit;
      row[4 * m + 2] = -amplitude * e * Math.cos(angle) * t * unit;
      row[4 * m + 3] = amplitude * e * Math.cos(angle);
      row[4 * m + 4] = -amplitude * e * Math.sin(angle);
    });
    for (let r = 0; r < width; r++)
      for (let c = 0; c <= r; c++) information.set(r, c, information.get(r, c) + row[r] * row[c]);
  }
  for (let r = 0; r < width; r++)
    for (let c = r + 1; c < width; c++) information.set(r, c, information.get(c, r));
  const variance = trial.sigma ** 2 + trial.lsb ** 2 / 12;
  const covariance = inverse(information);
  const deviation = (at: number) => unit * Math.sqrt(variance * covariance.get(at, at));
  return {
    frequency_Hz: modes.map((_, m) => deviation(4 * m + 1)),
    decay_per_s: modes.map((_, m) => deviation(4 * m + 2)),
  };
}

/**
 * A ring with a weaker second mode at least 1.5/window away. `strength`: the second mode's matched-filter
 * amplitude √(Σ s²)/σ over the window.
 */
export function twoModeTrial(
  seed: number,
  strength: [number, number] = [8, 200],
): RingTrial & { strength: number } {
  const random = seeded(seed);
  const q = logBetween(random, 8, 60);
  const cycles = logBetween(random, 5, Math.min(60, 2 * q));
  const perCycle = logBetween(random, 24, Math.min(400, 8000 / cycles));
  const snr_dB = random.between(30, 60);
  const frequency_Hz = logBetween(random, 1000, 50_000);
  const window_s = cycles / frequency_Hz;
  const decay_per_s = (2 * Math.PI * frequency_Hz) / Math.sqrt(4 * q * q - 1);
  const amplitude = logBetween(random, 50, 400);
  const sigma = amplitude / Math.sqrt(2 * 10 ** (snr_dB / 10));
  const step_s = 1 / (frequency_Hz * perCycle);
  const furthest = Math.min(8, perCycle / 8);
  const second_Hz = frequency_Hz + Math.max(1.5 / window_s, frequency_Hz * random.between(0, furthest - 1));
  const secondDecay = decay_per_s * logBetween(random, 0.5, 6);
  const shape: TrueMode = {
    frequency_Hz: second_Hz,
    decay_per_s: secondDecay,
    amplitude: 1,
    phase_rad: random.between(-3.1, 3.1),
  };
  let energy = 0;
  for (let t = 0; t < window_s; t += step_s) energy += ringAt([shape], t) ** 2;
  const wanted = logBetween(random, ...strength);
  shape.amplitude = Math.min((wanted * sigma) / Math.sqrt(energy), 0.5 * amplitude);
  const main: TrueMode = { frequency_Hz, decay_per_s, amplitude, phase_rad: 0 };
  // The node is continuous at the switch-off: the main mode starts where the second leaves off.
  const offset = amplitude * 0.05;
  main.phase_rad = -Math.acos(
    Math.max(-1, Math.min(1, (-offset - shape.amplitude * Math.cos(shape.phase_rad)) / amplitude)),
  );
  const screen = 2.6 * amplitude;
  const bits = sigma >= (0.5 * screen) / 256 ? 8 : 12;
  const scope = { cycles, perCycle, snr_dB, sigma, bits, screen };
  return {
    ...digitised(seed, random, [main, shape], offset, step_s, scope),
    strength: (shape.amplitude * Math.sqrt(energy)) / sigma,
  };
}
