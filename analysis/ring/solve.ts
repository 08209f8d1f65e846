/**
 * Separable non-linear least squares for damped modes on a baseline: amplitudes and baseline are
 * eliminated (Golub & Pereyra, SIAM J. Numer. Anal. 10, 1973, in Kaufman's form, BIT 15, 1975), so only
 * decay and frequency are sought, with their analytic derivatives and Levenberg–Marquardt damping.
 * All inner products come from Gram: an iteration passes over the data once per mode.
 */
import { factor, solveFactored } from "../numeric/cholesky.ts";
import type { Blocks } from "./blocks.ts";
import { Gram, type Mode } from "./gram.ts";

export interface Solution {
  modes: Mode[];
  /** Per mode cosine and sine amplitude at block 0, then the baseline's coefficients of i^k. */
  linear: Float64Array;
  degree: number;
  /** Residual sum of squares over the used blocks. */
  cost: number;
  iterations: number;
  stopped: "converged" | "iterations" | "singular";
}

/** A step of this share of the standard uncertainty is none. */
const GOOD_STEP = 1e-2;
const MOST_ITERATIONS = 40;

/** State at one point: everything the step and the covariance need. */
class Point {
  readonly gram = new Gram();
  readonly normal: Float64Array;
  readonly gradient: Float64Array;
  readonly linear: Float64Array;
  readonly reduced: Float64Array;
  private readonly cross: Float64Array;
  cost = Infinity;
  readonly linears: number;

  constructor(
    readonly count: number,
    readonly degree: number,
  ) {
    this.linears = 2 * count + degree + 1;
    this.linear = new Float64Array(this.linears);
    this.normal = new Float64Array(this.linears ** 2);
    this.reduced = new Float64Array((2 * count) ** 2);
    this.gradient = new Float64Array(2 * count);
    this.cross = new Float64Array(2 * count * this.linears);
  }

  private column(k: number): number {
    return k < 2 * this.count ? 4 * (k >> 1) + (k & 1) : 2 * this.count + k;
  }

  /** False where the columns are not independent. */
  evaluate(blocks: Blocks, modes: Mode[]): boolean {
    const { gram, linears, normal, linear } = this;
    gram.fill(blocks, modes, this.degree);
    const width = gram.columns;
    for (let r = 0; r < linears; r++) {
      linear[r] = gram.data[this.column(r)];
      for (let c = 0; c < linears; c++)
        normal[r * linears + c] = gram.matrix[this.column(r) * width + this.column(c)];
    }
    if (!factor(normal, linears)) return false;
    solveFactored(normal, linears, linear);
    let explained = 0;
    for (let r = 0; r < linears; r++) explained += linear[r] * gram.data[this.column(r)];
    this.cost = Math.max(0, blocks.power - explained);
    return Number.isFinite(this.cost);
  }

  /** Reduced normal matrix and gradient for (omega, decay) of each mode at the evaluated point. */
  derive(): void {
    const { gram, linears, normal, linear, cross, gradient, reduced, count } = this;
    const width = gram.columns;
    const parameters = 2 * count;
    for (let p = 0; p < parameters; p++) {
      const [at, first, second] = this.derivative(p);
      const own = cross.subarray(p * linears, (p + 1) * linears);
      let slope = first * gram.data[at] + second * gram.data[at + 1];
      for (let r = 0; r < linears; r++) {
        const row = this.column(r) * width + at;
        own[r] = first * gram.matrix[row] + second * gram.matrix[row + 1];
        slope -= own[r] * linear[r];
      }
      gradient[p] = slope;
      for (let i = 0; i < linears; i++) {
        let s = own[i];
        for (let k = 0; k < i; k++) s -= normal[i * linears + k] * own[k];
        own[i] = s / normal[i * linears + i];
      }
    }
    for (let p = 0; p < parameters; p++)
      for (let q = 0; q <= p; q++) {
        const [a, a1, a2] = this.derivative(p);
        const [b, b1, b2] = this.derivative(q);
        let s =
          a1 * (b1 * gram.matrix[a * width + b] + b2 * gram.matrix[a * width + b + 1]) +
          a2 * (b1 * gram.matrix[(a + 1) * width + b] + b2 * gram.matrix[(a + 1) * width + b + 1]);
        for (let r = 0; r < linears; r++) s -= cross[p * linears + r] * cross[q * linears + r];
        reduced[p * parameters + q] = reduced[q * parameters + p] = s;
      }
  }

