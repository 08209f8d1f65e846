import { describe, expect, it } from "vitest";
import type { CaptureReading, PulseReading, RingMode } from "../../analysis/reading-format.ts";
import { ringPicture } from "../../app/host/view/ring-picture.ts";
import { captureOf } from "./captures.ts";

/** Textbook ring y = c + A·exp(−αt)·cos(2πft + φ), written out here as the reference. */
const ring = { f: 3420, alpha: 400, amplitude: 250, phase: 0.7, level: 12, from_s: 1e-4 };
const truth = (time: number) => {
  const t = time - ring.from_s;
  return (
    ring.level + ring.amplitude * Math.exp(-ring.alpha * t) * Math.cos(2 * Math.PI * ring.f * t + ring.phase)
  );
};

const bound = (time: number) => ring.amplitude * Math.exp(-ring.alpha * (time - ring.from_s));
const exactly = (value: number) => ({ value, u: 0 });
const mode: RingMode = {
  frequency_Hz: exactly(ring.f),
  decay_per_s: exactly(ring.alpha),
  q: exactly((Math.PI * ring.f) / ring.alpha),
  amplitude_V: exactly(ring.amplitude),
};

function readingOf(modes: RingMode[], to_s: number | null = 4e-3): CaptureReading {
  const pulse = {
    index: 0,
    switchOffTime_s: 5e-5,
    ring: {
      channel: "A",
      unit: "V",
      from_s: ring.from_s,
      to_s,
      modes,
      offset: ring.level,
      phases_rad: [ring.phase],
      quality: "good",
    },
  } as unknown as PulseReading;
  return { pulses: [pulse] } as unknown as CaptureReading;
}

const samples = Float64Array.from({ length: 10_000 }, (_, i) => truth(i * 1e-6));
const capture = captureOf({ A: samples });
const picture = ringPicture(capture, readingOf([mode]), 0, 800);

describe("the picture of a ring", () => {
  it("draws the fitted ring over its window and goes on beyond it", () => {
    const { fitted, expected } = picture!;
    expect(fitted.time_s[0]).toBeCloseTo(1e-4, 9);
    expect(fitted.time_s.at(-1)).toBeCloseTo(4e-3, 9);
    for (const [i, time] of fitted.time_s.entries()) expect(fitted.value[i]).toBeCloseTo(truth(time), 9);
    expect(expected.time_s[0]).toBeCloseTo(4e-3, 9);
    expect(expected.time_s.length).toBeGreaterThan(10);
    for (const [i, time] of expected.time_s.entries()) expect(expected.value[i]).toBeCloseTo(truth(time), 9);
  });

  it("has residuals of nothing where the samples are the ring, and of what was added to it", () => {
    expect(Math.max(...picture!.residuals.high.map(Number))).toBeLessThan(1e-9);
    const disturbed = samples.slice();
    disturbed[2000] += 5;
    const { residuals } = ringPicture(captureOf({ A: disturbed }), readingOf([mode]), 0, 800)!;
    expect(Math.max(...residuals.high.map(Number))).toBeCloseTo(5, 9);
  });

  it("has its peaks half a cycle apart and under the envelope", () => {
    const { peaks, envelope } = picture!;
    const gaps = peaks.time_s.slice(2).map((time, i) => time - peaks.time_s[i + 1]);
    for (const gap of gaps) expect(gap).toBeCloseTo(1 / (2 * ring.f), 5);
    for (const [i, time] of peaks.time_s.entries())
      expect(peaks.value[i]).toBeLessThanOrEqual(bound(time) + 1e-9);
    for (const [i, time] of envelope.time_s.entries()) expect(envelope.value[i]).toBeCloseTo(bound(time), 9);
  });

  it("is null where no ring was fitted, no such pulse is there or the interval is unknown", () => {
    expect(ringPicture(capture, readingOf([]), 0, 800)).toBeNull();
    expect(ringPicture(capture, readingOf([mode]), 1, 800)).toBeNull();
    expect(ringPicture(captureOf({ A: samples }, { step_s: null }), readingOf([mode]), 0, 800)).toBeNull();
  });
});
