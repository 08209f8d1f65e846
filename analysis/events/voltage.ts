/** Switch-offs from a voltage trace: onsets of the kick's own direction out of the conduction level. */
import { medianOf } from "../numeric/robust.ts";
import { conductionStart } from "./conduction.ts";
import type { SwitchOff } from "./event-format.ts";
import { findOnsets, type Onset } from "./onsets.ts";
import { scaleOf } from "./scale.ts";

/** Onsets against the kick's direction must be this large against it to be pulses of their own. */
const OPPOSITE_SHARE = 0.6;

export function voltageSwitchOffs(
  samples: Float64Array,
  lsb: number | null,
): { offs: SwitchOff[]; period: number } {
  const scale = scaleOf(samples);
  if (!scale) return { offs: [], period: 0 };
  const onsets = outOfConduction(findOnsets(samples, scale, lsb), lsb);
  const width = Math.max(2, Math.round(scale.period / 8));
  const offs: SwitchOff[] = onsets.map((onset, k) => {
    const previous = k > 0 ? onsets[k - 1].at : 0;
    const back = k > 0 ? Math.ceil(previous + scale.period / 4) : 0;
    const tolerance = toleranceOf(onset, lsb, width);
    const start = conductionStart(samples, onset.at, back, onset.level, onset.slope, tolerance, width);
    return {
      at: onset.at,
      u: onset.u,
      on: start !== null && start > back ? start : null,
      freeFrom: Math.max(0, Math.ceil(onset.at)),
      freeTo: samples.length,
      polarity: onset.polarity,
      levelOn: onset.level,
    };
  });
  for (let k = 0; k < offs.length; k++) offs[k].freeTo = freeEnd(samples, offs, onsets, k, lsb, width);
  return { offs, period: scale.period };
}

const toleranceOf = (onset: Onset, lsb: number | null, width: number) =>
  Math.max((5 * onset.scatter) / Math.sqrt(width), 0.6 * (lsb ?? 0), 1e-3 * Math.abs(onset.swing));

/** Next switching edge: the next pulse's conduction, or a conduction that runs to the record's end. */
function freeEnd(
  samples: Float64Array,
  offs: SwitchOff[],
  onsets: Onset[],
  k: number,
  lsb: number | null,
  width: number,
): number {
  const next = offs[k + 1];
  if (next) return Math.floor(next.on ?? next.at!);
  const onset = onsets[k];
  const off = Math.ceil(onset.at) + width;
  const start = conductionStart(
    samples,
    samples.length,
    off,
    onset.level,
    0,
    toleranceOf(onset, lsb, width),
    width,
  );
  if (start === null || start <= off || samples.length - start < 2 * width) return samples.length;
  // Without a step there, the ring has merely settled to where it was before.
  const before = medianOf(samples, Math.max(off, Math.floor(start) - 3 * width), Math.floor(start) - 1);
  const stepped = Math.abs(before - onset.level) > 3 * toleranceOf(onset, lsb, width);
  return stepped ? Math.floor(start) : samples.length;
}

function outOfConduction(onsets: Onset[], lsb: number | null): Onset[] {
  if (onsets.length === 0) return onsets;
  const largest = onsets.reduce((a, b) => (Math.abs(b.swing) > Math.abs(a.swing) ? b : a));
  const reach = Math.abs(largest.swing);
  const own = onsets.filter(
    (onset) => onset.polarity === largest.polarity || Math.abs(onset.swing) > OPPOSITE_SHARE * reach,
  );
  const level = medianOf(
    own.filter((onset) => Math.abs(onset.swing) > 0.5 * reach).map((onset) => onset.level),
  );
  return own.filter(
    (onset) => Math.abs(onset.level - level) < Math.max(6 * onset.scatter, 2 * (lsb ?? 0), 0.1 * reach),
  );
}
