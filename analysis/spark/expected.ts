/** The waveform a pulse would have shown without a spark, as far as it can be known. */
import type { Judged } from "./judge.ts";
import { nearest } from "./reference.ts";
import type { SparkWindow } from "./window.ts";

export interface Expected {
  /** In the pulse's own blocks, level removed alike. */
  values: Float64Array;
  /** First block the expectation speaks for. */
  from: number;
  /** Share of its size that it may be wrong by. */
  slack: number;
  /** Level the ring settles to, in the same blocks. */
  settled: number;
}

/** Quiet pulses averaged for the expectation. */
const MODELS = 4;

/** From the ring before the disturbance, else from quiet pulses of the run; null with neither. */
/** `quiet`: ascending places in `run` of the pulses taken for quiet. */
export function expectedOf(
  judged: Judged,
  run: { judged: Judged; window: SparkWindow }[],
  quiet: number[],
  place: number,
  window: SparkWindow,
): Expected | null {
  const { traits } = judged;
  const { count } = window.blocks;
  if (traits.ringBefore) {
    const { coefficients } = traits.split.before;
    const values = Float64Array.from({ length: count }, (_, i) => traits.sums.value(coefficients, i));
    return {
      values,
      from: Math.max(0, traits.a - Math.round(window.period)),
      slack: 0,
      settled: traits.split.after.coefficients[0],
    };
  }
  const rest = judged.quietRest;
  if (!rest) return null;
  const models = nearest(quiet, place, 2 * MODELS)
    .map((i) => run[i])
    .filter((other) => other.judged.traits.modes === traits.modes)
    .slice(0, MODELS);
  if (models.length === 0) return null;
  const values = new Float64Array(count);
  for (const model of models) addModel(values, model, window, rest, models.length);
  // Before a model's own first block there is nothing to go by.
  const starts = models.map((model) => Math.ceil((model.window.first_s - window.first_s) / window.step_s));
  return { values, from: Math.max(0, ...starts), slack: 0.02, settled: traits.split.after.coefficients[0] };
}

/** The other pulse's own blocks, read between its block centres, scaled to this pulse's place in the train. */
function addModel(
  values: Float64Array,
  { judged, window: other }: { judged: Judged; window: SparkWindow },
  window: SparkWindow,
  rest: [number, number],
  share: number,
): void {
  const own = judged.traits.rest;
  const scale = own ? Math.hypot(...rest) / Math.hypot(...own) : 1;
  const { blocks } = other;
  const settled = judged.traits.split.whole.coefficients[0];
  for (let i = 0; i < values.length; i++) {
    const at = (window.first_s + i * window.step_s - other.first_s) / other.step_s;
    const left = Math.min(blocks.count - 2, Math.max(0, Math.floor(at)));
    const part = Math.min(1, Math.max(0, at - left));
    const value = blocks.values[left] * (1 - part) + blocks.values[left + 1] * part;
    values[i] += (settled + scale * (value - settled) + other.blocks.level - window.blocks.level) / share;
  }
}
