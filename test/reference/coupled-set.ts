/** Coupled rings from the circuit simulator, seen through a scope, with their eigenvalue truth and bound. */
import { fitRing } from "../../analysis/ring/fit.ts";
import { eigenmodes, ringNetlist, type CoupledTanks } from "./coupled-modes.ts";
import { seeded } from "./random.ts";
import { logBetween, ringBound, type RingTrial } from "./ring-set.ts";
import { runNetlist } from "./simulate.ts";

export interface CoupledTrial {
  trial: RingTrial;
  tanks: CoupledTanks;
  truth: { frequency_Hz: number; decay_per_s: number }[];
  bound_Hz: number[];
}

/** Conduction at 0 V, then the ring; 8 or 12 bits with noise of half an LSB and more. */
export async function coupledTrial(seed: number): Promise<CoupledTrial> {
  const random = seeded(seed);
  const l1_H = logBetween(random, 2e-3, 20e-3);
  const c1_F = logBetween(random, 1e-7, 5e-7);
  const turns = random.between(50, 100);
  const l2_H = turns * turns * l1_H;
  const impedance = Math.sqrt(l1_H / c1_F);
  const tanks: CoupledTanks = {
    l1_H,
    r1_ohm: impedance / logBetween(random, 20, 80),
    c1_F,
    l2_H,
    r2_ohm: (turns * turns * impedance) / logBetween(random, 20, 80),
    c2_F: (c1_F / turns ** 2) * random.between(0.2, 1),
    coupling: random.between(0.85, 0.97),
  };
  const truth = eigenmodes(tanks);
  const cycles = random.between(8, 16);
  const perCycle = random.between(80, 200);
  const [low, high] = truth;
  const step_s = 1 / (low.frequency_Hz * perCycle);
  const end_s = cycles / low.frequency_Hz;
  // The trapezoidal rule disperses by (ω·h)²/12: 1e-6 of the fast mode, far below its bound.
  const maxStep_s = Math.min(step_s / 4, 3.5e-3 / (2 * Math.PI * high.frequency_Hz));
  const vectors = await runNetlist(ringNetlist(tanks, 2, end_s, maxStep_s));
  const clean = sampled(vectors.get("time")!, vectors.get("v(node)")!, step_s, Math.floor(cycles * perCycle));
  const top = clean.reduce((most, y) => Math.max(most, Math.abs(y)), 0);
  const bits = random.pick([8, 12]);
  const screen = 2.4 * top;
  const lsb = screen / 2 ** bits;
  const sigma = lsb * random.between(0.5, 1.5);
  const before = 400;
  const samples = Float64Array.from({ length: before + clean.length }, (_, i) => {
    const y = i < before ? 0 : clean[i - before];
    return Math.round((y + sigma * random.normal()) / lsb) * lsb;
  });
  const fit = fitRing(clean, 0, clean.length, step_s, { start: truth })!;
  const modes = truth.map((mode, m) => ({
    ...mode,
    amplitude: Math.hypot(fit.modes[m].cosine, fit.modes[m].sine),
    phase_rad: Math.atan2(-fit.modes[m].sine, fit.modes[m].cosine),
  }));
  const scope = { cycles, perCycle, snr_dB: 20 * Math.log10(top / sigma / Math.SQRT2), sigma, bits, screen };
  const trial: RingTrial = {
    seed,
    samples,
    step_s,
    first: before,
    modes,
    offset: 0,
    lsb,
    switchOff: before,
    ...scope,
  };
  return { trial, tanks, truth, bound_Hz: ringBound(trial).frequency_Hz };
}

/** Cubic interpolation of the simulator's uneven grid. */
function sampled(time: number[], values: number[], step_s: number, count: number): Float64Array {
  let at = 1;
  return Float64Array.from({ length: count }, (_, i) => {
    const t = i * step_s;
    while (at < time.length - 3 && time[at + 1] <= t) at++;
    let y = 0;
    for (let a = at - 1; a < at + 3; a++) {
      let weight = 1;
      for (let b = at - 1; b < at + 3; b++) if (b !== a) weight *= (t - time[b]) / (time[a] - time[b]);
      y += weight * values[a];
    }
    return y;
  });
}
