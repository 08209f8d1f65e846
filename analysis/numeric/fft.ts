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
  for (let half = 1; half < n; half *= 2) {
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

/**
 * |X_k|² for k = 0 … n/2 of the first `count` values (zero beyond), n a power of two ≥ 4, count ≤ n.
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
export const powerOfTwo = (n: number): number => 2 ** Math.ceil(Math.log2(Math.max(4, n)));
