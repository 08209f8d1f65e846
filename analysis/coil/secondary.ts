/**
 * The capacitance the primary's lower mode sees, secondary included. With the secondary tank (L2 = n²·L1
 * or stated, C2) and coupling k the natural frequencies are the roots ω² of
 * (1 − k²)·ω⁴ − (ω1² + ω2²)·ω² + ω1²·ω2² = 0; the lower one is 1/(L1·C_effective).
 */
import type { Setup } from "../setup/schema.ts";

/** Whether the setup or the capture speaks of a second winding. */
export function hasSecondary(setup: Setup): boolean {
  return [setup.turnsRatio, setup.secondaryInductance_H, setup.coupling, setup.secondaryCapacitance_F].some(
    (value) => value !== undefined && value !== null,
  );
}

/**
 * C_effective for a primary capacitance; `square` is the lower mode's ω0². The primary's own capacitance
 * where the secondary's is not stated. For k → 1 it is C1 + n²·C2.
 */
export function effectiveCapacitance_F(capacitance_F: number, square: number, setup: Setup): number {
  const c2 = setup.secondaryCapacitance_F;
  if (!c2) return capacitance_F;
  const leak = 1 - (setup.coupling ?? 1) ** 2;
  const a = 1 / capacitance_F;
  if (setup.turnsRatio) {
    const b = 1 / (setup.turnsRatio ** 2 * c2);
    if (leak < 1e-9) return 1 / a + 1 / b;
    // λ = L1·ω² of the lower mode.
    const root = Math.sqrt((a + b) ** 2 - 4 * a * b * leak);
    return (a + b + root) / (2 * a * b);
  }
  if (setup.secondaryInductance_H) {
    const d = 1 / (setup.secondaryInductance_H * c2);
    const inverseL = (square * (leak * square - d)) / (a * (square - d));
    return inverseL > 0 ? inverseL / square : capacitance_F;
  }
  return capacitance_F;
}
