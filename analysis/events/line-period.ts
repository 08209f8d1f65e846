import { makeBlocks } from "../ring/blocks.ts";
import { strongestLines } from "../ring/start.ts";

/**
 * Period in samples of the strongest line of samples[from … to), looked at in means of `width`, with at
 * least so many cycles and so much energy (amplitude² · samples / 2); null without one.
 */
export function linePeriod(
  samples: Float64Array,
  from: number,
  to: number,
  width: number,
  cycles: number,
  energy: number,
): number | null {
  const blocks = makeBlocks(samples, from, to, [], width);
  const [line] = strongestLines(blocks.values, blocks.count, 1, cycles);
  return line && line.energy > energy / width ? ((2 * Math.PI) / line.omega) * width : null;
}
