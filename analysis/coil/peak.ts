/** The kick's first peak on the trace: value, place, clipped or not. */
import type { Channel } from "../capture.ts";
import type { PulseEvidence } from "../evidence.ts";

/** Largest excursion in kick direction (from `level`) within about one and a half periods of the switch-off. */
export function findKick(
  channel: Channel,
  from: number,
  to: number,
  polarity: 1 | -1,
  period: number,
): PulseEvidence["kick"] {
  const end = Math.min(to, from + Math.max(8, Math.ceil(1.5 * period)));
  let best = -1;
  for (let i = Math.max(0, from - 1); i < end; i++) {
    const y = channel.samples[i];
    if (Number.isFinite(y) && (best < 0 || polarity * y > polarity * channel.samples[best])) best = i;
  }
  if (best < 0) return null;
  return {
    index: best,
    value: smoothed(channel.samples, best, period),
    clipped: clippedAt(channel, from, end),
  };
}

/** Mean over a fortieth of a period about the peak: noise less, curvature lost 0.1 %. */
function smoothed(samples: Float64Array, at: number, period: number): number {
  const half = Math.floor(period / 80);
  let sum = 0;
  let count = 0;
  for (let i = at - half; i <= at + half; i++)
    if (Number.isFinite(samples[i])) {
      sum += samples[i];
      count++;
    }
  return count > 0 ? sum / count : samples[at];
}

function clippedAt(channel: Channel, from: number, to: number): boolean {
  if (channel.overrange === 0) return false;
  const { unusable } = channel;
  for (let u = 0; u < unusable.length; u += 2) if (unusable[u] < to && unusable[u + 1] > from) return true;
  return false;
}
