import { betaQuantile } from "./beta.ts";
import { twoSided } from "./normal.ts";

export interface Interval {
  low: number;
  high: number;
}

/** Exact two-sided interval of a proportion, `hits` out of `trials` ≥ 1 (Clopper & Pearson, Biometrika 26, 1934). */
export function clopperPearson(hits: number, trials: number, level: number): Interval {
  const tail = (1 - level) / 2;
  return {
    low: hits === 0 ? 0 : betaQuantile(tail, hits, trials - hits + 1),
    high: hits === trials ? 1 : betaQuantile(1 - tail, hits + 1, trials - hits),
  };
}

/** Score interval of a proportion (Wilson, JASA 22, 1927). */
export function wilson(hits: number, trials: number, level: number): Interval {
  const z = twoSided(level);
  const rate = hits / trials;
  const shrink = 1 + (z * z) / trials;
  const centre = (rate + (z * z) / (2 * trials)) / shrink;
  const half = (z / shrink) * Math.sqrt((rate * (1 - rate)) / trials + (z * z) / (4 * trials * trials));
  return { low: Math.max(0, centre - half), high: Math.min(1, centre + half) };
}

export interface Tally {
  hits: number;
  trials: number;
}

/**
 * Difference of two independent rates, b − a, with its interval: Wilson limits combined
 * (Newcombe, Statistics in Medicine 17, 1998, method 10). Null when either has no trials.
 */
export function rateDifference(a: Tally, b: Tally, level: number): ({ value: number } & Interval) | null {
  if (a.trials === 0 || b.trials === 0) return null;
  const [rateA, rateB] = [a.hits / a.trials, b.hits / b.trials];
  const [limitsA, limitsB] = [wilson(a.hits, a.trials, level), wilson(b.hits, b.trials, level)];
  const value = rateB - rateA;
  return {
    value,
    low: value - Math.hypot(rateB - limitsB.low, limitsA.high - rateA),
    high: value + Math.hypot(limitsB.high - rateB, rateA - limitsA.low),
  };
}
