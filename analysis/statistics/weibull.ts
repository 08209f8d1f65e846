import { twoSided } from "./normal.ts";
import type { Interval } from "./proportion.ts";

export interface WeibullFit {
  /** Spread: large is narrow. */
  shape: { value: number } & Interval;
  /** The value 63.2 % lie below, in the unit of the data. */
  scale: { value: number } & Interval;
  level: number;
  failures: number;
  censored: number;
  /** Value below which a share p lies, with bounds. */
  quantile(p: number): { value: number } & Interval;
}

/**
 * Two-parameter Weibull by maximum likelihood, right-censored values included (IEC 62539). Bounds from
 * the observed information on the logarithms of shape and scale, so they stay positive.
 * Null with fewer than three breakdowns or when all are equal: no shape can be told.
 */
export function fitWeibull(broke: number[], held: number[], level = 0.95): WeibullFit | null {
  if (broke.length < 3 || Math.min(...broke) <= 0 || Math.max(...broke) === Math.min(...broke)) return null;
  const logs = [...broke, ...held.filter((value) => value > 0)].map(Math.log);
  const meanBroke = broke.reduce((sum, value) => sum + Math.log(value), 0) / broke.length;
  const shape = shapeOf(logs, meanBroke);
  if (shape === null) return null;
  const top = Math.max(...logs);
  const logScale = top + Math.log(powerSums(logs, shape, top).zero / broke.length) / shape;
  const covariance = covarianceOf(logs, shape, logScale, broke.length);
  if (!covariance) return null;
  const z = twoSided(level);
  const around = (log: number, variance: number) => ({
    value: Math.exp(log),
    low: Math.exp(log - z * Math.sqrt(variance)),
    high: Math.exp(log + z * Math.sqrt(variance)),
  });
  return {
    shape: around(Math.log(shape), covariance.shape),
    scale: around(logScale, covariance.scale),
    level,
    failures: broke.length,
    censored: logs.length - broke.length,
    quantile(p) {
      // ln q = logScale + w/shape, w = ln(−ln(1 − p)); derivative by ln shape is −w/shape.
      const lean = Math.log(-Math.log1p(-p)) / shape;
      const variance = covariance.scale - 2 * lean * covariance.both + lean * lean * covariance.shape;
      return around(logScale + lean, Math.max(0, variance));
    },
  };
}

/** Σ xᵏ, Σ xᵏ·ln x with x in units of the origin, so that nothing overflows. */
function powerSums(logs: number[], shape: number, origin: number) {
  let [zero, one] = [0, 0];
  for (const log of logs) {
    const power = Math.exp(shape * (log - origin));
    zero += power;
    one += power * (log - origin);
  }
  return { zero, one };
}

/** Root of the likelihood equation in the shape: increasing, so bisection on its logarithm is safe. */
function shapeOf(logs: number[], meanBroke: number): number | null {
  const top = Math.max(...logs);
  const slope = (shape: number) => {
    const { zero, one } = powerSums(logs, shape, top);
    return one / zero + top - 1 / shape - meanBroke;
  };
  let [low, high] = [1e-3, 1e5];
  if (slope(low) > 0 || slope(high) < 0) return null;
  for (let i = 0; i < 80; i++) {
    const middle = Math.sqrt(low * high);
    if (slope(middle) < 0) low = middle;
    else high = middle;
  }
  return Math.sqrt(low * high);
}

/** Inverse of the observed information in (ln shape, ln scale). */
function covarianceOf(logs: number[], shape: number, logScale: number, failures: number) {
  // With v = shape·(ln x − ln scale), the log-likelihood per value is [ln shape + v − ln x] − e^v.
  let [bend, mixed, level] = [0, 0, 0];
  for (const log of logs) {
    const v = shape * (log - logScale);
    const power = Math.exp(v);
    bend += power * v * v + power * v;
    mixed += power * v + power;
    level += power;
  }
  const sumBroke = logs.slice(0, failures).reduce((sum, log) => sum + shape * (log - logScale), 0);
  const shapeShape = bend - sumBroke;
  const shapeScale = -shape * (mixed - failures);
  const scaleScale = shape * shape * level;
  const determinant = shapeShape * scaleScale - shapeScale * shapeScale;
  if (!(determinant > 0)) return null;
  return {
    shape: scaleScale / determinant,
    scale: shapeShape / determinant,
    both: -shapeScale / determinant,
  };
}
