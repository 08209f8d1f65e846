/** The kick in closed form (½·L·I² = ½·C·V² and its damping). */

/** Lossless amplitude of the ring about the supply, in volts. */
export function losslessAmplitude_V(
  current_A: number,
  inductance_H: number,
  capacitance_F: number,
  step_V = 0,
): number {
  return Math.sqrt((current_A * current_A * inductance_H) / capacitance_F + step_V * step_V);
}

/** Share of the lossless amplitude that is left at the first peak of a ring of quality q > ½. */
export function firstPeakShare(q: number): number {
  const zeta = 1 / (2 * q);
  const root = Math.sqrt(1 - zeta * zeta);
  return Math.exp((-zeta / root) * Math.atan(root / zeta));
}

/** Damped natural frequency of L with C across and a series resistance. */
export function ringFrequency_Hz(inductance_H: number, capacitance_F: number, resistance_ohm = 0): number {
  const alpha = resistance_ohm / (2 * inductance_H);
  const square = 1 / (inductance_H * capacitance_F) - alpha * alpha;
  return square > 0 ? Math.sqrt(square) / (2 * Math.PI) : 0;
}
