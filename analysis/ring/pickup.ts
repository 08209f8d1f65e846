/**
 * Mains pick-up and other slow waves beside a ring: weaker and slower than it, and they do not die away. In
 * the model they stay, as a baseline would; among the ring's modes they would pass for its own.
 */

import type { RingFit } from "./fit-format.ts";

interface Wave {
  /** Frequency and decay in any one unit of time, amplitude in any unit. */
  frequency: number;
  decay: number;
  amplitude: number;
}

/** A pick-up is below this share of the ring's amplitude, and of its frequency. */
const WEAKER = 1 / 3;
const SLOWER = 0.5;
const FEW_CYCLES = 3;

/**
 * Number of the wave that is no mode of the ring; −1 where there is none. `length` of the window in the same
 * unit of time; `unsure[m]`: decay below which wave m counts as steady.
 */
export function pickupAmong(waves: Wave[], length: number, unsure: number[]): number {
  if (waves.length < 2) return -1;
  const ring = waves.reduce((a, b) => (b.amplitude > a.amplitude ? b : a));
  return waves.findIndex(
    ({ frequency, decay, amplitude }, m) =>
      frequency < SLOWER * ring.frequency &&
      amplitude < WEAKER * ring.amplitude &&
      (decay < unsure[m] || frequency * length < FEW_CYCLES),
  );
}

/** Takes a slow steady wave out of the modes; their covariance stays what it is with it in the model. */
export function separatePickup(fit: RingFit): void {
  const { modes, covariance } = fit;
  const size = 4 * modes.length;
  const unsure = modes.map((_, m) => 3 * Math.sqrt(covariance[(4 * m + 1) * (size + 1)]));
  const waves = modes.map((mode) => ({
    frequency: mode.frequency_Hz,
    decay: mode.decay_per_s,
    amplitude: Math.hypot(mode.cosine, mode.sine),
  }));
  const at = pickupAmong(waves, (fit.to - fit.from) * fit.step_s, unsure);
  if (at < 0) return;
  const own = (k: number) => k >> 2 !== at;
  fit.pickup = modes[at];
  fit.modes = modes.toSpliced(at, 1);
  fit.excess = fit.excess.toSpliced(at, 1);
  fit.covariance = covariance.filter((_, k) => own(Math.floor(k / size)) && own(k % size));
}
