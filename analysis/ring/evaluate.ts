/** The model's values by recurrence: no sine, cosine or exponential per sample. */
import type { Blocks } from "./blocks.ts";
import type { FittedMode } from "./fit-format.ts";
import type { Solution } from "./solve.ts";

/** Restart the recurrence this often, so that rounding cannot add up. */
const RESTART = 2048;

/** out[k] += Σ modes at sample `first` + k, the modes' t = 0 being at sample 0. */
export function addModes(
  modes: FittedMode[],
  step_s: number,
  first: number,
  count: number,
  out: Float64Array,
  sign = 1,
): void {
  for (const mode of modes)
    addWave(
      mode.decay_per_s * step_s,
      2 * Math.PI * mode.frequency_Hz * step_s,
      sign * mode.cosine,
      sign * mode.sine,
      first,
      count,
      out,
    );
}

function addWave(
  decay: number,
  omega: number,
  cosine: number,
  sine: number,
  first: number,
  count: number,
  out: Float64Array,
): void {
  const e = Math.exp(-decay);
  const zRe = e * Math.cos(omega);
  const zIm = e * Math.sin(omega);
  const wRe = zRe * zRe - zIm * zIm;
  const wIm = 2 * zRe * zIm;
  for (let start = 0; start < count; start += RESTART) {
    const i = first + start;
    const magnitude = Math.exp(-decay * i);
    const c = magnitude * Math.cos(omega * i);
    const s = magnitude * Math.sin(omega * i);
    // Re[(cosine − j·sine)·z^i]
    let re = cosine * c + sine * s;
    let im = cosine * s - sine * c;
    // Even and odd samples in turns of z²: two chains that need not wait for each other.
    let oddRe = re * zRe - im * zIm;
    let oddIm = re * zIm + im * zRe;
    const end = Math.min(count, start + RESTART);
    for (let k = start; k + 1 < end; k += 2) {
      out[k] += re;
      out[k + 1] += oddRe;
      const turned = re * wRe - im * wIm;
      im = re * wIm + im * wRe;
      re = turned;
      const turnedOdd = oddRe * wRe - oddIm * wIm;
      oddIm = oddRe * wIm + oddIm * wRe;
      oddRe = turnedOdd;
    }
    if ((end - start) & 1) out[end - 1] += re;
  }
}

/** out[k] = Σ baseline[j]·((first + k)/length)^j. */
export function baselineInto(
  baseline: number[],
  length: number,
  first: number,
  count: number,
  out: Float64Array,
): void {
  for (let k = 0; k < count; k++) {
    const x = (first + k) / length;
    let value = 0;
    for (let j = baseline.length - 1; j >= 0; j--) value = value * x + baseline[j];
    out[k] = value;
  }
}

/** Blocks less the model; 0 in unusable blocks. Answers the residual sum of squares. */
export function residualBlocks(blocks: Blocks, solution: Solution, out: Float64Array): number {
  const { segments, values, count } = blocks;
  out.fill(0, 0, count);
  const { degree, linear, modes } = solution;
  const base = 2 * modes.length;
  for (let i = 0; i < count; i++) {
    let value = 0;
    for (let j = degree; j >= 0; j--) value = value * i + linear[base + j];
    out[i] = -value;
  }
  modes.forEach(({ decay, omega }, m) =>
    addWave(decay, omega, -linear[2 * m], -linear[2 * m + 1], 0, count, out),
  );
  let sum = 0;
  let at = 0;
  for (let s = 0; s < segments.length; s += 2) {
    out.fill(0, at, segments[s]);
    for (let i = segments[s]; i < segments[s + 1]; i++) {
      const r = (out[i] += values[i]);
      sum += r * r;
    }
    at = segments[s + 1];
  }
  out.fill(0, at, count);
  return sum;
}
