/**
 * Power spectra of real values: the even and odd ones are the two parts of a complex sequence of half
 * the length, whose transform is taken apart again (Cooley & Tukey, Math. Comp. 19, 1965; the packing is
 * in Brigham, The Fast Fourier Transform, 1974).
 */

/** Tables and arrays of one length, kept from call to call. */
interface Plan {
  /** Place of value j in bit-reversed order. */
  order: Uint32Array;
  /** cos and sin of 2πk/n, k < n/2. */
  cosine: Float64Array;
  sine: Float64Array;
  re: Float64Array;
  im: Float64Array;
}

const plans = new Map<number, Plan>();

function planOf(n: number): Plan {
  const known = plans.get(n);
  if (known) return known;
  const half = n / 2;
  const order = new Uint32Array(half);
  for (let j = 1; j < half; j++) order[j] = (order[j >> 1] >> 1) | (j & 1 ? half >> 1 : 0);
  const angle = (k: number) => (2 * Math.PI * k) / n;
  const plan = {
    order,
    cosine: Float64Array.from({ length: half }, (_, k) => Math.cos(angle(k))),
    sine: Float64Array.from({ length: half }, (_, k) => Math.sin(angle(k))),
    re: new Float64Array(half),
    im: new Float64Array(half),
  };
  plans.set(n, plan);
  return plan;
}

/** |X_k|² for k = 0 … n/2 of the first `count` values (zero beyond), n a power of two ≥ 8, count ≤ n. */
export function powerSpectrum(values: Float64Array, count: number, n: number, out: Float64Array): void {
  const plan = planOf(n);
  const { order, re, im, cosine, sine } = plan;
  const half = n / 2;
  for (let j = 0; j < half; j++) {
    const at = order[j];
    const i = 2 * j;
    re[at] = i < count ? values[i] : 0;
    im[at] = i + 1 < count ? values[i + 1] : 0;
  }
  transform(plan, half);
  out[0] = (re[0] + im[0]) ** 2;
  out[half] = (re[0] - im[0]) ** 2;
  for (let k = 1, m = half - 1; k <= m; k++, m--) {
    const evenRe = (re[k] + re[m]) / 2;
    const evenIm = (im[k] - im[m]) / 2;
    const oddRe = (im[k] + im[m]) / 2;
    const oddIm = (re[m] - re[k]) / 2;
    const turnedRe = oddRe * cosine[k] + oddIm * sine[k];
    const turnedIm = oddIm * cosine[k] - oddRe * sine[k];
    out[k] = (evenRe + turnedRe) ** 2 + (evenIm + turnedIm) ** 2;
    out[m] = (evenRe - turnedRe) ** 2 + (evenIm - turnedIm) ** 2;
  }
}

/** The `length` complex values in bit-reversed order, transformed in place. */
function transform({ re, im, cosine, sine }: Plan, length: number): void {
  for (let i = 0; i < length; i += 2) {
    const a = re[i];
    const b = im[i];
    re[i] = a + re[i + 1];
    im[i] = b + im[i + 1];
    re[i + 1] = a - re[i + 1];
    im[i + 1] = b - im[i + 1];
  }
  for (let size = 2; size < length; size *= 2) {
    // The tables are those of twice the length: 2π/(2·size) is every length/size-th of them.
    const stride = length / size;
    for (let start = 0; start < length; start += 2 * size)
      for (let i = start, t = 0; i < start + size; i++, t += stride) {
        const j = i + size;
        const c = cosine[t];
        const s = sine[t];
        const x = re[j] * c + im[j] * s;
        const y = im[j] * c - re[j] * s;
        const a = re[i];
        const b = im[i];
        re[j] = a - x;
        im[j] = b - y;
        re[i] = a + x;
        im[i] = b + y;
      }
  }
}

/** Smallest power of two ≥ n. */
export const powerOfTwo = (n: number): number => 2 ** Math.ceil(Math.log2(Math.max(8, n)));
