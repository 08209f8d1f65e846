/**
 * The ramp of a saturating core: di/dt = (V − R·i)/L(i), L(i) = L0/(1 + (i/Is)^n), least squares on the
 * integrated current. The incremental inductance has fallen by 20 % at Is·0.25^(1/n).
 */
import { inverse } from "../numeric/cholesky.ts";

export interface SaturatingFit {
  inductance_H: number;
  resistance_ohm: number;
  saturation_A: number;
  /** Standard uncertainties of the three. */
  u: [number, number, number];
  residual: number;
  /** L(i) for currents up to what was seen. */
  exponent: number;
  knee_A: number;
}

const MOST_ITERATIONS = 30;
/** From every start a few steps; the most promising go on. */
const ROUGH_ITERATIONS = 6;
const PROMISING = 2;
/** ln L0, R, ln Is, ln n, i0. */
const PARAMETERS = 5;

function currents(p: number[], drive_V: number, first_s: number, step_s: number, out: Float64Array): void {
  const [logL, r, logKnee, logN, start] = p;
  const inductance = Math.exp(logL);
  const knee = Math.exp(logKnee);
  const n = Math.exp(logN);
  const slope = (i: number) => ((drive_V - r * i) / inductance) * (1 + (Math.abs(i) / knee) ** n);
  let i = start;
  const advance = (h: number) => {
    const a = slope(i);
    const b = slope(i + (h / 2) * a);
    const c = slope(i + (h / 2) * b);
    i += (h / 6) * (a + 2 * b + 2 * c + slope(i + h * c));
  };
  advance(first_s - step_s / 2);
  for (let k = 0; k < out.length; k++) {
    // The values are means over their interval, and a saturating current bends within it: Simpson's rule.
    const begin = i;
    advance(step_s / 2);
    const middle = i;
    advance(step_s / 2);
    out[k] = (begin + 4 * middle + i) / 6;
  }
}

/**
 * values: means of |current| over step_s about first_s + k·step_s after conduction's start. Null where the
 * fit does not settle.
 * `start`: first slope's inductance and a resistance.
 */
export function fitSaturating(
  values: Float64Array,
  first_s: number,
  step_s: number,
  drive_V: number,
  start: { inductance_H: number; resistance_ohm: number; initial_A: number },
): SaturatingFit | null {
  const n = values.length;
  const top = Math.max(...values);
  const starts = [0.25, 0.6, 1].flatMap((share) => [2, 5].map((exponent) => ({ share, exponent })));
  const rough = starts.map(({ share, exponent }) => {
    const p = [
      Math.log(start.inductance_H),
      start.resistance_ohm,
      Math.log(share * top),
      Math.log(exponent),
      start.initial_A,
    ];
    return descend(values, first_s, step_s, drive_V, p, ROUGH_ITERATIONS);
  });
  const promising = rough
    .filter((found) => found !== null)
    .toSorted((a, b) => a.cost - b.cost)
    .slice(0, PROMISING);
  let best: { p: number[]; cost: number } | null = null;
  for (const { p } of promising) {
    const found = descend(values, first_s, step_s, drive_V, p, MOST_ITERATIONS);
    if (found && !(found.cost >= (best?.cost ?? Infinity))) best = found;
  }
  if (!best) return null;
  const { p, cost } = best;
  const covariance = inverse(normalMatrix(values, first_s, step_s, drive_V, p).matrix, PARAMETERS);
  if (!covariance) return null;
  const variance = cost / (n - PARAMETERS);
  const exponent = Math.exp(p[3]);
  const knee_A = Math.exp(p[2]);
  const logFour = Math.log(4);
  const saturation_A = knee_A * 0.25 ** (1 / exponent);
  const cov = (a: number, b: number) => covariance[a * PARAMETERS + b] * variance;
  // ln I20 = ln Is − ln 4·e^(−ln n).
  const byN = logFour / exponent;
  const relative = Math.sqrt(Math.max(0, cov(2, 2) + 2 * byN * cov(2, 3) + byN * byN * cov(3, 3)));
  return {
    inductance_H: Math.exp(p[0]),
    resistance_ohm: p[1],
    saturation_A,
    u: [Math.exp(p[0]) * Math.sqrt(cov(0, 0)), Math.sqrt(cov(1, 1)), saturation_A * relative],
    residual: Math.sqrt(variance),
    exponent,
    knee_A,
  };
}

function normalMatrix(values: Float64Array, first_s: number, step_s: number, drive_V: number, p: number[]) {
  const n = values.length;
  const base = new Float64Array(n);
  currents(p, drive_V, first_s, step_s, base);
  const columns = p.map((value, k) => {
    const h = k === 1 || k === 4 ? 1e-5 * (Math.abs(value) + 1e-3) : 1e-5;
    const moved = p.slice();
    moved[k] += h;
    const out = new Float64Array(n);
    currents(moved, drive_V, first_s, step_s, out);
    return out.map((y, i) => (y - base[i]) / h);
  });
  const matrix = new Float64Array(PARAMETERS ** 2);
  const right = new Float64Array(PARAMETERS);
  let cost = 0;
  for (let i = 0; i < n; i++) {
    const r = values[i] - base[i];
    cost += r * r;
    for (let a = 0; a < PARAMETERS; a++) {
      right[a] += columns[a][i] * r;
      for (let b = 0; b < PARAMETERS; b++) matrix[a * PARAMETERS + b] += columns[a][i] * columns[b][i];
    }
  }
  return { matrix, right, cost };
}

function descend(
  values: Float64Array,
  first_s: number,
  step_s: number,
  drive_V: number,
  start: number[],
  iterations: number,
) {
  let p = start;
  let damping = 1e-2;
  let state = normalMatrix(values, first_s, step_s, drive_V, p);
  for (let round = 0; round < iterations; round++) {
    const damped = state.matrix.slice();
    for (let k = 0; k < PARAMETERS; k++) damped[k * PARAMETERS + k] *= 1 + damping;
    const inverted = inverse(damped, PARAMETERS);
    if (!inverted) return null;
    const next = p.map((value, k) => {
      let step = 0;
      for (let j = 0; j < PARAMETERS; j++) step += inverted[k * PARAMETERS + j] * state.right[j];
      return value + Math.max(-1, Math.min(1, step));
    });
    if (Math.abs(next[3]) > 3.5) return { p, cost: state.cost };
    const trial = normalMatrix(values, first_s, step_s, drive_V, next);
    if (trial.cost < state.cost) {
      const settled = state.cost - trial.cost < 1e-7 * state.cost;
      p = next;
      state = trial;
      damping /= 5;
      if (settled) break;
    } else if ((damping *= 6) > 1e8) break;
  }
  return Number.isFinite(state.cost) ? { p, cost: state.cost } : null;
}
