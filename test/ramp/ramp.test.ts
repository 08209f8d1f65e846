import { describe, expect, it } from "vitest";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, scoped } from "../reference/captures.ts";
import { seeded } from "../reference/random.ts";
import { runBench } from "../reference/switched-coil.ts";
import { scoreRamps } from "../reference/value-score.ts";

const random = seeded(5);
const setup = { supply_V: 12, switchOnVoltage_V: 0.2, capacitor_F: 330e-9 };

/** At 40 dB: noise a hundredth of the current's root mean square scale, 12 bits. */
function ramp(L: number, R: number, dwell_s: number, saturation_A?: number, stated: object = setup) {
  const trace = runBench(
    { inductance_H: L, resistance_ohm: R, capacitance_F: 330e-9, supply_V: 12, saturation_A },
    [[0.4e-3, 0.4e-3 + dwell_s]],
    Math.round((dwell_s + 3e-3) / 4e-6),
    4e-6,
    20,
  );
  const current = scoped("coil-current", "A", trace.current_A, random, { bits: 12, noise_lsb: 10 });
  const capture = captureOf([scoped("switch-node", "V", trace.node_V, random), current], 4e-6);
  return { trace, pulse: readCapture(capture, stated).reading.pulses[0] };
}

describe("the ramp", () => {
  it("12 V, 4 Ω and 7.5 mH: within 1 % of 3 A after 8.6 ms, just under 10 ms (common practice, no source; 4.6 L/R)", () => {
    const { trace } = ramp(7.5e-3, 4, 10e-3);
    const at = (t: number) => trace.current_A[Math.round((0.4e-3 + t) / 4e-6)] / (11.8 / 4);
    expect(at(8.65e-3)).toBeGreaterThan(0.99);
    expect(at(8.3e-3)).toBeLessThan(0.99);
  });

  it.each([
    [7.5e-3, 4, 8.6e-3],
    [7.5e-3, 4, 4e-3],
    [2e-3, 0.5, 6e-3],
  ])("L %f H and R %f Ω from a dwell of %f s: within 0.5 and 1 %, and within 3 u", (L, R, dwell) => {
    const { inductance_H, resistance_ohm, timeConstant_s } = ramp(L, R, dwell).pulse.ramp!;
    expect(Math.abs(inductance_H!.value / L - 1)).toBeLessThan(0.005);
    expect(Math.abs(resistance_ohm!.value / R - 1)).toBeLessThan(0.01);
    expect(Math.abs(timeConstant_s!.value * (R / L) - 1)).toBeLessThan(0.01);
    expect(Math.abs(resistance_ohm!.value - R)).toBeLessThan(3.5 * resistance_ohm!.u);
  });

  it.each([
    [7.5e-3, 1.2, 7e-3, 3],
    [7.5e-3, 1.2, 9e-3, 4],
  ])(
    "a saturating core (L %f H, R %f Ω, dwell %f s, knee %f A): the current where L is down by 20 %% within 2 %%",
    (L, R, dwell, knee) => {
      const { ramp: reading } = ramp(L, R, dwell, knee).pulse;
      // L(i) = L0/(1 + (i/knee)⁴) is 0.8·L0 at knee·0.25^(1/4).
      expect(Math.abs(reading!.saturationCurrent_A!.value / (knee * 0.25 ** 0.25) - 1)).toBeLessThan(0.02);
      expect(Math.abs(reading!.resistance_ohm!.value / R - 1)).toBeLessThan(0.01);
      expect(reading!.curve!.inductance_H.at(-1)!).toBeLessThan(0.5 * L);
    },
  );

  it("winding resistance at 20 °C: 10 % warmer copper by 25.4 K (IEC 60028), less what is outside", () => {
    const stated = { ...setup, windingTemperature_C: 20 + 0.1 / 0.00393, externalResistance_ohm: 0.5 };
    const { resistance_ohm, resistance20_ohm } = ramp(7.5e-3, 4, 8.6e-3, undefined, stated).pulse.ramp!;
    expect(resistance20_ohm!.value).toBeCloseTo((resistance_ohm!.value - 0.5) / 1.1, 6);
  });

  it("without the supply L and R are null with the reason, time constant and currents stay", () => {
    const { pulse } = ramp(7.5e-3, 4, 8.6e-3, undefined, {});
    expect(pulse.ramp).toMatchObject({ inductance_H: null, resistance_ohm: null });
    expect(pulse.ramp!.reason).toContain("supply");
    expect(pulse.ramp!.timeConstant_s!.value).toBeCloseTo(7.5e-3 / 4, 4);
    expect(pulse.ramp!.finalCurrent_A!.value).toBeCloseTo(2.92, 1);
  });
});

// Truth: the values the ramps are integrated from.
it("ramps of many coils, half of them into saturation: L, R and saturation current", () => {
  const { inductance, resistance, saturation, bound } = scoreRamps(24, 1);
  const median = ({ relative }: { relative: number[] }) => relative[relative.length >> 1];
  expect(median(inductance)).toBeLessThan(0.005);
  expect(median(resistance)).toBeLessThan(0.01);
  expect(median(saturation)).toBeLessThan(0.02);
  // At the bound by the Fisher matrix; a root mean square of n values scatters by 1/√(2n).
  expect(bound.rms).toBeLessThan(1.05 * (1 + 3 / Math.sqrt(2 * 24)));
  expect(inductance.missing + resistance.missing + saturation.missing).toBe(0);
  expect(inductance.relative.at(-1)).toBeLessThan(0.02);
});

// Truth: ½LI² into the capacitor, about the supply (closed form, lossless).
it("where the record ends before the ring, the ramp's L and the stated capacitor give the kick to expect", () => {
  const bench = { inductance_H: 7.5e-3, resistance_ohm: 1, capacitance_F: 330e-9, supply_V: 12 };
  const trace = runBench(bench, [[0.4e-3, 3.4e-3]], 880, 4e-6, 20);
  const channels = [
    scoped("switch-node", "V", trace.node_V, random),
    scoped("coil-current", "A", trace.current_A, random, { bits: 12 }),
  ];
  const [pulse] = readCapture(captureOf(channels, 4e-6), setup).reading.pulses;
  expect(pulse.inductance_H).toBeNull();
  const lossless_V = 12 + Math.hypot(trace.current_A[849] * Math.sqrt(7.5e-3 / 330e-9), 11.8);
  // A dwell of 0.4 L/R tells L to about 1 %.
  expect(Math.abs(pulse.expectedPeak_V! / lossless_V - 1)).toBeLessThan(0.01);
});
