/**
 * Inner products of the model's columns over the blocks' segments. Columns: per mode e·cos, e·sin,
 * i·e·cos, i·e·sin with e = exp(−decay·i) and i the block number, then i^0 … i^degree of the baseline.
 */
import { addExponentialSums } from "../numeric/exponential-sums.ts";
import type { Blocks } from "./blocks.ts";

/** Decay and angular frequency per block. */
export interface Mode {
  decay: number;
  omega: number;
}

export class Gram {
  columns = 0;
  /** columns², symmetric, row-major. */
  matrix = new Float64Array(0);
  /** Inner products of the columns with the data. */
  data = new Float64Array(0);
  /** Blocks, decay and frequency each mode was last projected with: modes held fixed need no second pass. */
  private readonly projected: number[] = [];
  private readonly pRe = new Float64Array(7);
  private readonly pIm = new Float64Array(7);
  private readonly qRe = new Float64Array(7);
  private readonly qIm = new Float64Array(7);

  fill(blocks: Blocks, modes: Mode[], degree: number): void {
    this.columns = 4 * modes.length + degree + 1;
    if (this.matrix.length !== this.columns ** 2) {
      this.matrix = new Float64Array(this.columns ** 2);
      this.data = new Float64Array(this.columns);
      this.projected.length = 0;
    }
    for (let m = 0; m < modes.length; m++) {
      for (let n = m; n < modes.length; n++) this.modePair(blocks, modes, m, n);
      this.modeBaseline(blocks, modes, m, degree);
      if (this.isNew(blocks, modes[m], 3 * m)) this.project(blocks, modes[m], 4 * m);
    }
    this.baseline(blocks, 4 * modes.length, degree);
  }

  private set(row: number, column: number, value: number): void {
    this.matrix[row * this.columns + column] = value;
    this.matrix[column * this.columns + row] = value;
  }

  private sums(
    blocks: Blocks,
    re: number,
    im: number,
    powers: number,
    outRe: Float64Array,
    outIm: Float64Array,
  ) {
    outRe.fill(0);
    outIm.fill(0);
    const { segments } = blocks;
    for (let s = 0; s < segments.length; s += 2)
      addExponentialSums(re, im, segments[s], segments[s + 1], powers, outRe, outIm);
  }

  private modePair(blocks: Blocks, modes: Mode[], m: number, n: number): void {
    const re = -modes[m].decay - modes[n].decay;
    this.sums(blocks, re, modes[m].omega - modes[n].omega, 2, this.pRe, this.pIm);
    this.sums(blocks, re, modes[m].omega + modes[n].omega, 2, this.qRe, this.qIm);
    const row = 4 * m;
    const column = 4 * n;
    for (let j = 0; j < 2; j++)
      for (let k = 0; k < 2; k++) {
        const power = j + k;
        const p = this.pRe[power];
        const q = this.qRe[power];
        const pi = this.pIm[power];
        const qi = this.qIm[power];
        this.set(row + 2 * j, column + 2 * k, (p + q) / 2);
        this.set(row + 2 * j + 1, column + 2 * k + 1, (p - q) / 2);
        this.set(row + 2 * j, column + 2 * k + 1, (qi - pi) / 2);
        this.set(row + 2 * j + 1, column + 2 * k, (qi + pi) / 2);
      }
  }

  private modeBaseline(blocks: Blocks, modes: Mode[], m: number, degree: number): void {
    if (degree < 0) return;
    this.sums(blocks, -modes[m].decay, modes[m].omega, degree + 1, this.pRe, this.pIm);
    const base = 4 * modes.length;
    for (let k = 0; k <= degree; k++)
      for (let j = 0; j < 2; j++) {
        this.set(4 * m + 2 * j, base + k, this.pRe[j + k]);
        this.set(4 * m + 2 * j + 1, base + k, this.pIm[j + k]);
      }
  }

  private baseline(blocks: Blocks, base: number, degree: number): void {
    if (degree < 0) return;
    this.sums(blocks, 0, 0, 2 * degree, this.pRe, this.pIm);
    for (let j = 0; j <= degree; j++) {
      for (let k = j; k <= degree; k++) this.set(base + j, base + k, this.pRe[j + k]);
      this.data[base + j] = blocks.moments[j];
    }
  }

  private isNew({ serial }: Blocks, { decay, omega }: Mode, at: number): boolean {
    const { projected } = this;
    if (projected[at] === serial && projected[at + 1] === decay && projected[at + 2] === omega) return false;
    projected[at] = serial;
    projected[at + 1] = decay;
    projected[at + 2] = omega;
    return true;
  }

  /** Inner products with one mode's four columns. */
  private project(blocks: Blocks, mode: Mode, at: number): void {
    const { values, segments } = blocks;
    const e = Math.exp(-mode.decay);
    const zRe = e * Math.cos(mode.omega);
    const zIm = e * Math.sin(mode.omega);
    this.data.fill(0, at, at + 4);
    for (let s = 0; s < segments.length; s += 2) {
      const from = segments[s];
      horner(values, from, segments[s + 1], zRe, zIm, sums);
      const [re, im, slopeRe, slopeIm] = sums;
      // Counted from block 0 instead of `from`.
      const turnedRe = slopeRe + from * re;
      const turnedIm = slopeIm + from * im;
      const magnitude = Math.exp(-mode.decay * from);
      const c = magnitude * Math.cos(mode.omega * from);
      const d = magnitude * Math.sin(mode.omega * from);
      this.data[at] += c * re - d * im;
      this.data[at + 1] += c * im + d * re;
      this.data[at + 2] += c * turnedRe - d * turnedIm;
      this.data[at + 3] += c * turnedIm + d * turnedRe;
    }
  }
}

const sums = new Float64Array(4);

/**
 * Σ y·z^k and Σ k·y·z^k over y[from … to), k counted from `from`, by Horner's scheme from the end. Even
 * and odd samples go separately (powers of z²): two short chains of dependent sums instead of a long one.
 */
function horner(
  y: Float64Array,
  from: number,
  to: number,
  zRe: number,
  zIm: number,
  out: Float64Array,
): void {
  const pairs = (to - from) >> 1;
  const wRe = zRe * zRe - zIm * zIm;
  const wIm = 2 * zRe * zIm;
  let a = 0;
  let aj = 0;
  let da = 0;
  let daj = 0;
  let b = 0;
  let bj = 0;
  let db = 0;
  let dbj = 0;
  if ((to - from) & 1) a = y[to - 1];
  for (let i = from + 2 * pairs - 2; i >= from; i -= 2) {
    const da1 = da * wRe - daj * wIm + a;
    daj = da * wIm + daj * wRe + aj;
    da = da1;
    const db1 = db * wRe - dbj * wIm + b;
    dbj = db * wIm + dbj * wRe + bj;
    db = db1;
    const a1 = a * wRe - aj * wIm + y[i];
    aj = a * wIm + aj * wRe;
    a = a1;
    const b1 = b * wRe - bj * wIm + y[i + 1];
    bj = b * wIm + bj * wRe;
    b = b1;
  }
  // Σ 2k·y·w^k = 2·w·d; the odd ones count one more and carry one z more.
  const ea = 2 * (da * wRe - daj * wIm);
  const eaj = 2 * (da * wIm + daj * wRe);
  const eb = 2 * (db * wRe - dbj * wIm) + b;
  const ebj = 2 * (db * wIm + dbj * wRe) + bj;
  out[0] = a + b * zRe - bj * zIm;
  out[1] = aj + b * zIm + bj * zRe;
  out[2] = ea + eb * zRe - ebj * zIm;
  out[3] = eaj + eb * zIm + ebj * zRe;
}
