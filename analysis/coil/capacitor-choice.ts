/**
 * What a capacitor would do (lossless): C_min = L·I0²/((V_limit − V_supply)² − (V_supply − V_on)²), and
 * the peak of any other. With tolerances by the law of propagation.
 */
import type { Figure, Measured } from "../reading-format.ts";
import { losslessAmplitude_V } from "./kick.ts";

export interface DriveInput {
  inductance_H: Measured;
  current_A: Measured;
  supply_V: number;
  on_V: number;
}

/** Smallest capacitance that keeps the peak at `limit_V`; null where no capacitor can (limit ≤ 2·supply − on). */
export function smallestCapacitor_F(input: DriveInput, limit_V: number): Figure {
  const { inductance_H: l, current_A: i, supply_V, on_V } = input;
  if (!(limit_V > 2 * supply_V - on_V)) return null;
  const value = (l.value * i.value ** 2) / ((limit_V - supply_V) ** 2 - (supply_V - on_V) ** 2);
  return { value, u: value * Math.hypot(l.u / l.value, (2 * i.u) / i.value) };
}

/** A body diode's drop. */
const DIODE_V = 0.7;

/**
 * Peak at the switch to ground, undamped, and how far the node would swing the other way: with a
 * blocking diode as far below the supply as it went above, without one a diode drop below ground.
 */
export function swingWith(
  input: DriveInput,
  capacitance_F: Measured,
  blockingDiode: boolean,
): { peak_V: Measured; lowest_V: number } {
  const { inductance_H: l, current_A: i, supply_V, on_V } = input;
  const amplitude = losslessAmplitude_V(i.value, l.value, capacitance_F.value, supply_V - on_V);
  const kick2 = (i.value ** 2 * l.value) / capacitance_F.value;
  const relative = Math.hypot((2 * i.u) / i.value, l.u / l.value, capacitance_F.u / capacitance_F.value);
  const peak_V = { value: supply_V + amplitude, u: (kick2 * relative) / (2 * amplitude) };
  const lowest = supply_V - amplitude;
  return { peak_V, lowest_V: blockingDiode ? lowest : Math.max(lowest, -DIODE_V) };
}
