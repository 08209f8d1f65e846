import { logGamma } from "./log-gamma.ts";

/**
 * Regularised incomplete beta function I_x(a, b), the distribution function of Beta(a, b).
 * Continued fraction of Abramowitz & Stegun 26.5.8 by Lentz's method.
 */
export function betaDistribution(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  // The fraction converges fast only below the mean; above it the mirrored one does.
  if (x > (a + 1) / (a + b + 2)) return 1 - betaDistribution(1 - x, b, a);
  const front = logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x);
  return (Math.exp(front) * continuedFraction(x, a, b)) / a;
}

function continuedFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  const away = (value: number) => (Math.abs(value) < tiny ? tiny : value);
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let value = d;
  for (let m = 1; m <= 1000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away(1 + even * d);
    c = away(1 + even / c);
    value *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away(1 + odd * d);
    c = away(1 + odd / c);
    value *= d * c;
    if (Math.abs(d * c - 1) < 1e-15) break;
  }
  return value;
}

/** The x with I_x(a, b) = p, by bisection: 60 halvings reach the last bit that matters. */
export function betaQuantile(p: number, a: number, b: number): number {
  let low = 0;
  let high = 1;
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (betaDistribution(middle, a, b) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
