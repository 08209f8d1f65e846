/**
 * Σ i^k·w^i over a stretch of samples, in closed form: what a Gram matrix of damped sinusoids is made
 * of. By doubling the length, so neither |w| near 1 nor a whole turn of phase loses digits, and the
 * cost grows with the logarithm of the length.
 */

/** Highest power k. */
export const MAX_POWER = 6;
const SIZE = MAX_POWER + 1;

const binomial: number[][] = [];
for (let k = 0; k < SIZE; k++) {
  binomial[k] = [1];
  for (let j = 1; j <= k; j++) binomial[k][j] = (binomial[k - 1][j - 1] ?? 0) + (binomial[k - 1][j] ?? 0);
}

const re = new Float64Array(SIZE);
const im = new Float64Array(SIZE);
const shift = new Float64Array(SIZE);
const nextRe = new Float64Array(SIZE);
const nextIm = new Float64Array(SIZE);

/** next_k = Σ_j C(k,j)·by^(k−j)·s_j, the same sums counted from `by` instead of 0. */
function shiftedBy(by: number, powers: number): void {
  shift[0] = 1;
  for (let k = 1; k <= powers; k++) shift[k] = shift[k - 1] * by;
  for (let k = 0; k <= powers; k++) {
    let r = 0;
    let i = 0;
    const row = binomial[k];
    for (let j = 0; j <= k; j++) {
      const f = row[j] * shift[k - j];
      r += f * re[j];
      i += f * im[j];
    }
    nextRe[k] = r;
    nextIm[k] = i;
  }
}

/** The same for k ≤ 2 without loops: what every pair of modes needs at every step of a fit. */
function addThree(
  wRe: number,
  wIm: number,
  sRe: number,
  sIm: number,
  from: number,
  length: number,
  outRe: Float64Array,
  outIm: Float64Array,
): void {
  let a = 1;
  let aj = 0;
  let b = 0;
  let bj = 0;
  let c = 0;
  let cj = 0;
  let n = 1;
  let p = wRe;
  let pj = wIm;
  for (let bit = 30 - Math.clz32(length); bit >= 0; bit--) {
    const b1 = b + n * a;
    const b1j = bj + n * aj;
    const c1 = c + n * (b + b1);
    const c1j = cj + n * (bj + b1j);
    c += p * c1 - pj * c1j;
    cj += p * c1j + pj * c1;
    b += p * b1 - pj * b1j;
    bj += p * b1j + pj * b1;
    const a0 = a;
    a += p * a - pj * aj;
    aj += p * aj + pj * a0;
    n *= 2;
    const square = p * p - pj * pj;
    pj = 2 * p * pj;
    p = square;
    if ((length >> bit) & 1) {
      a += p;
      aj += pj;
      b += n * p;
      bj += n * pj;
      c += n * n * p;
      cj += n * n * pj;
      n += 1;
      const turned = p * wRe - pj * wIm;
      pj = p * wIm + pj * wRe;
      p = turned;
    }
  }
  const b1 = b + from * a;
  const b1j = bj + from * aj;
  const c1 = c + from * (b + b1);
  const c1j = cj + from * (bj + b1j);
  outRe[0] += sRe * a - sIm * aj;
  outIm[0] += sRe * aj + sIm * a;
  outRe[1] += sRe * b1 - sIm * b1j;
  outIm[1] += sRe * b1j + sIm * b1;
  outRe[2] += sRe * c1 - sIm * c1j;
  outIm[2] += sRe * c1j + sIm * c1;
}

/**
 * Adds Σ_{i=from}^{to−1} i^k·exp((logRe + j·logIm)·i) to outRe[k], outIm[k] for k = 0 … powers
 * (at least 2).
 */
export function addExponentialSums(
  logRe: number,
  logIm: number,
  from: number,
  to: number,
  powers: number,
  outRe: Float64Array,
  outIm: Float64Array,
): void {
  const length = to - from;
  if (length <= 0) return;
  const magnitude = Math.exp(logRe);
  const wRe = magnitude * Math.cos(logIm);
  const wIm = magnitude * Math.sin(logIm);
  const startMagnitude = Math.exp(logRe * from);
  const sRe = startMagnitude * Math.cos(logIm * from);
  const sIm = startMagnitude * Math.sin(logIm * from);
  if (powers <= 2) return addThree(wRe, wIm, sRe, sIm, from, length, outRe, outIm);
  re.fill(0);
  im.fill(0);
  re[0] = 1;
  let n = 1;
  let pRe = wRe;
  let pIm = wIm;
  for (let bit = 30 - Math.clz32(length); bit >= 0; bit--) {
    shiftedBy(n, powers);
    for (let k = 0; k <= powers; k++) {
      re[k] += pRe * nextRe[k] - pIm * nextIm[k];
      im[k] += pRe * nextIm[k] + pIm * nextRe[k];
    }
    n *= 2;
    const square = pRe * pRe - pIm * pIm;
    pIm = 2 * pRe * pIm;
    pRe = square;
    if ((length >> bit) & 1) {
      let power = 1;
      for (let k = 0; k <= powers; k++) {
        re[k] += power * pRe;
        im[k] += power * pIm;
        power *= n;
      }
      n += 1;
      const turned = pRe * wRe - pIm * wIm;
      pIm = pRe * wIm + pIm * wRe;
      pRe = turned;
    }
  }
  if (from !== 0) shiftedBy(from, powers);
  else {
    nextRe.set(re);
    nextIm.set(im);
  }
  for (let k = 0; k <= powers; k++) {
    outRe[k] += sRe * nextRe[k] - sIm * nextIm[k];
    outIm[k] += sRe * nextIm[k] + sIm * nextRe[k];
  }
}
