import type { RawChannel } from "./channel.ts";
import type { RecordTime } from "./time-base.ts";

/** Every time stands twice: the lowest and the highest of each interval. One channel becomes two. */
export function envelopeChannels(channels: RawChannel[], { from, to, reversed }: RecordTime): RawChannel[] {
  return channels.flatMap((raw, i) => {
    const samples = (to - from) / 2;
    const low = new Float64Array(samples);
    const high = new Float64Array(samples);
    for (let k = 0; k < samples; k++) {
      const [a, b] = [raw.values[from + 2 * k], raw.values[from + 2 * k + 1]];
      low[k] = Math.min(a, b);
      high[k] = Math.max(a, b);
    }
    const name = raw.name.name || String(raw.position + 1);
    return [
      { ...raw, position: 2 * i, name: { ...raw.name, name: `${name} low` }, values: inTime(low, reversed) },
      {
        ...raw,
        position: 2 * i + 1,
        name: { ...raw.name, name: `${name} high` },
        values: inTime(high, reversed),
      },
    ];
  });
}

const inTime = (values: Float64Array, reversed: boolean) => (reversed ? values.toReversed() : values);
