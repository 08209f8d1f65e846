/** Discrete Fourier transform of real data of a power-of-two length, with tables and buffers kept. */

interface Plan {
  cos: Float64Array;
  sin: Float64Array;
  reversed: Uint32Array;
  re: Float64Array;
  im: Float64Array;
}
const plans = new Map<number, Plan>();

function planOf(n: number): Plan {
  let plan = plans.get(n);
  if (plan) return plan;
  const cos = new Float64Array(n / 2);
  const sin = new Float64Array(n / 2);
  for (let k = 0; k < n / 2; k++) {
    cos[k] = Math.cos((2 * Math.PI * k) / n);
    sin[k] = -Math.sin((2 * Math.PI * k) / n);
  }
  const reversed = new Uint32Array(n);
  for (let i = 1; i < n; i++) reversed[i] = (reversed[i >> 1] >> 1) | (i & 1 ? n >> 1 : 0);
  plan = { cos, sin, reversed, re: new Float64Array(n), im: new Float64Array(n) };
  plans.set(n, plan);
  return plan;
}

/** In place, radix 2, decimation in time; re and im of length n in bit-reversed order. */
function transform({ cos, sin, re, im }: Plan, n: number): void {
  firstTwoStages(re, im, n);
  for (let half = 4; half < n; half *= 2) {
    const stride = n / (2 * half);
    for (let start = 0; start < n; start += 2 * half)
      for (let k = 0, t = 0; k < half; k++, t += stride) {
        const a = start + k;
        const b = a + half;
        const r = re[b] * cos[t] - im[b] * sin[t];
        const i = re[b] * sin[t] + im[b] * cos[t];
        re[b] = re[a] - r;
        im[b] = im[a] - i;
        re[a] += r;
        im[a] += i;
      }
  }
}

/** The stages whose factors are 1 and −j only. n is at least 4. */
function firstTwoStages(re: Float64Array, im: Float64Array, n: number): void {
  for (let i = 0; i < n; i += 4) {
    const a = re[i] + re[i + 1];
    const aj = im[i] + im[i + 1];
    const b = re[i] - re[i + 1];
    const bj = im[i] - im[i + 1];
    const c = re[i + 2] + re[i + 3];
    const cj = im[i + 2] + im[i + 3];
    const d = re[i + 2] - re[i + 3];
    const dj = im[i + 2] - im[i + 3];
    re[i] = a + c;
    im[i] = aj + cj;
    re[i + 1] = b + dj;
    im[i + 1] = bj - d;
    re[i + 2] = a - c;
    im[i + 2] = aj - cj;
    re[i + 3] = b - dj;
    im[i + 3] = bj + d;
  }
}

/**
 * |X_k|² for k = 0 … n/2 of the first `count` values (zero beyond), n a power of two ≥ 8, count ≤ n.
 * The real data are folded into a complex transform of half the length.
 */
export function powerSpectrum(values: Float64Array, count: number, n: number, out: Float64Array): void {
  const h = n / 2;
  const plan = planOf(h);
  const full = planOf(n);
  const { re, im, reversed } = plan;
  for (let i = 0; i < h; i++) {
    const at = reversed[i];
    re[at] = 2 * i < count ? values[2 * i] : 0;
    im[at] = 2 * i + 1 < count ? values[2 * i + 1] : 0;
  }
  transform(plan, h);
  for (let k = 0; k <= h; k++) {
    const a = k % h;
    const b = (h - k) % h;
    const evenRe = (re[a] + re[b]) / 2;
    const evenIm = (im[a] - im[b]) / 2;
    const oddRe = (im[a] + im[b]) / 2;
    const oddIm = (re[b] - re[a]) / 2;
    const c = k < h ? full.cos[k] : -1;
    const s = k < h ? full.sin[k] : 0;
    const r = evenRe + oddRe * c - oddIm * s;
    const i = evenIm + oddRe * s + oddIm * c;
    out[k] = r * r + i * i;
  }
}

/** Smallest power of two ≥ n. */
export const powerOfTwo = (n: number): number => 2 ** Math.ceil(Math.log2(Math.max(8, n)));
