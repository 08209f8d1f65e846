import type { Capture, Channel } from "../../../analysis/capture.ts";
import type { CaptureReading, RingReading } from "../../../analysis/reading-format.ts";
import type { RingPicture } from "../../bridge.ts";
import { ringModel } from "./ring-model.ts";

type Model = NonNullable<ReturnType<typeof ringModel>>;

/** How long the fitted ring is continued beyond its window, in window lengths and in decay times. */
const continued = { windows: 1, decayTimes: 5 };

/** The fitted ring against the samples it was fitted to; null where no ring was fitted. */
export function ringPicture(
  capture: Capture,
  reading: CaptureReading,
  pulseIndex: number,
  pixels: number,
): RingPicture | null {
  const pulse = reading.pulses.find((candidate) => candidate.index === pulseIndex);
  const ring = pulse?.ring;
  const model = ring ? ringModel(ring) : null;
  const channel = capture.channels.find((candidate) => candidate.name === ring?.channel);
  if (!ring || !model || !channel || capture.timebase.step_s === null) return null;

  const window = samplesOf(capture, ring);
  const end = window.to;
  const next = reading.pulses.find((other) => other.index === pulseIndex + 1);
  const horizon = Math.min(
    end + continued.windows * (end - window.from),
    window.from + continued.decayTimes / model.decay_per_s,
    next?.switchOffTime_s ?? Infinity,
  );
  const grid = (from: number, to: number) => {
    const points = Math.max(2, Math.min(pixels, Math.ceil(((to - from) / model.period_s) * 60)));
    return Array.from({ length: points }, (_, i) => from + ((to - from) * i) / (points - 1));
  };
  return {
    fitted: curve(grid(window.from, end), model.value),
    expected: horizon > end ? curve(grid(end, horizon), model.value) : { time_s: [], value: [] },
    residuals: residuals(channel, model, window, pixels),
    peaks: peaks(capture, channel, model, window),
    envelope: curve(grid(window.from, Math.max(end, horizon)), model.envelope),
    offset: ring.offset,
  };
}

const curve = (time_s: number[], of: (time: number) => number) => ({ time_s, value: time_s.map(of) });

interface Stretch {
  from: number;
  to: number;
  first: number;
  last: number;
  time(sample: number): number;
}

function samplesOf(capture: Capture, ring: RingReading): Stretch {
  const { start_s, samples } = capture.timebase;
  const step = capture.timebase.step_s as number;
  const [from, to] = [ring.from_s as number, ring.to_s ?? start_s + (samples - 1) * step];
  return {
    from,
    to,
    first: Math.max(0, Math.ceil((from - start_s) / step - 1e-6)),
    last: Math.min(samples - 1, Math.floor((to - start_s) / step + 1e-6)),
    time: (sample) => start_s + sample * step,
  };
}

/** Sample less fitted ring, lowest and highest of each slot; null where a slot holds no number. */
function residuals(channel: Channel, model: Model, window: Stretch, pixels: number) {
  const count = window.last - window.first + 1;
  const slots = Math.max(0, Math.min(count, pixels));
  const drawn: RingPicture["residuals"] = { time_s: [], low: [], high: [] };
  for (let slot = 0; slot < slots; slot++) {
    const from = window.first + Math.floor((slot * count) / slots);
    const to = window.first + Math.floor(((slot + 1) * count) / slots);
    let [low, high] = [Infinity, -Infinity];
    for (let i = from; i < to; i++) {
      const residual = channel.samples[i] - model.value(window.time(i));
      if (residual < low) low = residual;
      if (residual > high) high = residual;
    }
    drawn.time_s.push(window.time((from + to - 1) / 2));
    drawn.low.push(low <= high ? low : null);
    drawn.high.push(low <= high ? high : null);
  }
  return drawn;
}

/** The largest |sample − level| of every half cycle: between two crossings of the level. */
function peaks(capture: Capture, channel: Channel, model: Model, window: Stretch) {
  const found = { time_s: [] as number[], value: [] as number[] };
  const half_s = model.period_s / 2;
  const end = Math.min(
    capture.timebase.samples - 1,
    window.last + Math.round((window.last - window.first) * continued.windows),
  );
  let [best, bestAt, sign, since] = [0, -1, 0, window.first];
  const close = (at: number) => {
    // A crossing sooner than a quarter cycle after the last is noise about the level.
    if (bestAt >= 0 && window.time(at) - window.time(since) > half_s / 2) {
      found.time_s.push(window.time(bestAt));
      found.value.push(best);
    }
    [best, bestAt, since] = [0, -1, at];
  };
  for (let i = window.first; i <= end; i++) {
    const deviation = channel.samples[i] - model.level;
    if (Number.isNaN(deviation)) continue;
    if (Math.sign(deviation) !== sign && deviation !== 0) {
      close(i);
      sign = Math.sign(deviation);
    }
    if (Math.abs(deviation) > best) [best, bestAt] = [Math.abs(deviation), i];
  }
  close(end + 1);
  return found;
}
