import { fitRing } from "../../analysis/ring/fit.ts";
import { factor, solveFactored } from "../../analysis/numeric/cholesky.ts";

/**
 * Strength of a spark: what is left of sparking − quiet waveform over the noise, before and after the
 * best quiet ring is fitted away. The fit is linear around the quiet ring: offset and, for each of its
 * modes, cosine, sine and their products with time (amplitude, phase, decay and frequency).
 */
export function strength(sparking: Float64Array, quiet: Float64Array, step_s: number, sigma: number) {
  const difference = sparking.map((value, i) => value - quiet[i]);
  const before = difference.reduce((sum, value) => sum + value * value, 0);
  const after = before - explained(difference, basis(quiet, step_s));
  return {
    strength: Math.sqrt(Math.max(0, after)) / sigma,
    strengthBefore: Math.sqrt(before) / sigma,
  };
}

function basis(quiet: Float64Array, step_s: number): Float64Array[] {
  const columns = [new Float64Array(quiet.length).fill(1)];
  for (const { frequency_Hz, decay_per_s } of fitRing(quiet, 0, quiet.length, step_s, { noise: 1e-3 })
    ?.modes ?? []) {
    const wave = (shape: (i: number) => number) =>
      quiet.map((_, i) => Math.exp(-decay_per_s * step_s * i) * shape(i));
    const angle = 2 * Math.PI * frequency_Hz * step_s;
    columns.push(
      wave((i) => Math.cos(angle * i)),
      wave((i) => Math.sin(angle * i)),
    );
    columns.push(
      wave((i) => (i * Math.cos(angle * i)) / quiet.length),
      wave((i) => (i * Math.sin(angle * i)) / quiet.length),
    );
  }
  return columns;
}

/** Sum of squares of `values` that lies in the span of the columns. */
function explained(values: Float64Array, columns: Float64Array[]): number {
  const n = columns.length;
  const gram = Float64Array.from({ length: n * n }, (_, at) =>
    dot(columns[Math.floor(at / n)], columns[at % n]),
  );
  const right = Float64Array.from(columns, (column) => dot(column, values));
  const solution = right.slice();
  if (!factor(gram, n)) return 0;
  solveFactored(gram, n, solution);
  return solution.reduce((sum, value, i) => sum + value * right[i], 0);
}

const dot = (a: Float64Array, b: Float64Array) => a.reduce((sum, value, i) => sum + value * b[i], 0);
