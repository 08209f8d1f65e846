/**
 * The current while the switch conducts: i(t) = i0 + s·t·g(λ·t), g(x) = (1 − e^−x)/x, with i0 the initial
 * current, s the first slope and λ = R/L. For λ → 0 it is a straight line, so short dwells fit as well.
 * Least squares with i0 and s eliminated (one non-linear parameter, found by Gauss–Newton).
 */
import { inverse } from "../numeric/cholesky.ts";

export interface RampFit {
  initial: number;
  slope: number;
  /** R/L per second. */
  rate: number;
  /** 3×3 row-major of (initial, slope, rate). */
  covariance: Float64Array;
  residual: number;
  count: number;
}

const g = (x: number) => (Math.abs(x) < 1e-4 ? 1 - x / 2 + (x * x) / 6 : -Math.expm1(-x) / x);
/** dg/dx. */
const slopeOfG = (x: number) => (Math.abs(x) < 1e-3 ? -0.5 + x / 3 : (Math.exp(-x) - g(x)) / x);

/** times in seconds from conduction's start, evenly spaced: t_k = first_s + k·step_s. */
export function fitRamp(values: Float64Array, first_s: number, step_s: number): RampFit | null {
  const n = values.length;
  if (n < 6) return null;
  const length = first_s + (n - 1) * step_s;
  let rate = 0.5 / length;
  let parameters = [0, 0];
  let best = Infinity;
  const gram = new Float64Array(9);
  for (let round = 0; round < 30; round++) {
    const linear = linearPart(values, first_s, step_s, rate);
    if (!linear) return null;
    parameters = linear;
    gram.fill(0);
    const right = [0, 0, 0];
    let cost = 0;
    for (let k = 0; k < n; k++) {
      const t = first_s + k * step_s;
      const row = [1, t * g(rate * t), parameters[1] * t * t * slopeOfG(rate * t)];
      const r = values[k] - parameters[0] - parameters[1] * row[1];
      cost += r * r;
      for (let a = 0; a < 3; a++) {
        right[a] += row[a] * r;
        for (let b = 0; b < 3; b++) gram[a * 3 + b] += row[a] * row[b];
      }
    }
    const inverted = inverse(gram, 3);
    if (!inverted) return null;
    const step = inverted[6] * right[0] + inverted[7] * right[1] + inverted[8] * right[2];
    const variance = cost / (n - 3);
    if (
      Math.abs(step) < 1e-3 * Math.sqrt(inverted[8] * variance) + 1e-12 / length ||
      cost > best * (1 + 1e-9)
    ) {
      return {
        initial: parameters[0],
        slope: parameters[1],
        rate,
        covariance: inverted.map((value) => value * variance),
        residual: Math.sqrt(variance),
        count: n,
      };
    }
    best = cost;
    rate = Math.max(-3 / length, Math.min(200 / length, rate + step));
  }
  return null;
}

function linearPart(values: Float64Array, first_s: number, step_s: number, rate: number): number[] | null {
  let n = 0;
  let sx = 0;
  let sy = 0;
  let sxx = 0;
  let sxy = 0;
  for (let k = 0; k < values.length; k++) {
    const t = first_s + k * step_s;
    const x = t * g(rate * t);
    n++;
    sx += x;
    sy += values[k];
    sxx += x * x;
    sxy += x * values[k];
  }
  const determinant = n * sxx - sx * sx;
  if (!(determinant > 0)) return null;
  const slope = (n * sxy - sx * sy) / determinant;
  return [(sy - slope * sx) / n, slope];
}
