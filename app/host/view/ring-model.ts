import type { RingReading } from "../../../analysis/reading-format.ts";

/**
 * The fitted ring as functions of time: c + Σ A·exp(−α·τ)·cos(2π·f·τ + φ), τ = t − from_s. Null for
 * a ring that was refused: there is nothing to draw.
 */
export function ringModel(ring: RingReading) {
  const { from_s, offset, modes, phases_rad } = ring;
  if (from_s === null || modes.length === 0) return null;
  const terms = modes.map((mode, i) => ({
    amplitude: Math.abs((mode.amplitude_V ?? mode.amplitude)?.value ?? 0),
    decay: mode.decay_per_s.value,
    omega: 2 * Math.PI * mode.frequency_Hz.value,
    phase: phases_rad[i] ?? 0,
  }));
  const level = offset ?? 0;
  return {
    level,
    period_s: (2 * Math.PI) / terms[0].omega,
    decay_per_s: terms[0].decay,
    value: (time: number) =>
      terms.reduce((sum, { amplitude, decay, omega, phase }) => {
        const t = time - from_s;
        return sum + amplitude * Math.exp(-decay * t) * Math.cos(omega * t + phase);
      }, level),
    /** Amplitude about the level, all modes in phase: no sample of the fitted ring lies outside it. */
    envelope: (time: number) =>
      terms.reduce((sum, { amplitude, decay }) => sum + amplitude * Math.exp(-decay * (time - from_s)), 0),
  };
}
