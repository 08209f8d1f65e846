import type { Capture } from "../../../analysis/capture.ts";
import type { TraceWindow } from "../../bridge.ts";
import { CallError } from "../failure.ts";
import { extremes, type Pyramid } from "./pyramid.ts";

export interface TraceRequest {
  channel: number;
  from_s: number | null;
  to_s: number | null;
  pixels: number;
}

/**
 * The stretch of a channel that a window shows: at most `pixels` slots, each with its lowest and
 * highest sample, so that no spike is lost. With fewer samples than pixels every sample is a slot.
 * One sample beyond either edge is included, so that the line runs to the edge of the window.
 */
export function traceWindow(capture: Capture, pyramid: Pyramid, request: TraceRequest): TraceWindow {
  const channel = channelOf(capture, request.channel);
  const { start_s, step_s, samples } = capture.timebase;
  // Without an interval the axis counts samples: the question beside it is what gives it seconds.
  const [start, step] = step_s === null ? [0, 1] : [start_s, step_s];
  const sampleAt = (time: number) => (time - start) / step;
  const first = clamp(Math.floor(request.from_s === null ? 0 : sampleAt(request.from_s)), 0, samples - 1);
  const last = clamp(
    Math.ceil(request.to_s === null ? samples - 1 : sampleAt(request.to_s)),
    first,
    samples - 1,
  );
  const count = last - first + 1;
  const slots = Math.min(count, request.pixels);

  const window: TraceWindow = {
    channel: channel.position,
    name: channel.name,
    unit: channel.unit,
    axis: step_s === null ? "samples" : "seconds",
    from_s: start + first * step,
    to_s: start + last * step,
    time_s: [],
    low: [],
    high: [],
  };
  for (let slot = 0; slot < slots; slot++) {
    const from = first + Math.floor((slot * count) / slots);
    const to = first + Math.floor(((slot + 1) * count) / slots);
    const range = extremes(pyramid, from, to);
    window.time_s.push(start + ((from + to - 1) / 2) * step);
    window.low.push(range?.low ?? null);
    window.high.push(range?.high ?? null);
  }
  return window;
}

function channelOf(capture: Capture, position: number) {
  const channel = capture.channels.find((candidate) => candidate.position === position);
  if (channel) return channel;
  const there = capture.channels.map((candidate) => candidate.position).join(", ");
  throw new CallError("no-such-channel", `the capture has no channel ${position}; it has ${there}`);
}

const clamp = (value: number, low: number, high: number) => Math.min(high, Math.max(low, value));
