/**
 * Cramér–Rao bound of a ramp's figures, from the Fisher matrix of all samples between switch-on and
 * switch-off (Kay, Fundamentals of Statistical Signal Processing I, 1993, ch. 3, from memory): the current
 * is integrated here once more and differentiated by central differences. Independent of the analysis.
 */
import { EigenvalueDecomposition, inverse, Matrix } from "ml-matrix";

export interface TrueRamp {
  inductance_H: number;
  resistance_ohm: number;
  drive_V: number;
  dwell_s: number;
  step_s: number;
  /** From switch-on to the first sample after it. */
  first_s: number;
  /** Noise and quantisation of a sample. */
  deviation_A: number;
  /** L(i) = L0/(1 + (i/knee)⁴); absent: constant. Knee and exponent are unknown to the reader. */
  knee_A?: number;
}

/** Runge–Kutta steps a sample at least. */
const FINE = 2;

/** ln L, ln R, initial current, then ln knee and ln exponent. */
function currentAt(ramp: TrueRamp, p: number[]): Float64Array {
  const [L, R] = [Math.exp(p[0]), Math.exp(p[1])];
  const [knee, exponent] = p.length > 3 ? [Math.exp(p[3]), Math.exp(p[4])] : [Infinity, 1];
  const slope = (i: number) => ((ramp.drive_V - R * i) / L) * (1 + (Math.abs(i) / knee) ** exponent);
  let i = p[2];
  const advance = (h: number) => {
    const a = slope(i);
    const b = slope(i + (h / 2) * a);
    const c = slope(i + (h / 2) * b);
    i += (h / 6) * (a + 2 * b + 2 * c + slope(i + h * c));
  };
  advance(ramp.first_s);
  return Float64Array.from({ length: Math.floor((ramp.dwell_s - ramp.first_s) / ramp.step_s) }, (_, k) => {
    if (k > 0) for (let f = 0; f < FINE; f++) advance(ramp.step_s / FINE);
    return i;
  });
}

/** Relative standard deviations no unbiased reader can go below; `saturation` is null without a knee. */
export function rampBound(ramp: TrueRamp) {
  const p = [Math.log(ramp.inductance_H), Math.log(ramp.resistance_ohm), 0];
  if (ramp.knee_A) p.push(Math.log(ramp.knee_A), Math.log(4));
  const scale = ramp.drive_V / ramp.resistance_ohm;
  const columns = p.map((_, k) => {
    const h = k === 2 ? 1e-4 * scale : 1e-4;
    const [up, down] = [h, -h].map((by) =>
      currentAt(
        ramp,
        p.map((value, j) => (j === k ? value + by : value)),
      ),
    );
    return Array.from(up, (value, i) => (value - down[i]) / (2 * h) / ramp.deviation_A);
  });
  const jacobian = new Matrix(columns);
  const fisher = jacobian.mmul(jacobian.transpose());
  if (new EigenvalueDecomposition(fisher).realEigenvalues.some((value) => !(value > 0)))
    throw new Error("the ramp's parameters are not independent");
  const c = inverse(fisher);
  // ln I20 = ln knee − ln 4/exponent.
  const byN = Math.log(4) / 4;
  const saturation = ramp.knee_A
    ? Math.sqrt(c.get(3, 3) + 2 * byN * c.get(3, 4) + byN * byN * c.get(4, 4))
    : null;
  return { inductance: Math.sqrt(c.get(0, 0)), resistance: Math.sqrt(c.get(1, 1)), saturation };
}
