import type { Measured } from "../reading-format.ts";
import { twoSided } from "./normal.ts";

export interface Drift {
  /** Change of the value per unit of x. */
  slope: Measured;
  /** Value at the mean of x. */
  level: Measured;
  /** Slope beyond its uncertainty at 99 %. */
  drifts: boolean;
}

/**
 * Straight line by weighted least squares. Where the points scatter more than their own uncertainties
 * say, the line's uncertainty grows by the ratio (Birge, Physical Review 40, 1932); it never shrinks.
 * Null with fewer than three points or no spread in x.
 */
export function driftOf(points: { x: number; value: number; u: number }[]): Drift | null {
  if (points.length < 3) return null;
  const anyUnknown = points.some(({ u }) => !(u > 0));
  const weights = points.map(({ u }) => (anyUnknown ? 1 : 1 / (u * u)));
  const total = sum(weights);
  const meanX = sum(points.map(({ x }, i) => weights[i] * x)) / total;
  const meanY = sum(points.map(({ value }, i) => weights[i] * value)) / total;
  const spread = sum(points.map(({ x }, i) => weights[i] * (x - meanX) ** 2));
  if (!(spread > 0)) return null;
  const slope = sum(points.map(({ x, value }, i) => weights[i] * (x - meanX) * (value - meanY))) / spread;
  const misfit = sum(
    points.map(({ x, value }, i) => weights[i] * (value - meanY - slope * (x - meanX)) ** 2),
  );
  const excess = misfit / (points.length - 2);
  const inflation = anyUnknown ? excess : Math.max(1, excess);
  const u = Math.sqrt(inflation / spread);
  return {
    slope: { value: slope, u },
    level: { value: meanY, u: Math.sqrt(inflation / total) },
    drifts: Math.abs(slope) > twoSided(0.99) * u && u > 0,
  };
}

const sum = (values: number[]) => values.reduce((total, value) => total + value, 0);
