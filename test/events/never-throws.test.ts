import { expect, it } from "vitest";
import type { ChannelRole } from "../../analysis/capture.ts";
import { coilFromCaptures } from "../../analysis/coil/line.ts";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, channelOf } from "../reference/captures.ts";
import { seeded, type Random } from "../reference/random.ts";

const roles: ChannelRole[] = [
  "switch-node",
  "coil-voltage",
  "coil-current",
  "gate",
  "secondary",
  "supply",
  "other",
];

/** Pieces of everything a trace can be, blanks and infinities among them. */
function junk(random: Random): Float64Array {
  const length = random.pick([0, 1, 2, 3, 7, 12, 40, 300, 2500]);
  const out = new Float64Array(length);
  let at = 0;
  while (at < length) {
    const end = Math.min(length, at + 1 + Math.floor(random.uniform() * length));
    const kind = Math.floor(random.uniform() * 8);
    const size = 10 ** random.between(-6, 6);
    const rate = random.between(0.001, 3);
    for (let i = at; i < end; i++)
      out[i] = [
        0,
        size,
        NaN,
        Infinity,
        size * random.normal(),
        size * Math.sin(rate * i),
        size * Math.exp((at - i) * 0.02) * Math.cos(rate * i),
        i % 2 ? size : -Infinity,
      ][kind];
    at = end;
  }
  return out;
}

it("600 records of junk: never an exception, never a figure that is not a number", () => {
  for (let seed = 0; seed < 600; seed++) {
    const random = seeded(seed);
    const first = junk(random);
    const channels = [channelOf(random.pick(roles), "V", first, random.pick([null, 0.1]))];
    if (random.uniform() < 0.4)
      channels.push(channelOf(random.pick(roles), "A", junk(random).slice(0, first.length), null));
    while (channels.at(-1)!.samples.length < first.length) channels.pop();
    const setup = random.pick([
      {},
      { capacitor_F: 1e-7, supply_V: 12, switchRating_V: 400 },
      { knownInductance_H: 1e-3 },
    ]);
    const { reading } = readCapture(captureOf(channels, 1e-6), setup);
    const coil = coilFromCaptures([reading], [setup]);
    const wrong: string[] = [];
    JSON.stringify([reading.pulses, reading.combined, reading.ramp, coil], (key, value) => {
      if (typeof value === "number" && !Number.isFinite(value)) wrong.push(key);
      return value;
    });
    expect(wrong, `seed ${seed}`).toEqual([]);
  }
});
