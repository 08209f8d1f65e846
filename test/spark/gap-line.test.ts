import { describe, expect, it } from "vitest";
import { airDensity, gapLine, pointBreakdown_V, sphereBreakdown_V } from "../../analysis/spark/gap-line.ts";

describe("expected breakdown of the stated gap", () => {
  it("Peek within 3 % of the sphere-gap table of IEC 60052 (values from memory): 5 cm spheres", () => {
    expect(Math.abs(sphereBreakdown_V(0.01, 0.05, 1) / 32.0e3 - 1)).toBeLessThan(0.03);
    expect(Math.abs(sphereBreakdown_V(0.005, 0.05, 1) / 17.4e3 - 1)).toBeLessThan(0.03);
  });

  it("points: about 40 kV over 25 mm (common practice, no source)", () => {
    expect(pointBreakdown_V(0.025, 1)).toBeCloseTo(40e3, -2);
  });

  it("relative air density: 1 at 20 °C and 101.3 kPa, 0.95 at 35 °C (293/308)", () => {
    expect(airDensity(20, 101_300)).toBeCloseTo(1, 12);
    expect(airDensity(35, 101_300)).toBeCloseTo(293 / 308, 12);
  });

  it("is null where distance, electrodes or the spheres' diameter are not stated", () => {
    expect(gapLine({})).toBeNull();
    expect(gapLine({ gap: { distance_m: 0.01 } })).toBeNull();
    expect(gapLine({ gap: { distance_m: 0.01, electrodes: "spheres" } })).toBeNull();
    expect(gapLine({ gap: { distance_m: 0.01, electrodes: "points" } })?.voltage_V).toBeCloseTo(16_000, 6);
  });
});
