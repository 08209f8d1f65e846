/** Which stretch of the record a pulse is shown in, and how it moves. */
import type { CaptureReading, PulseReading } from "../../analysis/reading-format.ts";
import { clamp } from "../draw/scale.ts";

export interface Span {
  from: number;
  to: number;
}

/** The whole record; where the interval is unknown the axis counts samples. */
export function recordSpan({ timebase }: CaptureReading): Span {
  const from = timebase.start_s ?? 0;
  return { from, to: from + (timebase.step_s ?? 1) * Math.max(timebase.samples - 1, 1) };
}

/** From a little before the switch-off until the ring has died or the next pulse begins. */
export function pulseSpan(reading: CaptureReading, pulse: PulseReading): Span {
  const record = recordSpan(reading);
  const start = pulse.switchOffTime_s ?? pulse.ring?.from_s ?? record.from;
  const ends = [pulse.ring?.to_s, pulse.spark?.extinction_s, pulse.spark?.onset_s, pulse.peakTime_s];
  const shown = Math.max(...ends.map((end) => (end ?? start) - start));
  const next = reading.pulses.find((other) => (other.switchOffTime_s ?? -Infinity) > start);
  const nextOn = next ? (next.switchOffTime_s ?? record.to) - (next.dwell_s ?? 0) : record.to;
  const period = 1 / (pulse.ring?.modes[0]?.frequency_Hz.value ?? Infinity);
  const length = Math.max(shown * 1.5, period * 9) || (record.to - record.from) / 2;
  const to = Math.min(start + length, Math.max(nextOn, start + shown), record.to);
  return { from: Math.max(start - (to - start) * 0.12, record.from), to };
}

/** Zoomed by `factor` about `at`, never beyond the record, never below eight samples. */
export function zoomed(span: Span, factor: number, at: number, limit: Span, step_s: number): Span {
  const width = clamp((span.to - span.from) * factor, step_s * 8, limit.to - limit.from);
  const share = (at - span.from) / (span.to - span.from);
  return moved({ from: at - share * width, to: at + (1 - share) * width }, 0, limit);
}

export function moved(span: Span, by: number, limit: Span): Span {
  const width = Math.min(span.to - span.from, limit.to - limit.from);
  const from = clamp(span.from + by, limit.from, limit.to - width);
  return { from, to: from + width };
}
