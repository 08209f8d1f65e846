/**
 * Uncertainty of a function of uncertain inputs: the law of propagation with correlations (JCGM
 * 100:2008, 5.2.2), or trials (JCGM 101:2008) where an input is too uncertain for a straight line.
 */

export interface Input {
  /** Inputs of one source make one line of the budget. */
  source: string;
  value: number;
  u: number;
  distribution: "normal" | "rectangular";
}

export interface Propagated {
  value: number;
  u: number;
  /** Per source, the standard uncertainty it would give alone. */
  budget: { source: string; u: number }[];
}

/** Relative uncertainty of an input from which trials are made. */
const NONLINEAR = 0.05;
const TRIALS = 1000;

/**
 * f at the inputs with its standard uncertainty. `correlation(a, b)` of two inputs, 0 when absent.
 * With trials the value stays f at the inputs, and u is the root mean square departure from it.
 */
export function propagate(
  f: (inputs: number[]) => number,
  inputs: Input[],
  correlation: (a: number, b: number) => number = () => 0,
): Propagated {
  const values = inputs.map((input) => input.value);
  const value = f(values);
  const slopes = inputs.map((input, k) => {
    if (!(input.u > 0)) return 0;
    const moved = (by: number) => f(values.with(k, values[k] + by));
    const h = input.u * 1e-3;
    return (moved(h) - moved(-h)) / (2 * h);
  });
  const sources = [...new Set(inputs.map((input) => input.source))];
  const budget = sources.map((source) => {
    const own = inputs.flatMap((input, k) => (input.source === source ? [k] : []));
    const wide = own.some((k) => inputs[k].u > NONLINEAR * Math.abs(values[k]));
    const u = wide
      ? byTrials(f, inputs, own, value)
      : Math.sqrt(Math.max(0, quadratic(slopes, inputs, own, correlation)));
    return { source, u };
  });
  const all = inputs.map((_, k) => k);
  const linear = Math.sqrt(Math.max(0, quadratic(slopes, inputs, all, correlation)));
  const wide = inputs.some((input, k) => input.u > NONLINEAR * Math.abs(values[k]));
  return { value, u: wide ? Math.hypot(...budget.map((line) => line.u)) : linear, budget };
}

function quadratic(
  slopes: number[],
  inputs: Input[],
  of: number[],
  correlation: (a: number, b: number) => number,
): number {
  let sum = 0;
  for (const a of of)
    for (const b of of) {
      const r = a === b ? 1 : correlation(a, b);
      sum += r * slopes[a] * inputs[a].u * slopes[b] * inputs[b].u;
    }
  return sum;
}

/** Root mean square departure over trials of the inputs `moving`, the others held. The trials are always the same. */
function byTrials(
  f: (inputs: number[]) => number,
  inputs: Input[],
  moving: number[],
  centre: number,
): number {
  const values = inputs.map((input) => input.value);
  let state = 1;
  const uniform = () => {
    // Park & Miller, Comm. ACM 31, 1988.
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
  let sum = 0;
  for (let trial = 0; trial < TRIALS; trial++) {
    for (const k of moving) {
      const { u, distribution } = inputs[k];
      const deviate =
        distribution === "rectangular"
          ? Math.sqrt(3) * (2 * uniform() - 1)
          : Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
      values[k] = inputs[k].value + u * deviate;
    }
    sum += (f(values) - centre) ** 2;
  }
  return Math.sqrt(sum / TRIALS);
}
