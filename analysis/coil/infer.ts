/**
 * From the ring to L, C and R. With ω0² = ω_d² + α²: L = 1/(C·ω0²) for a stated capacitance,
 * C = 1/(L·ω0²) for a stated inductance, R = 2·α·L the equivalent series resistance. Uncertainty by the
 * law of propagation with the covariance of frequency and decay (JCGM 100:2008, 5.2).
 */
import { effectiveCapacitance_F } from "./secondary.ts";
import type { BudgetLine, Figure, Measured } from "../reading-format.ts";
import { standard } from "../setup/toleranced.ts";
import type { Setup } from "../setup/schema.ts";

export interface Tank {
  inductance_H: Figure;
  capacitance_F: Figure;
  resistance_ohm: Figure;
  budget: Record<string, BudgetLine[]>;
}

/** Frequency and decay of the mode with their covariance, and the interval's relative uncertainty. */
export interface RingInput {
  frequency_Hz: number;
  decay_per_s: number;
  covariance: [number, number, number];
  timeRelative: number;
}

/**
 * Capacitance the coil sees at its lower mode (ω0² = `square`), from capacitor, stray capacitance and a
 * stated secondary, each with what it adds to the uncertainty. Null without a stated capacitor.
 */
export function statedCapacitance(
  setup: Setup,
  square: number,
): { value: number; parts: BudgetLine[] } | null {
  const capacitor = standard(setup.capacitor_F);
  if (!capacitor) return null;
  const stray = standard(setup.strayCapacitance_F);
  const primary = capacitor.value + (stray?.value ?? 0);
  const value = effectiveCapacitance_F(primary, square, setup);
  const slope = (effectiveCapacitance_F(primary * 1.0001, square, setup) - value) / (primary * 0.0001);
  return {
    value,
    parts: [
      { source: "capacitor tolerance", u: Math.abs(slope) * capacitor.u },
      { source: "stray capacitance", u: Math.abs(slope) * (stray?.u ?? 0) },
    ],
  };
}

export function inferTank(ring: RingInput, setup: Setup): Tank {
  const l = standard(setup.knownInductance_H);
  const omega = 2 * Math.PI * ring.frequency_Hz;
  const square = omega * omega + ring.decay_per_s ** 2;
  const c = statedCapacitance(setup, square);
  // Relative change of 1/ω0² by frequency and decay.
  const byF = (-2 * omega * 2 * Math.PI) / square;
  const byA = (-2 * ring.decay_per_s) / square;
  const [ff, fa, aa] = ring.covariance;
  const noise = Math.sqrt(Math.max(0, byF * byF * ff + 2 * byF * byA * fa + byA * byA * aa));
  const interval = 2 * ring.timeRelative;
  const tank: Tank = { inductance_H: null, capacitance_F: null, resistance_ohm: null, budget: {} };
  const set = (
    key: "inductance_H" | "capacitance_F" | "resistance_ohm",
    value: number,
    parts: BudgetLine[],
  ) => {
    tank[key] = combined(value, parts);
    tank.budget[key] = parts.filter((part) => part.u > 0);
  };
  // R = 2α/(C·ω0²): relative derivatives.
  const resistance = (relativeParts: BudgetLine[], inductance: number) => {
    const value = 2 * ring.decay_per_s * inductance;
    const byA2 = byA + 1 / ring.decay_per_s;
    const fit = Math.sqrt(Math.max(0, byF * byF * ff + 2 * byF * byA2 * fa + byA2 * byA2 * aa));
    set("resistance_ohm", value, [
      { source: "ring fit", u: value * fit },
      { source: "sample interval", u: value * ring.timeRelative },
      ...relativeParts.map((part) => ({ ...part, u: part.u * value })),
    ]);
  };
  if (c) {
    const inductance = 1 / (c.value * square);
    const relative = c.parts.map((part) => ({ ...part, u: part.u / c.value }));
    set("inductance_H", inductance, [
      { source: "ring fit", u: inductance * noise },
      { source: "sample interval", u: inductance * interval },
      ...relative.map((part) => ({ ...part, u: part.u * inductance })),
    ]);
    set("capacitance_F", c.value, c.parts);
    resistance(relative, inductance);
  } else if (l) {
    const capacitance = 1 / (l.value * square);
    const relative = [{ source: "stated inductance", u: l.u / l.value }];
    set("capacitance_F", capacitance, [
      { source: "ring fit", u: capacitance * noise },
      { source: "sample interval", u: capacitance * interval },
      ...relative.map((part) => ({ ...part, u: part.u * capacitance })),
    ]);
    set("inductance_H", l.value, [{ source: "stated inductance", u: l.u }]);
    const value = 2 * ring.decay_per_s * l.value;
    set("resistance_ohm", value, [
      { source: "ring fit", u: 2 * l.value * Math.sqrt(aa) },
      { source: "sample interval", u: value * ring.timeRelative },
      { source: "stated inductance", u: (value * l.u) / l.value },
    ]);
  }
  return tank;
}

export function combined(value: number, parts: BudgetLine[]): Measured {
  return { value, u: Math.hypot(...parts.map((part) => part.u)) };
}
