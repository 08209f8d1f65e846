/** Routes, spans of a record and drawn pulses. */
import { describe, expect, it } from "vitest";
import type { CaptureReading, PulseReading } from "../../analysis/reading-format.ts";
import type { PulseRow } from "../../app/bridge.ts";
import { axisTicks, extentOf } from "../../renderer/coil/axis.ts";
import { glyphPath } from "../../renderer/draw/glyph.ts";
import { inkPath } from "../../renderer/draw/ink.ts";
import { linear, ticks } from "../../renderer/draw/scale.ts";
import { moved, pulseSpan, recordSpan, zoomed } from "../../renderer/pulse/window.ts";
import { nextPulse } from "../../renderer/run/next-pulse.ts";
import { keyText } from "../../renderer/state/keys.ts";
import { parseRoute, pathOf, type Route } from "../../renderer/state/route.ts";

describe("routes", () => {
  it.each<Route>([
    { view: "book" },
    { view: "run", run: 14 },
    { view: "pulse", run: 14, capture: 9, pulse: 0 },
    { view: "coil", coil: "Coil #3 / “50 %”" },
    { view: "help" },
    { view: "beside", first: 3, second: 14 },
  ])("$view leads back to itself", (route) => expect(parseRoute(pathOf(route))).toEqual(route));

  it("anything else is the book", () => {
    for (const path of ["", "/run/x", "/pulse/1/2", "/nowhere", "/run/1/2", "/beside/1"])
      expect(parseRoute(path)).toEqual({ view: "book" });
    expect(parseRoute("/coil/%E0%A4%A")).toEqual({ view: "coil", coil: "%E0%A4%A" });
  });
});

const pulseAt = (index: number, switchOffTime_s: number) =>
  ({
    index,
    switchOffTime_s,
    dwell_s: 0.002,
    ring: null,
    spark: null,
    peakTime_s: switchOffTime_s + 1e-4,
  }) as PulseReading;

describe("the shown stretch of a record", () => {
  const limit = { from: -1, to: 9 };

  it("keeps the place under the pointer when zooming, and stays inside the record", () => {
    const span = zoomed({ from: 0, to: 4 }, 0.5, 1, limit, 0.001);
    expect(span).toEqual({ from: 0.5, to: 2.5 });
    expect(zoomed(span, 100, 1, limit, 0.001)).toEqual(limit);
    const least = zoomed(span, 1e-9, 1, limit, 0.001);
    expect(least.to - least.from).toBeCloseTo(0.008, 12);
    expect(moved({ from: 7, to: 9 }, 5, limit)).toEqual({ from: 7, to: 9 });
  });

  it("shows a pulse up to the next one's conduction", () => {
    const pulses = [pulseAt(0, 0.01), pulseAt(1, 0.02)];
    const reading = { timebase: { start_s: 0, step_s: 1e-6, samples: 30_001 }, pulses } as CaptureReading;
    const span = pulseSpan(reading, pulses[0]);
    expect(span.from).toBeLessThan(0.01);
    expect(span.to).toBeLessThanOrEqual(0.018);
    expect(recordSpan(reading)).toEqual({ from: 0, to: 0.03 });
  });
});

describe("drawing", () => {
  const unit = linear(0, 10, 0, 10);

  it("lifts the pen over samples that are missing", () => {
    expect(inkPath({ time_s: [0, 1, 2], low: [1, null, 3], high: [1, null, 3] }, unit, unit)).toBe(
      "M0 1M2 3",
    );
  });

  it("enters a slot at its nearer end", () => {
    expect(inkPath({ time_s: [0, 1], low: [0, 4], high: [2, 9] }, unit, unit)).toBe("M0 0V2L1 4V9");
    expect(inkPath({ time_s: [0, 1], low: [0, 1], high: [9, 8] }, unit, unit)).toBe("M0 0V9L1 8V1");
  });

  it("draws no number that is none", () => {
    const row = { sketch: [1, 0.5, Number.NaN, 0.1], sketchOnset: null };
    const broken = { sketch: [], sketchOnset: 0.5 };
    const box = { x: 0, y: 20, width: 15, height: 18 };
    for (const each of [row, broken]) expect(glyphPath({ ...each } as never, box)).not.toContain("NaN");
  });

  it("ticks are round and inside", () => {
    expect(ticks(-0.3, 1.1, 4)).toEqual([0, 0.5, 1]);
    expect(ticks(5, 5, 4)).toEqual([]);
  });

  it("keys are named as they are printed on them", () => {
    expect(keyText("shift+arrowleft")).toBe("Shift ←");
    expect(keyText("ctrl+z")).toBe("Ctrl Z");
    expect(keyText("+")).toBe("+");
  });
});

describe("the next pulse to look at", () => {
  const rows = ["spark", "unclear", "spark", "no-spark", "unclear"].map(
    (verdict) => ({ verdict, ruled: null }) as PulseRow,
  );
  it("is the nearest of its kind after the marked one, then round from the beginning", () => {
    expect(nextPulse(rows, -1, "unclear")).toBe(1);
    expect(nextPulse(rows, 1, "unclear")).toBe(4);
    expect(nextPulse(rows, 4, "unclear")).toBe(1);
  });
  it("is none where the marked one is the only one, and where there are no pulses", () => {
    expect(nextPulse(rows, 3, "no-spark")).toBeNull();
    expect(nextPulse([], -1, "unclear")).toBeNull();
  });
});

describe("a curve's axis", () => {
  const curve = { x: [1e-8, 2e-6, null], y: [12, null, 480] } as never;
  it("covers all curves with some air, in powers of ten where it is logarithmic", () => {
    expect(extentOf([curve], "y", false)[0]).toBeLessThan(12);
    expect(extentOf([curve], "y", false)[1]).toBeGreaterThan(480);
    expect(extentOf([curve], "x", true)[0]).toBeCloseTo(-8, 1);
  });
  it("has ticks in the format of all numbers", () => {
    expect(axisTicks([0, 1100], "V", false).ticktext).toContain("1\u00a0kV");
    expect(axisTicks([-8.1, -5.7], "F", true).ticktext).toEqual(["10\u00a0nF", "100\u00a0nF", "1\u00a0µF"]);
    expect(axisTicks([-8.1, -6.9], "F", true).ticktext).toEqual(
      ["10", "20", "50", "100"].map((number) => `${number}\u00a0nF`),
    );
  });
});
