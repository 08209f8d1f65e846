import { overSamples, type Steps } from "../steps.ts";
import type { RawChannel } from "./channel.ts";
import type { RecordTime } from "./time-base.ts";

/** Every time stands twice: the lowest and the highest of each interval. One channel becomes two. */
export function* envelopeChannels(channels: RawChannel[], time: RecordTime): Steps<RawChannel[]> {
  const split: RawChannel[] = [];
  for (const [i, raw] of channels.entries()) {
    const { low, high } = yield* extremesOfPairs(raw.values, time);
    const name = raw.name.name || String(raw.position + 1);
    const named = (end: string) => ({ ...raw.name, name: `${name} ${end}` });
    split.push({ ...raw, position: 2 * i, name: named("low"), values: low });
    split.push({ ...raw, position: 2 * i + 1, name: named("high"), values: high });
  }
  return split;
}

function* extremesOfPairs(
  values: Float64Array,
  { from, to, reversed }: RecordTime,
): Steps<{ low: Float64Array; high: Float64Array }> {
  const samples = (to - from) / 2;
  const low = new Float64Array(samples);
  const high = new Float64Array(samples);
  yield* overSamples(samples, (first, end) => {
    for (let k = first; k < end; k++) {
      const [a, b] = [values[from + 2 * k], values[from + 2 * k + 1]];
      low[k] = Math.min(a, b);
      high[k] = Math.max(a, b);
    }
  });
  if (reversed) {
    low.reverse();
    high.reverse();
  }
  return { low, high };
}
