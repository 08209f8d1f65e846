/**
 * "A free ring of these modes" over any stretch of a pulse, at the price of one pass: the normal
 * equations are kept as running sums from both ends, so a stretch from the start or to the end costs
 * one small solve. Columns: a bent baseline (1, t, t²); for the low mode cosine, sine and their products
 * with t (so decay and frequency may differ a little); for the high mode cosine and sine.
 */
import { factor, solveLower, solveUpper } from "../numeric/cholesky.ts";
import type { Blocks } from "../ring/blocks.ts";

export interface KnownMode {
  frequency_Hz: number;
  decay_per_s: number;
}

export interface StretchCost {
  /** Residual sum of squares plus what the prior charges. */
  cost: number;
  blocks: number;
}

export interface StretchFit extends StretchCost {
  coefficients: Float64Array;
}

const BASELINE = 3;
/** First column of the low mode: cosine, sine, t·cosine, t·sine. */
export const LOW = BASELINE;
/** First column of the high mode: cosine, sine. */
export const HIGH = BASELINE + 4;

export class RingSums {
  readonly columns: number;
  /** Block numbers of the boundaries: 0 … count in steps of `stride`. */
  readonly boundaries: number[] = [];
  private readonly wave: Float64Array;
  private readonly left: Float64Array[] = [];
  private readonly right: Float64Array[] = [];
  private readonly prior: Float64Array;
  private readonly gram: Float64Array;
  private readonly halfway: Float64Array;
  private definite = false;

  constructor(
    private readonly blocks: Blocks,
    private readonly modes: KnownMode[],
    private readonly time: { first_s: number; step_s: number },
    stride: number,
    amplitude: number,
    noise: number,
  ) {
    this.columns = BASELINE + (modes.length > 1 ? 6 : 4);
    this.gram = new Float64Array(this.columns ** 2);
    this.halfway = new Float64Array(this.columns);
    this.wave = this.makeWave();
    this.prior = this.makePrior(amplitude, noise);
    for (let b = 0; b < blocks.count; b += stride) this.boundaries.push(b);
    this.boundaries.push(blocks.count);
    this.accumulate();
  }

  /** Free ring from the window's start to boundary `k`. */
  upTo = (k: number): StretchFit => this.solve(this.left[k]);
  costUpTo = (k: number): StretchCost => this.costOf(this.left[k]);
  /** Free ring from boundary `k` to the window's end. */
  from = (k: number): StretchFit => this.solve(this.right[k]);
  costFrom = (k: number): StretchCost => this.costOf(this.right[k]);

  /** Value of the fitted ring at block i. */
  value(coefficients: Float64Array, i: number): number {
    let value = 0;
    for (let c = 0; c < this.columns; c++) value += coefficients[c] * this.wave[i * this.columns + c];
    return value;
  }

  /** Complex amplitude of a mode at block i: what a free ring would still have of it there. */
  amplitudeAt(coefficients: Float64Array, first: number, i: number): [cosine: number, sine: number] {
    const mode = this.modes[first === LOW ? 0 : 1];
    const t = this.time.first_s + i * this.time.step_s;
    const decayed = Math.exp(-mode.decay_per_s * t);
    const lean = first === LOW ? i / this.blocks.count : 0;
    const cosine = coefficients[first] + (first === LOW ? lean * coefficients[first + 2] : 0);
    const sine = coefficients[first + 1] + (first === LOW ? lean * coefficients[first + 3] : 0);
    return [cosine * decayed, sine * decayed];
  }

  private makeWave(): Float64Array {
    const { count } = this.blocks;
    const wave = new Float64Array(count * this.columns);
    for (let i = 0; i < count; i++) {
      const at = i * this.columns;
      const x = i / count;
      wave[at] = 1;
      wave[at + 1] = x;
      wave[at + 2] = x * x;
    }
    this.modes.slice(0, 2).forEach((mode, m) => {
      const turn = 2 * Math.PI * mode.frequency_Hz * this.time.step_s;
      const shrink = Math.exp(-mode.decay_per_s * this.time.step_s);
      const [re, im] = [shrink * Math.cos(turn), shrink * Math.sin(turn)];
      const start = 2 * Math.PI * mode.frequency_Hz * this.time.first_s;
      const size = Math.exp(-mode.decay_per_s * this.time.first_s);
      let [c, s] = [size * Math.cos(start), size * Math.sin(start)];
      for (let i = 0; i < count; i++) {
        const at = i * this.columns + (m === 0 ? LOW : HIGH);
        wave[at] = c;
        wave[at + 1] = s;
        if (m === 0) {
          wave[at + 2] = (c * i) / count;
          wave[at + 3] = (s * i) / count;
        }
        [c, s] = [c * re - s * im, s * re + c * im];
      }
    });
    return wave;
  }

