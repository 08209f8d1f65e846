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
/** However it decays: a ring's own mode is never this weak beside a faster one. Noise of a narrow band is. */
const FAR_WEAKER = 0.05;

/**
 * Numbers of the waves that are no modes of the ring. `length` of the window in the same unit of time; `unsure[m]`: decay below which wave m counts as steady.
 */
export function pickupAmong(waves: Wave[], length: number, unsure: number[]): number[] {
  if (waves.length < 2) return [];
  const ring = waves.reduce((a, b) => (b.amplitude > a.amplitude ? b : a));
  const isPickup = ({ frequency, decay, amplitude }: Wave, m: number) =>
    (frequency < ring.frequency && amplitude < FAR_WEAKER * ring.amplitude) ||
    (frequency < SLOWER * ring.frequency &&
      amplitude < WEAKER * ring.amplitude &&
      (decay < unsure[m] || frequency * length < FEW_CYCLES));
  return waves.flatMap((wave, m) => (isPickup(wave, m) ? [m] : []));
}

/** Takes the slow steady waves out of the modes; their covariance stays what it is with them in the model. */
export function separatePickup(fit: RingFit): void {
  const { modes, covariance } = fit;
  const size = 4 * modes.length;
  const unsure = modes.map((_, m) => 3 * Math.sqrt(covariance[(4 * m + 1) * (size + 1)]));
  const waves = modes.map((mode) => ({
    frequency: mode.frequency_Hz,
    decay: mode.decay_per_s,
    amplitude: Math.hypot(mode.cosine, mode.sine),
  }));
  const slow = new Set(pickupAmong(waves, (fit.to - fit.from) * fit.step_s, unsure));
  if (slow.size === 0) return;
  const own = (k: number) => !slow.has(k >> 2);
  fit.pickup = modes.filter((_, m) => slow.has(m));
  fit.modes = modes.filter((_, m) => !slow.has(m));
  fit.excess = fit.excess.filter((_, m) => !slow.has(m));
  fit.covariance = covariance.filter((_, k) => own(Math.floor(k / size)) && own(k % size));
}
