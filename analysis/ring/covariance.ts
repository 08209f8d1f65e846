/**
 * Covariance of a ring's parameters: the inverse of J'J with J by frequency, decay and the amplitudes
 * (Yao & Pandit, IEEE Trans. SP 43(4), 1995), times the noise. Frequencies and decays per second,
 * amplitudes at the window's first sample.
 */
import { inverse } from "../numeric/cholesky.ts";
import { blockGain, type Blocks } from "./blocks.ts";
import type { FittedMode } from "./fit-format.ts";
import { Gram } from "./gram.ts";
import type { Solution } from "./solve.ts";

/** Model amplitudes at the first sample, from those at the first block mean: A = A_block / gain. */
export function toModes(blocks: Blocks, solution: Solution, step_s: number): FittedMode[] {
  const blockStep = step_s * blocks.decimation;
  return solution.modes.map(({ omega, decay }, m) => {
    const [gainRe, gainIm] = blockGain(
      -decay / blocks.decimation,
      omega / blocks.decimation,
      blocks.decimation,
    );
    const a = solution.linear[2 * m];
    const b = -solution.linear[2 * m + 1];
    const norm = gainRe * gainRe + gainIm * gainIm;
    return {
      frequency_Hz: omega / (2 * Math.PI * blockStep),
      decay_per_s: decay / blockStep,
      cosine: (a * gainRe + b * gainIm) / norm,
      sine: -(b * gainRe - a * gainIm) / norm,
    };
  });
}

/**
 * (4·modes)² for unit noise variance of a block, row-major, order per mode frequency_Hz, decay_per_s,
 * cosine, sine; the baseline is eliminated. Null where the parameters are not independent.
 */
export function unitCovariance(
  blocks: Blocks,
  solution: Solution,
  modes: FittedMode[],
  step_s: number,
): Float64Array | null {
  const gram = new Gram();
  gram.fill(blocks, solution.modes, solution.degree);
  const width = gram.columns;
  const count = modes.length;
  // Rows of T: each parameter's derivative column as a combination of Gram's columns.
  const transform = new Float64Array(width * width);
  for (let m = 0; m < count; m++) writeMode(transform, width, m, blocks, solution, step_s);
  for (let k = 4 * count; k < width; k++) transform[k * width + k] = 1;
  const information = new Float64Array(width * width);
  const half = new Float64Array(width * width);
  for (let r = 0; r < width; r++)
    for (let c = 0; c < width; c++) {
      let s = 0;
      for (let k = 0; k < width; k++) s += transform[r * width + k] * gram.matrix[k * width + c];
      half[r * width + c] = s;
    }
  for (let r = 0; r < width; r++)
    for (let c = 0; c < width; c++) {
      let s = 0;
      for (let k = 0; k < width; k++) s += half[r * width + k] * transform[c * width + k];
      information[r * width + c] = s;
    }
  const full = inverse(information, width);
  if (!full) return null;
  const size = 4 * count;
  const out = new Float64Array(size * size);
  for (let r = 0; r < size; r++) for (let c = 0; c < size; c++) out[r * size + c] = full[r * width + c];
  return out;
}

/**
 * With A = cosine − j·sine, y = Re[A·gain(s)·z^i], z = e^(s·D): by A the columns gain·z^i, by s (per
 * sample) A·gain·(D·i + gain'/gain)·z^i; then s = (−decay + jω)·step_s.
 */
function writeMode(
  out: Float64Array,
  width: number,
  m: number,
  blocks: Blocks,
  solution: Solution,

  step_s: number,
): void {
  const d = blocks.decimation;
  const { omega, decay } = solution.modes[m];
  const [gainRe, gainIm, slopeRe, slopeIm] = blockGain(-decay / d, omega / d, d);
  const a = solution.linear[2 * m];
  const b = -solution.linear[2 * m + 1];
  const at = 4 * m;
  const offsetRe = a * slopeRe - b * slopeIm;
  const offsetIm = a * slopeIm + b * slopeRe;
  // Re[(x + j·y)·z^i] = x·(e cos) − y·(e sin).
  const put = (row: number, x: number, y: number, x1: number, y1: number) => {
    const base = row * width + at;
    out[base] = x;
    out[base + 1] = -y;
    out[base + 2] = x1;
    out[base + 3] = -y1;
  };
  const perHertz = 2 * Math.PI * step_s;
  put(at, -offsetIm * perHertz, offsetRe * perHertz, -b * d * perHertz, a * d * perHertz);
  put(at + 1, -offsetRe * step_s, -offsetIm * step_s, -a * d * step_s, -b * d * step_s);
  put(at + 2, gainRe, gainIm, 0, 0);
  put(at + 3, gainIm, -gainRe, 0, 0);
}
