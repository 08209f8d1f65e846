/** How far the mean of a stretch of conduction may lie from its level. */
import type { Onset } from "./onsets.ts";

/** Of means over `width` samples; neighbours in coloured noise resemble each other, and its means scatter more. */
export function toleranceOf(onset: Onset, lsb: number | null, width: number, noise: number): number {
  const colour = Math.max(1, onset.scatter / noise);
  const independent = Math.max(1, width / colour ** 4);
  return Math.max(
    (5 * onset.scatter) / Math.sqrt(independent),
    1.1 * (lsb ?? 0),
    2e-3 * Math.abs(onset.swing),
  );
}
