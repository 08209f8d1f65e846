/**
 * How long to conduct: time to a current against supply and winding temperature,
 * t = −(L/R)·ln(1 − I·R/V), R = R20·(1 + 0.00393·(θ − 20)) + R_external (copper, IEC 60028), or with L(i)
 * where saturation was measured.
 */
import { COPPER_PER_K } from "../ramp/read-ramp.ts";
import type { Figure, Measured } from "../reading-format.ts";
import type { DwellTable } from "./coil-format.ts";

export interface Winding {
  inductance_H: Measured;
  /** At 20 °C. */
  resistance20_ohm: Measured;
  external_ohm: number;
  /** Drop across the switch. */
  on_V: number;
  /** Incremental inductance against current, rising current; null: constant. */
  curve: { current_A: number[]; inductance_H: number[] } | null;
}

export function resistanceAt(winding: Winding, temperature_C: number): Measured {
  const factor = 1 + COPPER_PER_K * (temperature_C - 20);
  const { value, u } = winding.resistance20_ohm;
  return { value: value * factor + winding.external_ohm, u: u * factor };
}

/** Time to `current_A`; null where the supply never drives that much. */
export function timeToCurrent(
  winding: Winding,
  current_A: number,
  supply_V: number,
  temperature_C: number,
): Figure {
  const drive = supply_V - winding.on_V;
  const resistance = resistanceAt(winding, temperature_C);
  const value = time(winding, winding.inductance_H.value, resistance.value, drive, current_A);
  if (value === null) return null;
  const { value: l, u } = winding.inductance_H;
  const byL = time(winding, l + u, resistance.value, drive, current_A);
  const byR = time(winding, l, resistance.value + resistance.u, drive, current_A);
  if (byL === null || byR === null) return null;
  return { value, u: Math.hypot(byL - value, byR - value) };
}

function time(
  winding: Winding,
  inductance: number,
  resistance: number,
  drive: number,
  current: number,
): number | null {
  if (!(drive > resistance * current)) return null;
  const { curve } = winding;
  if (!curve)
    return resistance * current < 1e-9 * drive
      ? (inductance * current) / drive
      : (-inductance / resistance) * Math.log1p((-current * resistance) / drive);
  // ∫ L(i)/(V − R·i) di by Simpson's rule; L(i) keeps its shape when L is moved.
  const scale = inductance / winding.inductance_H.value;
  const steps = 200;
  let sum = 0;
  for (let k = 0; k <= steps; k++) {
    const i = (k * current) / steps;
    sum +=
      (k === 0 || k === steps ? 1 : k % 2 ? 4 : 2) *
      ((scale * inductanceAt(curve, i)) / (drive - resistance * i));
  }
  return (sum * current) / (3 * steps);
}

function inductanceAt({ current_A, inductance_H }: NonNullable<Winding["curve"]>, i: number): number {
  let k = 1;
  while (k < current_A.length - 1 && current_A[k] < i) k++;
  const share = (i - current_A[k - 1]) / (current_A[k] - current_A[k - 1]);
  return inductance_H[k - 1] + Math.max(0, Math.min(1, share)) * (inductance_H[k] - inductance_H[k - 1]);
}

export function dwellTable(
  winding: Winding,
  current_A: number,
  supplies_V: number[],
  temperatures_C: number[],
): DwellTable {
  return {
    current_A,
    supplies_V,
    temperatures_C,
    time_s: supplies_V.map((supply) =>
      temperatures_C.map((at) => timeToCurrent(winding, current_A, supply, at)),
    ),
  };
}

/** Current that stores `energy_J` in a constant inductance. */
export const currentForEnergy_A = (energy_J: number, inductance_H: number): number =>
  Math.sqrt((2 * energy_J) / inductance_H);
