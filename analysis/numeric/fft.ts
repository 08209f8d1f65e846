import fili from "fili";

const { Fft } = fili;
const transforms = new Map<number, InstanceType<typeof Fft>>();
const buffers = new Map<number, Float64Array>();

/**
 * |X_k|² for k = 0 … n/2 of the first `count` values (zero beyond), n a power of two ≥ 8, count ≤ n.
 * The transform keeps its tables and arrays from call to call.
 */
export function powerSpectrum(values: Float64Array, count: number, n: number, out: Float64Array): void {
  const transform = transforms.get(n) ?? new Fft(n);
  const padded = buffers.get(n) ?? new Float64Array(n);
  transforms.set(n, transform);
  buffers.set(n, padded);
  padded.set(values.subarray(0, count));
  padded.fill(0, count);
  const { re, im } = transform.forward(padded, "none");
  for (let k = 0; k <= n / 2; k++) out[k] = re[k] * re[k] + im[k] * im[k];
}

/** Smallest power of two ≥ n. */
export const powerOfTwo = (n: number): number => 2 ** Math.ceil(Math.log2(Math.max(8, n)));
