/** Value ranges and scales of the panels. */
import type { RingPicture, TraceWindow } from "../../app/bridge.ts";
import type { Span } from "./window.ts";

/** Lowest and highest value in the span; null where there is none. */
export function range(
  traces: Pick<TraceWindow, "time_s" | "low" | "high">[],
  span: Span,
): [number, number] | null {
  let low = Infinity;
  let high = -Infinity;
  for (const trace of traces)
    trace.time_s.forEach((time, at) => {
      if (time < span.from || time > span.to) return;
      low = Math.min(low, trace.low[at] ?? Infinity);
      high = Math.max(high, trace.high[at] ?? -Infinity);
    });
  return low > high ? null : [low, high];
}

/** With some air above and below; a flat trace gets a band about it. */
export function aired([low, high]: [number, number], share = 0.06): [number, number] {
  const air = (high - low) * share || Math.abs(high) * 0.1 || 1;
  return [low - air, high + air];
}

export const asSamples = ({ time_s, value }: { time_s: number[]; value: number[] }) => ({
  time_s,
  low: value,
  high: value,
});

/** Powers of ten that hold the envelope's peaks. */
export function decades(picture: RingPicture): [number, number] {
  const values = [...picture.peaks.value, ...picture.envelope.value].filter((value) => value > 0);
  const highest = Math.max(...values);
  const lowest = Math.max(Math.min(...values), highest / 1e4);
  return [Math.log10(lowest) - 0.1, Math.log10(highest) + 0.1];
}
