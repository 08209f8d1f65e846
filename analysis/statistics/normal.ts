/** Standard normal distribution function; error function by its continued fraction and series. */
export function normalDistribution(z: number): number {
  return 0.5 * erfc(-z / Math.SQRT2);
}

/** The z with Φ(z) = p, 0 < p < 1, by bisection on the distribution function. */
export function normalQuantile(p: number): number {
  let low = -40;
  let high = 40;
  for (let i = 0; i < 64; i++) {
    const middle = (low + high) / 2;
    if (normalDistribution(middle) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Half-width in standard deviations of a two-sided interval: 1.96 for level 0.95. */
export const twoSided = (level: number) => normalQuantile(0.5 + level / 2);

/** Abramowitz & Stegun 7.1.5 (series) and 7.1.14 (continued fraction), the far one where it converges. */
function erfc(x: number): number {
  if (x < 0) return 2 - erfc(-x);
  if (x < 2.5) {
    let term = x;
    let sum = x;
    for (let n = 1; Math.abs(term) > 1e-17 * Math.abs(sum) && n < 200; n++) {
      term *= (-x * x) / n;
      sum += term / (2 * n + 1);
    }
    return 1 - (2 / Math.sqrt(Math.PI)) * sum;
  }
  let fraction = x;
  for (let n = 60; n >= 1; n--) fraction = x + n / 2 / fraction;
  return Math.exp(-x * x) / Math.sqrt(Math.PI) / fraction;
}