  /** Weak beliefs that keep short stretches tame: precision σ²/s² of each coefficient. */
  private makePrior(amplitude: number, noise: number): Float64Array {
    const prior = new Float64Array(this.columns);
    const span_s = this.blocks.count * this.time.step_s;
    const precision = (spread: number) => (noise / spread) ** 2;
    prior[0] = precision(amplitude);
    prior[1] = prior[2] = precision(0.1 * amplitude);
    const lean = this.modes[0].decay_per_s * span_s * 0.3 * amplitude;
    for (let c = LOW; c < this.columns; c++) {
      const leans = c === LOW + 2 || c === LOW + 3;
      prior[c] = precision(leans ? Math.max(lean, 0.01 * amplitude) : 5 * amplitude);
    }
    return prior;
  }

  /** Sums a boundary: upper triangle of the Gram matrix, right side, Σ value², blocks. */
  private accumulate(): void {
    const { segments } = this.blocks;
    const size = (this.columns * (this.columns + 1)) / 2 + this.columns + 2;
    const between = this.boundaries.slice(1).map(() => new Float64Array(size));
    let segment = 0;
    for (let k = 0; k < between.length; k++)
      for (let i = this.boundaries[k]; i < this.boundaries[k + 1]; i++) {
        while (segment < segments.length && segments[segment + 1] <= i) segment += 2;
        if (segment < segments.length && i >= segments[segment]) this.add(between[k], i);
      }
    this.left.push(...running(between, size));
    this.right.push(...running(between.toReversed(), size).toReversed());
  }

  private add(sums: Float64Array, i: number): void {
    const n = this.columns;
    const at = i * n;
    const value = this.blocks.values[i];
    let k = 0;
    for (let r = 0; r < n; r++) {
      const w = this.wave[at + r];
      for (let c = 0; c <= r; c++) sums[k++] += w * this.wave[at + c];
    }
    for (let c = 0; c < n; c++) sums[k++] += value * this.wave[at + c];
    sums[k++] += value * value;
    sums[k] += 1;
  }

  private solve(sums: Float64Array): StretchFit {
    const { cost, blocks } = this.costOf(sums);
    if (!this.definite) return { cost, blocks, coefficients: new Float64Array(this.columns) };
    const coefficients = this.halfway.slice();
    solveUpper(this.gram, this.columns, coefficients);
    return { cost, blocks, coefficients };
  }

  /** The cost alone: Σ value² − ‖L⁻¹·r‖², r the right side. Leaves L and L⁻¹·r behind. */
  private costOf(sums: Float64Array): StretchCost {
    const n = this.columns;
    const { gram, halfway } = this;
    let k = 0;
    for (let r = 0; r < n; r++) for (let c = 0; c <= r; c++) gram[r * n + c] = sums[k++];
    for (let c = 0; c < n; c++) gram[c * n + c] += this.prior[c];
    let cost = sums[k + n];
    const blocks = sums[k + n + 1];
    this.definite = factor(gram, n);
    if (!this.definite) return { cost, blocks };
    halfway.set(sums.subarray(k, k + n));
    solveLower(gram, n, halfway);
    for (let r = 0; r < n; r++) cost -= halfway[r] * halfway[r];
    return { cost: Math.max(0, cost), blocks };
  }
}

/** Sums of none, the first, the first two … of `parts`. */
function running(parts: Float64Array[], size: number): Float64Array[] {
  const sums = [new Float64Array(size)];
  for (const part of parts) {
    const next = sums[sums.length - 1].slice();
    for (let j = 0; j < size; j++) next[j] += part[j];
    sums.push(next);
  }
  return sums;
}
