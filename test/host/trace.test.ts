import { describe, expect, it } from "vitest";
import { buildPyramid, extremes } from "../../app/host/view/pyramid.ts";
import { traceWindow } from "../../app/host/view/trace.ts";
import { captureOf } from "./captures.ts";
import { seeded } from "../reference/random.ts";

const whole = { channel: 0, from_s: null, to_s: null, pixels: 500 };
const noise = (count: number, seed = 1) => {
  const random = seeded(seed);
  return Float64Array.from({ length: count }, () => random.normal());
};

describe("extremes of a stretch", () => {
  it("are exactly those of a plain scan, for any stretch and with gaps of no number", () => {
    const samples = noise(20_000).map((value, i) => (i % 97 === 0 || (i > 5000 && i < 5200) ? NaN : value));
    const pyramid = buildPyramid(samples);
    const random = seeded(2);
    for (let trial = 0; trial < 500; trial++) {
      const [a, b] = [random.uniform(), random.uniform()].map((x) => Math.floor(x * 20_001));
      const [from, to] = [Math.min(a, b), Math.max(a, b)];
      const numbers = [...samples.subarray(from, to)].filter((value) => !Number.isNaN(value));
      const scan = numbers.length === 0 ? null : { low: Math.min(...numbers), high: Math.max(...numbers) };
      expect(extremes(pyramid, from, to)).toEqual(scan);
    }
  });

  it("are null where there is no number, and for no samples", () => {
    const pyramid = buildPyramid(new Float64Array(1000).fill(NaN));
    expect(extremes(pyramid, 0, 1000)).toBeNull();
    expect(extremes(buildPyramid(new Float64Array(0)), 0, 0)).toBeNull();
  });
});

describe("a trace window", () => {
  it("loses no spike, however many samples a pixel stands for", () => {
    const samples = new Float64Array(1_000_000);
    samples[765_432] = 400;
    samples[12_345] = -300;
    const { low, high, time_s } = traceWindow(captureOf({ A: samples }), buildPyramid(samples), whole);
    expect(time_s).toHaveLength(500);
    expect(Math.max(...(high as number[]))).toBe(400);
    expect(Math.min(...(low as number[]))).toBe(-300);
  });

  it("shows every sample at its own time when there are fewer than pixels", () => {
    const samples = Float64Array.of(1, 2, NaN, 4);
    const window = traceWindow(captureOf({ A: samples }), buildPyramid(samples), whole);
    expect(window.time_s).toEqual([0, 1e-6, 2e-6, 3e-6]);
    expect(window.low).toEqual([1, 2, null, 4]);
    expect(window.high).toEqual(window.low);
    expect([window.name, window.unit, window.axis]).toEqual(["A", "V", "seconds"]);
  });

  it("reaches to the sample beyond either edge and never beyond the record", () => {
    const samples = noise(1000);
    const capture = captureOf({ A: samples }, { step_s: 1e-3 });
    const pyramid = buildPyramid(samples);
    const inner = traceWindow(capture, pyramid, { ...whole, from_s: 0.1005, to_s: 0.2005 });
    expect([inner.from_s, inner.to_s]).toEqual([0.1, 0.201]);
    const outside = traceWindow(capture, pyramid, { ...whole, from_s: -5, to_s: 5 });
    expect([outside.from_s, outside.to_s]).toEqual([0, 0.999]);
    const beyond = traceWindow(capture, pyramid, { ...whole, from_s: 7, to_s: 8 });
    expect(beyond.time_s).toEqual([0.999]);
  });

  it("counts samples where the interval is unknown", () => {
    const samples = noise(10);
    const window = traceWindow(captureOf({ A: samples }, { step_s: null }), buildPyramid(samples), whole);
    expect([window.axis, window.to_s, window.time_s.at(-1)]).toEqual(["samples", 9, 9]);
  });

  it("names the channels there are when asked for another", () => {
    const samples = noise(10);
    const ask = () => traceWindow(captureOf({ A: samples }), buildPyramid(samples), { ...whole, channel: 5 });
    expect(ask).toThrow("the capture has no channel 5; it has 0");
  });
});
