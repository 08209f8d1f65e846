import { describe, expect, it } from "vitest";
import { expectedInductance, ringDoubt } from "../../analysis/coil/plausible.ts";

const figure = (value: number) => ({ value, u: 0.01 * value });
const slowKick = { kick: { index: 140, value: 300, clipped: false }, switchOff: 100, period: 160 };

describe("whether the ring can be the coil's own", () => {
  it("agrees with the ramp: no doubt", () => {
    expect(ringDoubt(figure(7.2e-3), figure(7.5e-3), slowKick, false)).toBeNull();
  });

  it("a ring far faster than the ramp promises is an arc's: refused", () => {
    expect(ringDoubt(figure(0.4e-3), figure(7.5e-3), slowKick, false)).toMatchObject({
      refused: true,
      tooFast: true,
    });
  });

  it("too few samples and too slow: refused as an alias", () => {
    const few = { ...slowKick, period: 4.5 };
    expect(ringDoubt(figure(30e-3), figure(7.5e-3), few, false)!.reason).toContain("alias");
  });

  it("an unstated secondary may double the inductance without doubt, a missing one may not", () => {
    expect(ringDoubt(figure(14e-3), figure(7.5e-3), slowKick, true)).toBeNull();
    expect(ringDoubt(figure(14e-3), figure(7.5e-3), slowKick, false)).toMatchObject({ refused: false });
  });

  it("nothing known of the coil: only a kick that rises within two samples is doubted", () => {
    expect(ringDoubt(null, null, slowKick, false)).toBeNull();
    const steep = { ...slowKick, kick: { index: 101, value: 300, clipped: false } };
    expect(ringDoubt(null, null, steep, false)!.reason).toContain("alias");
  });

  it("an unsure ramp says nothing; a known inductance counts beside a capacitor only", () => {
    expect(expectedInductance({ value: 1, u: 0.5 }, {})).toBeNull();
    expect(expectedInductance(null, { knownInductance_H: 7.5e-3 })).toBeNull();
    expect(expectedInductance(null, { knownInductance_H: 7.5e-3, capacitor_F: 1e-7 })!.value).toBe(7.5e-3);
  });
});