  /** ∂y/∂parameter as a combination of the columns i·e·cos and i·e·sin: their index and factors. */
  private derivative(p: number): [number, number, number] {
    const m = p >> 1;
    const cosine = this.linear[2 * m];
    const sine = this.linear[2 * m + 1];
    return p & 1 ? [4 * m + 2, -cosine, -sine] : [4 * m + 2, sine, -cosine];
  }
}

const points = new Map<number, [Point, Point]>();
function scratch(count: number, degree: number): [Point, Point] {
  const key = count * 8 + degree + 1;
  let pair = points.get(key);
  if (!pair) points.set(key, (pair = [new Point(count, degree), new Point(count, degree)]));
  return pair;
}

/** Residual sum of squares with amplitudes and baseline at their best; Infinity where it cannot be had. */
export function costAt(blocks: Blocks, modes: Mode[], degree: number): number {
  const [point] = scratch(modes.length, degree);
  return point.evaluate(blocks, modes) ? point.cost : Infinity;
}

/** Least squares from `start`. `degree` −1: no baseline; 0: offset; up to 3. */
export function solve(
  blocks: Blocks,
  start: Mode[],
  degree: number,
  mostIterations = MOST_ITERATIONS,
): Solution {
  let [here, there] = scratch(start.length, degree);
  const modes = start.map((mode) => ({ ...mode }));
  const parameters = 2 * modes.length;
  const freedom = Math.max(1, blocks.used - parameters - here.linears);
  const finish = (iterations: number, stopped: Solution["stopped"]): Solution => ({
    modes,
    linear: here.linear.slice(),
    degree,
    cost: here.cost,
    iterations,
    stopped,
  });
  if (!here.evaluate(blocks, modes)) return finish(0, "singular");
  here.derive();
  const step = new Float64Array(parameters);
  const damped = new Float64Array(parameters ** 2);
  let damping = 0;
  for (let iteration = 1; iteration <= mostIterations; iteration++) {
    damped.set(here.reduced);
    for (let p = 0; p < parameters; p++) damped[p * parameters + p] *= 1 + damping;
    step.set(here.gradient);
    const definite = factor(damped, parameters);
    if (definite) solveFactored(damped, parameters, step);
    let gain = 0;
    for (let p = 0; p < parameters; p++) gain += step[p] * here.gradient[p];
    const floor = 1e-15 * blocks.power;
    if (definite && gain <= GOOD_STEP ** 2 * (here.cost / freedom) + floor) {
      return finish(iteration, "converged");
    }
    const trial = definite ? stepped(modes, step, blocks.count) : null;
    if (trial && there.evaluate(blocks, trial) && there.cost <= here.cost + floor) {
      [here, there] = [there, here];
      for (let m = 0; m < modes.length; m++) modes[m] = trial[m];
      here.derive();
      damping = damping < 1e-4 ? 0 : damping / 10;
    } else {
      damping = damping === 0 ? 1e-3 : damping * 10;
      if (damping > 1e12) return finish(iteration, "singular");
    }
  }
  return finish(mostIterations, "iterations");
}

/** Null where the step leaves what a window of this length can tell. */
function stepped(modes: Mode[], step: Float64Array, length: number): Mode[] | null {
  const next = modes.map((mode, m) => ({
    omega: mode.omega + step[2 * m],
    decay: mode.decay + step[2 * m + 1],
  }));
  for (const { omega, decay } of next)
    if (!(omega > 0.2 / length && omega < Math.PI && decay > -20 / length && decay < 3)) return null;
  return next;
}
